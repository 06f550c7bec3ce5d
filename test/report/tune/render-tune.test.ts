import { beforeAll, expect, test } from 'vitest';
import { proposalsCsv } from '../../../src/report/tune/proposal-table.ts';
import { renderTune } from '../../../src/report/tune/render-tune.ts';
import { tuneAnswer } from '../../../src/report/tune/tune-answer.ts';
import { tuneJson } from '../../../src/report/tune/tune-json.ts';
import { tuneView } from '../../../src/report/tune/tune-view.ts';
import { tuneCase } from '../../../src/run/tune-case.ts';
import type { TuneResult } from '../../../src/run/tune-result.ts';

const TEXT = `title: "<b>Gains & hills</b>"
track: {profile: [{length_m: 400, grade_pct: 0}, {length_m: 300, grade_pct: 3}], vertical_curve_m: 60}
vehicle:
  mass: {kerb_kg: 130}
  road_load: {cda_m2: 0.55, crr: 0.014}
  drive: {kind: force, peak_force_n: 480, closed_throttle_force_n: 60, lag_s: 0.2}
  actuator: {lag_s: 0.15}
hold: {set_speed_kmh: 50}
candidates:
  - {name: locked, kind: locked}
  - {name: shipped, kind: pi, kp_pct_per_kmh: 60, ti_s: 0.4}
  - {name: counts, kind: integer, kp_pct_per_kmh: 2, ti_s: 8, speed_counts_per_kmh: 16, full_throttle_counts: 1000, gain_divisor: 256}
tune: {designs: [rejection, schedule, road], most_replays: 20, grades_pct: [0]}
`;
let result: TuneResult;
beforeAll(() => {
  result = tuneCase({ file: 'hill.yaml', read: () => new TextEncoder().encode(TEXT) });
}, 60_000);

test('the page begins with which gains to take, and escapes what came from files', () => {
  const page = renderTune(result, { units: 'kmh' });
  expect(page).toContain('&lt;b&gt;Gains &amp; hills&lt;/b&gt;');
  expect(page).not.toContain('<b>Gains');
  const { sentence } = tuneAnswer(tuneView(result, 'kmh'));
  expect(page.indexOf(sentence)).toBeGreaterThan(0);
  expect(sentence).toMatch(/^Take tuned-\w+, Kp .* Ti .*: of 2 proposals it costs least on this road/);
  expect(sentence).toContain('shipped of the case exceeds the bound: unstable at 50');
  expect(page).not.toMatch(/NaN|undefined|\[object/);
  for (const heading of [
    'The answer',
    'Proposals beside the case',
    'Where the gains lie',
    'The loop on paper',
    'How it was computed',
  ])
    expect(page).toContain(heading);
});

test('speeds and gains are told in mph where that is asked for, what is written into a case is not', () => {
  const page = renderTune(result, { units: 'mph' });
  expect(page).toContain('% per mph');
  expect(page).toContain('31\u00a0mph');
  expect(page).toContain('kp_pct_per_kmh: ');
});

test('what is nothing linear has no margins, and is no fault of the case', () => {
  const [locked, shipped, counts] = result.tuned;
  expect([locked!.keeps, shipped!.keeps, counts!.keeps]).toEqual([null, false, null]);
  const json = JSON.parse(tuneJson(result, ['tune.html']));
  expect(json.candidates[2].not_linear).toContain('whole numbers');
  expect(json.candidates[1].margins[0]).toMatchObject({ stable: false, sensitivity: null });
  expect(json.not_proposed).toEqual([
    { design: 'schedule', reason: expect.stringContaining('the same in every gear') },
  ]);
});

test('proposals.csv has a row for each candidate and each proposal, in order', () => {
  const [head, ...rows] = proposalsCsv(result).trimEnd().split('\r\n');
  expect(head).toMatch(
    /^candidate,design,kp_pct_per_kmh,ki_pct_per_kmh_s,ti_s,keeps_bound,max_sensitivity,worst_point/,
  );
  expect(rows.map((row) => row.split(',').slice(0, 2).join())).toEqual([
    'locked,',
    'shipped,',
    'counts,',
    'tuned-rejection,rejection',
    'tuned-road,road',
  ]);
});

test('says what a candidate costs that exceeds the bound, and what stands in the way of a proposal', () => {
  const beyond = result.tuned.map((one, i) => (i === 1 ? { ...one, cost: 0.25 } : one));
  const { sentence } = tuneAnswer(tuneView({ ...result, tuned: beyond }, 'kmh'));
  expect(sentence).toMatch(
    /shipped of the case exceeds the bound: unstable at 50.km\/h, [^:]*, at a cost of 0\.250\.$/,
  );
  const none = tuneAnswer(
    tuneView(
      {
        ...result,
        tuned: result.tuned.slice(0, 2).map((one, i) => (i === 1 ? { ...one, keeps: true } : one)),
        chosen: null,
        notProposed: [{ design: 'simc', reason: 'the drive cannot hold the operating point of 50 km/h' }],
      },
      'kmh',
    ),
  );
  expect(none.sentence).toBe(
    'Nothing can be proposed under the bound of 1.70: the drive cannot hold the operating point of 50 km/h. shipped of the case keeps it.',
  );
});

test('a candidate of the case that costs less than every proposal is kept', () => {
  const cheap = result.tuned.map((one, i) => (i === 1 ? { ...one, keeps: true, cost: 0.0001 } : one));
  const { standing, sentence } = tuneAnswer(tuneView({ ...result, tuned: cheap }, 'kmh'));
  expect(standing).toBe('kept');
  expect(sentence).toMatch(/^Keep shipped: no proposal costs less/);
});

test('the cautions know whether the rider brakes for bends', () => {
  const blind = renderTune(result, { units: 'kmh' });
  expect(blind).toContain('lean, bends or traffic');
  const braking = renderTune(
    {
      ...result,
      bends: {
        riding: { maxLateral: 2, deceleration: 2, resumesAfter: 2, shortestHold: 2 },
        resolution: 30,
        bends: [],
        stops: [],
        unfit: [],
        written: [],
      },
    },
    { units: 'kmh' },
  );
  expect(braking).not.toContain('lean, bends or traffic');
  expect(braking).toContain('Bends are known by the radius of the track alone');
});
