import { describe, expect, test } from 'vitest';
import { hillChanges } from '../../../src/report/compare/hill-changes.ts';
import type { SeriesPair } from '../../../src/report/compare/read-series.ts';
import { expectClose } from '../../compare.ts';
import { seeded } from '../seeded.ts';
import { flatPairs, flatSeries, summaryWith } from './fixture-summaries.ts';

type Stretch = readonly [
  fromKm: number,
  toKm: number,
  change?: number,
  recovery?: number | null,
  cause?: string,
];
const withHills = (stretches: readonly Stretch[], more: Parameters<typeof summaryWith>[0] = {}) =>
  summaryWith({
    ...more,
    hills: stretches.map(([from_km, to_km, speed_change_kmh = -1, recovery_s = 5, cause = 'gains'], i) => ({
      hill: i + 1,
      from_km,
      to_km,
      speed_change_kmh,
      recovery_s,
      cause,
    })),
  });
const matched = (before: readonly Stretch[], after: readonly Stretch[]) =>
  hillChanges(withHills(before), withHills(after), flatPairs('pi-a'));
const numbers = ({ hills }: ReturnType<typeof matched>) =>
  hills.map(({ before, after }) => [before.map(({ hill }) => hill), after.map(({ hill }) => hill)]);

describe('hills are matched by place', () => {
  test('one to one, whatever their numbers', () => {
    expect(
      numbers(
        matched(
          [
            [1, 2],
            [4, 5],
          ],
          [
            [0.2, 0.5],
            [1.1, 2.1],
            [4, 4.8],
          ],
        ),
      ),
    ).toEqual([
      [[], [1]],
      [[1], [2]],
      [[2], [3]],
    ]);
  });

  test('one that is two in the other run is one place, and neighbours that touch are not', () => {
    expect(
      numbers(
        matched(
          [
            [1, 3],
            [3, 4],
          ],
          [
            [1, 1.8],
            [2, 3.05],
            [3.1, 4],
          ],
        ),
      ),
    ).toEqual([
      [[1], [1, 2]],
      [[2], [3]],
    ]);
  });

  test('half of the shorter is enough, less is not', () => {
    expect(numbers(matched([[1, 2]], [[1.5, 2.5]]))).toEqual([[[1], [1]]]);
    expect(numbers(matched([[1, 2]], [[1.51, 2.51]]))).toEqual([
      [[1], []],
      [[], [1]],
    ]);
  });

  test('on roads of other lengths not at all, with the reason', () => {
    const { unmatched, hills } = hillChanges(
      withHills([[1, 2]], { lengthM: 10_000 }),
      withHills([[1, 2]], { lengthM: 10_200 }),
      flatPairs('pi-a'),
    );
    expect(unmatched).toContain('10.00 km and 10.20 km');
    expect(hills).toEqual([]);
  });

  test('each hill stands at exactly one place, and the other way round gives the mirror', () => {
    const next = seeded(44);
    const road = (): Stretch[] => {
      const stretches: Stretch[] = [];
      for (let at = next(); at < 9; at += 0.2 + next()) {
        const to = at + 0.1 + next();
        stretches.push([at, to, -10 * next()]);
        at = to;
      }
      return stretches;
    };
    const MIRROR = { better: 'worse', worse: 'better' } as Record<string, string>;
    for (let k = 0; k < 40; k++) {
      const [a, b] = [road(), road()];
      const there = matched(a, b);
      const back = matched(b, a);
      expect(numbers(there).flatMap(([before]) => before)).toHaveLength(a.length);
      expect(new Set(numbers(there).flatMap(([before]) => before)).size).toBe(a.length);
      expect(new Set(numbers(there).flatMap(([, after]) => after)).size).toBe(b.length);
      expect(numbers(back)).toEqual(numbers(there).map(([before, after]) => [after, before]));
      expect(back.hills.map(({ outcomes }) => outcomes.map(({ change }) => change))).toEqual(
        there.hills.map(({ outcomes }) => outcomes.map(({ change }) => MIRROR[change] ?? change)),
      );
    }
  });
});

describe('a place tells of a candidate', () => {
  const only = (before: readonly Stretch[], after: readonly Stretch[], pair?: SeriesPair) => {
    const series = pair === undefined ? flatPairs('pi-a') : new Map([['pi-a', pair]]);
    return hillChanges(withHills(before), withHills(after), series).hills[0]!.outcomes;
  };

  test('the extremes over its hills, signs kept, and the cause of the one that strays most', () => {
    const [outcome] = only(
      [[1, 3, -4, 8, 'power']],
      [
        [1, 1.9, 2, 20, 'gains'],
        [2, 3, 6, 3, 'windup'],
      ],
    );
    expect(outcome).toMatchObject({
      before: { speedChangeKmh: -4, recovery: 8, cause: 'power', derating: null },
      after: { speedChangeKmh: 6, recovery: 20, cause: 'windup', derating: null },
      change: 'worse',
    });
  });

  test('no recovery where one hill has none', () => {
    expect(
      only(
        [[1, 3]],
        [
          [1, 1.9, -1, null],
          [2, 3],
        ],
      )[0]!.after.recovery,
    ).toBeNull();
  });

  test('the speed error over all that is the place in either run', () => {
    // After, only the first part is a hill; the error of 9 km/h stands behind it, on the hill of the run before.
    const flat = flatSeries();
    const low = Float64Array.from(flat.error.low, (error, i) => (i === 25 ? -9 / 3.6 : error));
    const after = { ...flat, error: { ...flat.error, low } };
    const [outcome] = only([[1, 3, -9]], [[1, 2, -2]], { before: flatSeries(), after });
    expectClose(outcome!.after.speedChangeKmh, -9, 1e-9, 'speed error [km/h]');
    expect(outcome!.change).toBe('same');
  });

  test('nothing where the run had ended before it', () => {
    const pair = { before: flatSeries(), after: flatSeries(800) };
    expect(only([[1, 3, -9]], [[1, 3, 0]], pair)).toEqual([]);
  });
});
