import { describe, expect, it } from 'vitest';
import { hillPicture } from '../../src/report/charts/hill-picture.ts';
import { laneLooks } from '../../src/report/charts/lane-looks.ts';
import { laneChart, lanesChart } from '../../src/report/charts/lanes.ts';
import { readSummary } from '../../src/report/compare/read-summary.ts';
import { dataFiles } from '../../src/report/data/data-files.ts';
import { summaryJson } from '../../src/report/data/summary.ts';
import { viewOf } from '../../src/report/model/view.ts';
import { FILE_PAINT } from '../../src/report/paint.ts';
import { renderReport } from '../../src/report/render-report.ts';
import type { RunResult } from '../../src/run/run-result.ts';
import type { RideResult } from '../../src/study/ride-figures.ts';
import { fixtureResult } from './fixture.ts';

/** A row each 200 m at 15 m/s, with a gap of 400 m in the middle and a throttle on the first half. */
function ridden(name: string, length: number): RideResult {
  const places = Array.from({ length: Math.floor(length / 200) }, (_, i) => i * 200).filter(
    (x) => x !== 6000,
  );
  const distance = Float64Array.from(places);
  return {
    name,
    size: places.length,
    distance,
    time: distance.map((x) => x / 15),
    speed: new Float64Array(places.length).fill(15),
    setSpeed: new Float64Array(places.length).fill(60 / 3.6),
    throttle: distance.map((x) => (x < 6000 ? 0.4 : Number.NaN)),
    gaps: [{ from: 5800, to: 6200, reason: 'no fix for 26 s' }],
    laidBy: 'position',
    rmsOffset: 1.5,
    pauses: [{ at: 3000, duration: 130, reason: 'stood' }],
    covered: length - 400,
    speedFrom: 'way',
    leftOut: 0,
    figures: { time_s: 600, worst_low_kmh: -6, throttle_mean_pct: { none: 'the log has no throttle' } },
    meanSpeed: 15,
    worstLowAt: 1000,
    worstHighAt: null,
    beside: [{ candidate: 'pi-firm', figures: { time_s: 540, worst_low_kmh: -1 }, meanSpeed: 16.6 }],
  };
}

const plain = fixtureResult({ lengthKm: 28 });
const result: RunResult = {
  ...plain,
  loggedRides: [ridden('monday', 28_000), { ...ridden('tuesday', 28_000), throttle: null }],
};
const view = viewOf(result, 'kmh');
const canvas = { id: 'x', paint: FILE_PAINT, width: 980, narrow: false };
const count = (text: string, what: string): number => text.split(what).length - 1;

describe('a logged ride in the report', () => {
  it('brings a lane of speed, which nobody else asks for', () => {
    expect(laneLooks(view).map(({ title }) => title)).toContain('speed');
    expect(laneLooks(viewOf(plain, 'kmh')).map(({ title }) => title)).not.toContain('speed');
  });

  it('has a line with marks of its own in each lane that it can fill, broken at the gap', () => {
    const marks = Object.fromEntries(
      laneLooks(view).map((look) => {
        const svg = laneChart(view, canvas, look).toString();
        const rings = count(svg, 'a3,3 0 1 0 6,0');
        const paths =
          svg.match(new RegExp(`<path d="M[^"]*" fill="none"[^>]*stroke="${FILE_PAINT.ride}"`, 'g')) ?? [];
        return [
          look.title,
          { rings, lines: paths.filter((path) => count(path, 'L') + count(path, 'M') > 0).length },
        ];
      }),
    );
    // Two rides of two stretches each, and a sign at the end of each: only one of them has a throttle, on one stretch.
    expect(marks.speed!.lines).toBe(6);
    expect(marks['speed error']!.lines).toBe(6);
    expect(marks.throttle!.lines).toBe(2);
    expect(marks.speed!.rings).toBeGreaterThan(5);
    expect(marks['wheel power']!.lines).toBe(0);
  });

  it('is told to those who do not see it', () => {
    expect(lanesChart(view, canvas).toString()).toContain('monday, logged: speed error from −6.0\u00a0km/h');
  });

  it('is drawn on the hills that it passes, from its own time at the foot', () => {
    const hill = result.hills[0]!;
    const svg = hillPicture(view, hill, canvas).toString();
    expect(count(svg, FILE_PAINT.ride)).toBeGreaterThan(
      count(hillPicture(viewOf(plain, 'kmh'), hill, canvas).toString(), FILE_PAINT.ride),
    );
    const later = { ...hill, from: 5900, to: 6100 };
    // No time at a foot in the gap.
    expect(count(hillPicture(view, later, canvas).toString(), FILE_PAINT.ride)).toBe(0);
  });

  it('stands beside the candidates over the stretches of its log, and says what it is not', () => {
    const page = renderReport(result, { units: 'kmh' });
    for (const words of [
      'Logged ride monday',
      'A logged ride is no candidate',
      'stood at km\u00a03.00 for 2\u00a0min 10\u00a0s',
      'km\u00a05.80 to 6.20 (no fix for 26 s)',
      'lie 1.5\u00a0m rms off the road',
    ])
      expect(page).toContain(words);
  });

  it('has a file of its own and an entry in the summary, which a comparison reads over', () => {
    const files = dataFiles(result);
    const csv = files.find(({ name }) => name === 'ride-monday.csv')!.text.split('\r\n');
    expect(csv[0]).toBe('time_s,distance_m,set_speed_kmh,speed_kmh,speed_error_kmh,throttle_pct');
    expect(csv[1]).toBe('0.000,0.00,60.000,54.000,-6.000,40.00');
    expect(csv.at(-2)).toMatch(/,54\.000,-6\.000,$/);
    const text = summaryJson(
      result,
      files.map(({ name }) => name),
    );
    const { logged_rides: rides } = JSON.parse(text);
    expect(rides[0]).toMatchObject({
      name: 'monday',
      laid_by: 'position',
      mean_speed_kmh: 54,
      time_s: 600,
      throttle_mean_pct: null,
      throttle_mean_pct_reason: 'the log has no throttle',
      worst_low_at_km: 1,
      gaps: [{ from_km: 5.8, to_km: 6.2, reason: 'no fix for 26 s' }],
      pauses: [{ at_km: 3, duration_s: 130, reason: 'stood' }],
    });
    const read = { ...JSON.parse(text), schema_version: '1.1' };
    expect(readSummary(JSON.stringify(read), 'summary.json').candidates.length).toBe(
      result.candidates.length,
    );
    expect(JSON.parse(summaryJson(plain, []))).not.toHaveProperty('logged_rides');
  });
});
