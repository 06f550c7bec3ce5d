import { SaxesParser } from 'saxes';
import { describe, expect, it } from 'vitest';
import { roadPicture } from '../../src/report/road-picture.ts';
import type { Road } from '../../src/road/road.ts';
import { expectClose } from '../compare.ts';
import { fixtureRoad } from './fixture-road.ts';

const draw = (road: Road, units: 'kmh' | 'mph' = 'kmh') => roadPicture(road, { units });
const wordsOf = (svg: string): string =>
  svg.replace(/<desc[\s\S]*?<\/desc>|<title[\s\S]*?<\/title>/g, '').replace(/<[^>]*>/g, '|');

/** 600 m, level, then 4 %, level again: two knots where the grade steps. */
function writtenRoad(): Road {
  const base = fixtureRoad(1, false);
  const distance = Float64Array.of(0, 200, 200, 400, 400, 600);
  const none = distance.map(() => 0);
  return {
    ...base,
    size: 6,
    points: null,
    distance,
    station: distance,
    elevation: Float64Array.of(0, 0, 0, 8, 8, 8),
    rawElevation: null,
    grade: Float64Array.of(0, 0, 0.04, 0.04, 0, 0),
    gradeSd: none,
    headwind: none,
    crosswind: none,
    airDensity: none,
    airTemperature: none,
    smoothing: null,
    masks: [],
    repairs: [],
    warnings: [],
  };
}

describe('the picture of a road', () => {
  const warned: Road = {
    ...fixtureRoad(20, true),
    warnings: [
      { code: 'bridge-suspected', message: 'A dip <here>.', from: 9000, to: 9400 },
      { code: 'gap-bridged', message: 'No points for 310 m.', from: 14_200, to: 14_510 },
      { code: 'ends-uncertain', message: 'Ends.' },
    ],
  };

  it('is well-formed XML with axes in units for elevation, grade and wind', () => {
    const parser = new SaxesParser();
    parser.on('error', (error) => {
      throw error;
    });
    parser.write(draw(warned)).close();
    const words = wordsOf(draw(warned));
    for (const name of ['elevation above sea level / m', 'grade / %', 'wind / (km/h)', 'distance / km'])
      expect(words).toContain(`|${name}|`);
    expect(words).toContain('standard deviations');
    expect(wordsOf(draw(warned, 'mph'))).toContain('|wind / mph|');
    expect(draw(warned)).not.toMatch(/NaN|undefined|Infinity|var\(--/);
  });

  it('marks and names masks, repairs, and the stretches of warnings', () => {
    const words = wordsOf(draw(warned));
    for (const text of [
      'masked',
      'bridge suspected',
      'gap bridged',
      'elevation spike (1)',
      'gap bridged (1)',
    ])
      expect(words).toContain(`|${text}|`);
    expect(words).toContain('stretch with a warning (2)');
    expect(draw(warned)).toContain('A dip &lt;here&gt;.');
  });

  it('draws the band of the grade from two standard deviations below it to two above', () => {
    const road = {
      ...warned,
      grade: warned.grade.map(() => 0.03),
      gradeSd: warned.grade.map(() => 0.01),
    };
    const svg = draw(road);
    const lane = svg.slice(svg.indexOf('id="road-lane-0"'), svg.indexOf('id="road-lane-1"'));
    // a figure of the axis stands 4 units below its line
    const lineOf = (tick: string): number =>
      Number(new RegExp(`y="([\\d.]+)"[^>]*>${tick}</text>`).exec(lane)![1]) - 4;
    const [zero, four] = [lineOf('0'), lineOf('4')];
    const [, path] = /<path d="([^"]+)" fill="#0072b2" fill-opacity/.exec(lane)!;
    const percents = [...path!.matchAll(/,(-?[\d.]+)/g)].map(
      ([, y]) => (4 * (Number(y) - zero)) / (four - zero),
    );
    expectClose(Math.min(...percents), 1, 0.02, 'lower edge [%]');
    expectClose(Math.max(...percents), 5, 0.02, 'upper edge [%]');
  });

  it('shows a written road as written: no band, no wind, and a step of grade as a step', () => {
    const svg = draw(writtenRoad());
    expect(wordsOf(svg)).not.toMatch(/standard deviation|wind|measured|smoothed/);
    expect(svg).toContain('taken as given, without uncertainty');
    // 980 units wide, less 52 at the left and 14 at the right: km 0.2 lies a third of 914 from 52
    const lanes = svg.slice(svg.indexOf('grade / %'));
    expect(lanes).toMatch(/L356\.7,[\d.]+L356\.7,[\d.]+/);
  });
});
