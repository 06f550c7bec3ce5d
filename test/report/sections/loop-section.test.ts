import { describe, expect, test } from 'vitest';
import { MARGIN_COLUMNS, marginsCsv, worstPoints } from '../../../src/report/data/margin-table.ts';
import { loopCurves } from '../../../src/report/model/loop-curves.ts';
import { atPoint, placeOfPoint, worstPointWords } from '../../../src/report/model/point-words.ts';
import { FILE_PAINT } from '../../../src/report/paint.ts';
import { SPEED_UNITS } from '../../../src/report/quantity.ts';
import { type LoopPage, loopSection, pageLoopChart } from '../../../src/report/sections/loop-section.ts';
import { loopSheet } from '../../../src/study/loop-sheet.ts';
import { operatingPoints } from '../../../src/study/operating-points.ts';
import { expectClose } from '../../compare.ts';
import { gearedVehicle } from '../../study/geared.ts';
import { piOf } from '../../study/vehicle-of.ts';

const air = { grade: 0, headwind: 0, crosswind: 0, airDensity: 1.2, airTemperature: 288.15 };
const vehicle = gearedVehicle();
const found = operatingPoints({
  rides: [
    {
      vehicle,
      load: null,
      visits: [
        { speed: 60 / 3.6, gear: 3, surroundings: { ...air, headwind: 3 }, time: 90 },
        { speed: 45 / 3.6, gear: 2, surroundings: { ...air, grade: 0.06 }, time: 10 },
        { speed: 60 / 3.6, gear: 3, surroundings: { ...air, grade: 0.3 }, time: 2 },
      ],
    },
  ],
  grid: {
    speeds: [40 / 3.6],
    grades: [0],
    headwinds: [0],
    gears: [1],
    loads: [{ load: 'two up', vehicle: gearedVehicle({}, { mass: 300 }) }],
    air,
  },
});
const sheet = loopSheet(found, [
  { name: 'locked', controller: { kind: 'locked', throttle: 0.3 } },
  { name: 'calm', controller: piOf({ kp: 0.2, ki: 0.03 }) },
  { name: 'wild', controller: piOf({ kp: 8, ki: 9, sample: 0.1 }) },
]);
const [, calm, wild] = sheet.loops as [unknown, (typeof sheet.loops)[number], (typeof sheet.loops)[number]];
const page: LoopPage = {
  sheet,
  speed: SPEED_UNITS.kmh,
  colourOf: (name) => (name === 'calm' ? 1 : 2),
  keyOf: () => null,
  file: 'margins.csv',
};
const plain = (text: string): string => text.replaceAll('\u00a0', ' ');

describe('the loop on paper', () => {
  const body = plain(String(loopSection(page).body));

  test('says where the worst point is, in words, with its margins', () => {
    const { margins } = calm.figures[calm.order[0]!]!;
    const words = plain(worstPointWords(sheet, calm, SPEED_UNITS.kmh));
    expect(words).toContain('In gear 2 at 40 km/h, load two up, the phase margin is');
    expect(words).toContain(`${((margins.phaseMargin! * 180) / Math.PI).toFixed(0)}°`);
    expect(words).toContain(`Ms is ${margins.sensitivity!.toFixed(2)}, the largest of 3 points`);
    expect(body).toContain(words);
  });

  test('says of a loop that is unstable at how many points it is', () => {
    const words = plain(worstPointWords(sheet, wild, SPEED_UNITS.kmh));
    expect(words).toMatch(/the loop is unstable, as at 3 of 3 points/);
    expect(body).toContain('<span class="flag">unstable</span>');
    expect(body).toContain('unstable: no answer to draw');
  });

  test('sets the worst point first', () => {
    const sensitivities = calm.order.map((i) => calm.figures[i]!.margins.sensitivity!);
    expect(sensitivities).toEqual([...sensitivities].sort((a, b) => b - a));
    const at = sensitivities.map((value) => body.indexOf(`>${value.toFixed(2)}<`));
    expect(at.every((place, i) => place > 0 && (i === 0 || place > at[i - 1]!))).toBe(true);
  });

  test('names what has no loop, and where there is none', () => {
    expect(body).toContain('Without margins: locked (no feedback).');
    expect(body).toContain('full throttle is not enough for 2 % of the time');
  });

  test('speaks in the unit of the reader', () => {
    expect(plain(placeOfPoint(sheet.points[0]!, SPEED_UNITS.mph))).toBe('gear 3, 28 mph, +6.0 %');
    expect(plain(atPoint(sheet.points[1]!, SPEED_UNITS.kmh))).toBe(
      'In gear 4 at 60 km/h against 3 m/s of wind',
    );
  });
});

describe('the chart of a loop', () => {
  test('marks the margins of the worst point, and draws the usual one beside it', () => {
    for (const narrow of [false, true]) {
      const canvas = { id: 'c', paint: FILE_PAINT, width: narrow ? 360 : 980, narrow };
      const svg = plain(String(pageLoopChart(page, calm, canvas)));
      const { margins } = calm.figures[calm.order[0]!]!;
      expect(svg).toContain(`>${((margins.phaseMargin! * 180) / Math.PI).toFixed(0)}°<`);
      expect(svg).toContain(`>${(20 * Math.log10(margins.gainMargin!)).toFixed(1)} dB<`);
      expect(svg).toContain('most of the time: gear 4, 60 km/h');
      expect(svg).toContain('frequency / (rad/s)');
      expect(svg).toContain('time / s');
      expect(svg).not.toMatch(/NaN|Infinity/);
    }
  });

  test('has a phase that goes on where a half turn is passed, and -90 degrees under an integral', () => {
    const [worst] = loopCurves(sheet, calm, { colour: 1 }, SPEED_UNITS.kmh);
    expectClose(worst!.phaseDeg[0]!, -90, 5);
    for (let i = 1; i < worst!.phaseDeg.length; i++)
      expect(Math.abs(worst!.phaseDeg[i]! - worst!.phaseDeg[i - 1]!)).toBeLessThan(90);
    expect(worst!.phaseDeg.at(-1)!).toBeLessThan(-180);
    // -20 dB a decade at the low end of a first-order plant under an integral.
    const slope =
      (worst!.magnitudeDb[10]! - worst!.magnitudeDb[0]!) /
      Math.log10(worst!.frequency[10]! / worst!.frequency[0]!);
    expectClose(slope, -20, 1);
  });
});

describe('margins.csv', () => {
  const lines = marginsCsv(sheet).split('\r\n');

  test('has a row for each point of each linear loop, and its columns in their order', () => {
    expect(lines[0]).toBe(MARGIN_COLUMNS.map(({ name }) => name).join(','));
    expect(lines.length).toBe(1 + 2 * 3 + 1);
    expect(lines.at(-1)).toBe('');
    const cells = lines.map((line) => line.split(','));
    expect(cells.slice(1, -1).every((row) => row.length === MARGIN_COLUMNS.length)).toBe(true);
    const column = (name: string) => cells[0]!.indexOf(name);
    const calmRow = cells[1 + calm.order[0]!]!;
    expect(calmRow[column('load')]).toBe('two up');
    expect(calmRow[column('gear')]).toBe('2');
    expectClose(Number(calmRow[column('speed_kmh')]), 40, 1e-3);
    expectClose(Number(cells[2]![column('share_of_time_pct')]), 90, 1e-3);
    const wildRow = cells[4]!;
    expect(wildRow[column('stable')]).toBe('no');
    expect(wildRow[column('gain_margin')]).toBe('');
  });

  test('gives the summary the worst point of each loop, with reasons for what it has not', () => {
    const worst = worstPoints(sheet);
    expect([...worst.keys()]).toEqual(['calm', 'wild']);
    expect(worst.get('calm')).toMatchObject({ gear: 2, load: 'two up', stable: 'yes' });
    expect(worst.get('wild')).toMatchObject({
      gain_margin: null,
      gain_margin_reason: 'the linear loop is unstable',
    });
  });
});
