import { describe, expect, it } from 'vitest';
import type { Road } from '../../src/road/road.ts';
import { demandOf } from '../../src/study/demand.ts';
import type { Replayed } from '../../src/study/findings.ts';
import { hillFacts } from '../../src/study/hill-facts.ts';
import { hillStretches } from '../../src/study/hill-stretches.ts';
import { expectClose } from '../compare.ts';
import { type BinRow, recordOf, resultOf } from './record-of.ts';
import { roadOf } from './road-of.ts';
import { BAND, STIFF } from './scene.ts';
import { HOLD_60, planOf, vehicleOf } from './vehicle-of.ts';

const VEHICLE = vehicleOf();

/** A candidate whose record has these errors, by bins of 20 m: [from, to, error]. */
function withErrors(
  road: Road,
  stretches: readonly (readonly [number, number, number])[],
  more: Partial<Replayed['plan']> = {},
): Replayed {
  const rows: BinRow[] = [];
  for (let x = 0; x < road.distance.at(-1)!; x += 20) {
    const hit = stretches.find(([from, to]) => x >= from && x < to);
    const e = hit?.[2] ?? 0;
    rows.push({ time: 1.2, setSpeed: 60 / 3.6, errorMin: Math.min(0, e), errorMax: Math.max(0, e) });
  }
  return { name: 'pi', plan: planOf(road, VEHICLE, STIFF, more), result: resultOf(recordOf(20, rows)) };
}

const stretchesOf = (road: Road, replayed: readonly Replayed[], hold = HOLD_60) =>
  hillStretches(road, demandOf(road, VEHICLE, hold), replayed, BAND);

describe('the stretches that are hills', () => {
  it('are none where everything is in range and in the band', () => {
    const road = roadOf([{ length: 3000, grade: 0.02 }]);
    expect(stretchesOf(road, [withErrors(road, [[500, 900, 0.5]])])).toEqual([]);
  });

  it('come from demand alone, and reach from foot to top', () => {
    // 8 % is more than there is, 4 % is not: the whole slope is the hill, the level around it is not.
    const road = roadOf([
      { length: 1000, grade: 0 },
      { length: 200, grade: 0.04 },
      { length: 300, grade: 0.08 },
      { length: 150, grade: 0.04 },
      { length: 1000, grade: 0 },
    ]);
    const [hill, ...rest] = stretchesOf(road, []);
    expect(rest).toEqual([]);
    expect(hill!.kind).toBe('climb');
    expectClose(hill!.from, 1000, 10);
    expectClose(hill!.to, 1650, 10);
    // 15 s at 60 km/h behind its end.
    expectClose(hill!.until, hill!.to + 250, 1e-9);
  });

  it('come from a candidate that leaves its band where the demand is in range', () => {
    const road = roadOf([{ length: 3000, grade: 0 }]);
    const found = stretchesOf(road, [withErrors(road, [[1000, 1400, -0.8]])]);
    expect(found).toEqual([{ from: 1000, to: 1400, until: 1650, kind: 'level' }]);
  });

  it('are joined over gaps of up to 5 s and kept apart over longer ones', () => {
    const road = roadOf([{ length: 4000, grade: 0 }]);
    const near = stretchesOf(road, [
      withErrors(road, [
        [1000, 1200, -0.8],
        [1280, 1400, 0.8],
      ]),
    ]);
    expect(near.map(({ from, to }) => [from, to])).toEqual([[1000, 1400]]);
    const far = stretchesOf(road, [
      withErrors(road, [
        [1000, 1200, -0.8],
        [1500, 1600, 0.8],
      ]),
    ]);
    expect(far.map(({ from, to, until }) => [from, to, until])).toEqual([
      [1000, 1200, 1450],
      [1500, 1600, 1850],
    ]);
  });

  it('have what swings over on level ground right behind them as their own', () => {
    const road = roadOf([
      { length: 1000, grade: 0 },
      { length: 400, grade: 0.05 },
      { length: 3000, grade: 0 },
    ]);
    const swinging = stretchesOf(road, [
      withErrors(road, [
        [1060, 1300, -0.8],
        [1600, 1760, 0.8],
      ]),
    ]);
    expect(swinging).toEqual([{ from: 1000, to: 1400, until: 1760, kind: 'climb' }]);
    // What goes on for more than half a minute there is something of its own.
    const lasting = stretchesOf(road, [
      withErrors(road, [
        [1060, 1300, -0.8],
        [1600, 2200, 0.8],
      ]),
    ]);
    expect(lasting.map(({ from, to, until }) => [from, to, until])).toEqual([
      [1000, 1400, 1600],
      [1600, 2200, 2450],
    ]);
  });

  it('are parted at the crest between a climb and a descent', () => {
    const road = roadOf([
      { length: 1000, grade: 0 },
      { length: 500, grade: 0.09 },
      { length: 40, grade: 0.01 },
      { length: 40, grade: -0.01 },
      { length: 500, grade: -0.1 },
      { length: 1000, grade: 0 },
    ]);
    const found = stretchesOf(road, []);
    expect(found.map(({ kind }) => kind)).toEqual(['climb', 'descent']);
    expectClose(found[0]!.to, 1540, 11);
    expectClose(found[1]!.from, 1540, 41);
    expect(found[1]!.from).toBeGreaterThanOrEqual(found[0]!.to);
  });

  it('are one climb or one descent each where a candidate is out of its band over many', () => {
    // Height that 60 km/h are worth: 16.67^2 / (2 9.81) = 14.2 m. Undulations of 24 m are cut, of 8 m are not.
    const undulating = (rise: number) =>
      roadOf([
        { length: 600, grade: 0 },
        ...[1, -1, 1, -1].map((way) => ({ length: 600, grade: (way * rise) / 600 })),
        { length: 600, grade: 0 },
      ]);
    const high = undulating(24);
    const cut = stretchesOf(high, [withErrors(high, [[700, 2900, -3]])]);
    expect(cut.map(({ kind }) => kind)).toEqual(['climb', 'descent', 'climb', 'descent']);
    for (const [k, { from, to }] of cut.entries()) {
      expectClose(from, 600 + 600 * k, 1);
      expectClose(to, 1200 + 600 * k, 1);
    }
    const low = undulating(8);
    const whole = stretchesOf(low, [withErrors(low, [[700, 2900, -3]])]);
    expect(whole.map(({ kind, from, to }) => [kind, from, to])).toEqual([['rolling', 700, 2900]]);
  });

  it('that the demand makes are the same beside a candidate that is out of its band everywhere', () => {
    // Two descents and a climb beyond the drive, with gentler ground between.
    const road = roadOf([
      { length: 1500, grade: 0 },
      { length: 900, grade: -0.1 },
      { length: 400, grade: 0.01 },
      { length: 900, grade: 0.09 },
      { length: 300, grade: -0.005 },
      { length: 1200, grade: -0.09 },
      { length: 1500, grade: 0 },
    ]);
    const good = withErrors(road, [
      [1540, 2460, 1.2],
      [2860, 3760, -2],
      [4060, 5260, 1.5],
    ]);
    const bad = withErrors(road, [[0, 6700, -5]]);
    const demanded = (found: ReturnType<typeof stretchesOf>) =>
      found.filter(({ from, to }) => [1900, 3200, 4700].some((x) => from < x && to > x));
    const alone = demanded(stretchesOf(road, [good]));
    const beside = demanded(stretchesOf(road, [good, bad]));
    expect(alone.map(({ kind }) => kind)).toEqual(['descent', 'climb', 'descent']);
    expect(beside).toHaveLength(3);
    for (const [k, hill] of alone.entries()) {
      expect(beside[k]!.kind).toBe(hill.kind);
      expectClose(beside[k]!.from, hill.from, 100);
      expectClose(beside[k]!.to, hill.to, 100);
    }
    const borders = [1500, 2400, 2800, 3700, 4000, 5200];
    for (const [k, x] of alone.flatMap(({ from, to }) => [from, to]).entries())
      expectClose(x, borders[k]!, 20);
  });

  it('are not hundreds on a long rolling road', () => {
    const road = roadOf(
      Array.from({ length: 240 }, (_, k) => ({ length: 400, grade: k % 2 === 0 ? 0.04 : -0.04 })),
      { grid: 50 },
    );
    const found = stretchesOf(road, [withErrors(road, [[0, 96_000, -5]])]);
    expect(found.length).toBeLessThanOrEqual(40);
  });

  it('never overlap, are numbered in order and stay on the road, on seeded random roads', () => {
    let state = 12345;
    const random = (): number => {
      state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
      return state / 4294967296;
    };
    for (let k = 0; k < 30; k++) {
      const road = roadOf(
        Array.from({ length: 30 }, () => ({ length: 50 + 400 * random(), grade: 0.26 * (random() - 0.5) })),
      );
      const errors = Array.from({ length: 12 }, (_, j): [number, number, number] => {
        const at = 500 * j + 300 * random();
        return [at, at + 200 * random(), 3 * (random() - 0.5)];
      });
      const found = stretchesOf(road, [withErrors(road, errors)]);
      let last = 0;
      for (const { from, to, until } of found) {
        expect(from).toBeGreaterThanOrEqual(last);
        expect(to).toBeGreaterThan(from);
        expect(until).toBeGreaterThanOrEqual(to);
        expect(until).toBeLessThanOrEqual(road.distance.at(-1)!);
        last = to;
      }
      // Nothing that leaves the range is left out.
      const demand = demandOf(road, VEHICLE, HOLD_60);
      for (let i = 0; i + 1 < road.size; i++) {
        const middle = (road.distance[i]! + road.distance[i + 1]!) / 2;
        if (road.distance[i + 1]! - road.distance[i]! < 1e-9) continue;
        if (Math.abs(demand.share[i]!) > 1 && Math.abs(demand.share[i + 1]!) > 1)
          expect(
            found.some(({ from, to }) => middle >= from && middle <= to),
            `road ${k} at ${middle} m`,
          ).toBe(true);
      }
    }
  });

  it('do not count the transient of a change of set speed', () => {
    const road = roadOf([{ length: 4000, grade: 0 }]);
    const hold = { ...HOLD_60, changes: [{ at: { distance: 2000 }, setSpeed: 50 / 3.6, ramp: 0.5 }] };
    const run = withErrors(road, [[2000, 2100, 2.7]], { hold });
    expect(stretchesOf(road, [run], hold)).toEqual([]);
    expect(stretchesOf(road, [withErrors(road, [[2000, 2100, 2.7]])]).length).toBe(1);
  });
});

describe('facts of a hill', () => {
  it('are those of the road and of the demand at its worst place', () => {
    const road = roadOf(
      [
        { length: 1000, grade: 0 },
        { length: 400, grade: 0.05 },
        { length: 100, grade: 0.09 },
        { length: 1000, grade: 0 },
      ],
      { gradeSd: 0.002 },
    );
    const demand = demandOf(road, VEHICLE, HOLD_60);
    const facts = hillFacts(road, demand, { from: 1000, to: 1500, until: 1700, kind: 'climb' }, 3);
    expect(facts.number).toBe(3);
    expectClose(facts.meanGrade, (400 * 0.05 + 100 * 0.09) / 500, 1e-12);
    expect(facts.maxGrade).toBe(0.09);
    expect(facts.meanGradeSd).toBe(0);
    // m g sin + m g c0 cos + 1/2 rho CdA v^2, by hand: 188.97 + 29.40 + 96.67 N over 260 N.
    const cos = 1 / Math.sqrt(1 + 0.09 * 0.09);
    const required = 215 * 9.80665 * cos * (0.09 + 0.014) + (0.5 * 1.2 * 0.58 * 3600) / 12.96;
    expectClose(facts.requiredForce, required, 1e-9);
    expectClose(facts.share, required / 260, 1e-12);
    expect(facts.availableForce).toBe(260);
    expect(facts.shareAt).toBeGreaterThanOrEqual(1400);
    expect(facts.unresolved).toBe(false);
    // Slopes of a height error that hangs together over a = L / (2 pi), by hand: the mean over d >> a has sd 2 a / d.
    const smoothed: Road = {
      ...road,
      smoothing: {
        source: 'survey',
        wavelength: 100,
        lambda: 1,
        residualSd: 0.1,
        sourceGradeSd: 0.002,
        shortestHill: 600,
      },
    };
    const smooth = hillFacts(smoothed, demand, { from: 1000, to: 1500, until: 1700, kind: 'climb' }, 1);
    expectClose(smooth.meanGradeSd, (0.002 * (2 * 100)) / (2 * Math.PI) / 500, 1e-12);
    expect(smooth.unresolved).toBe(true);
  });
});
