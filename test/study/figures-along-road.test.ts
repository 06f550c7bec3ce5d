import { describe, expect, it } from 'vitest';
import { compareCandidates } from '../../src/study/compare-candidates.ts';
import { FIGURES } from '../../src/study/figure-table.ts';
import type { Demand } from '../../src/study/findings.ts';
import { chooseBins } from '../../src/study/measure-figure.ts';
import { recordOf } from './record-of.ts';
import { roadOf } from './road-of.ts';
import { BAND, oneHill, STIFF, study } from './scene.ts';
import { planOf, vehicleOf } from './vehicle-of.ts';

describe('the bins that count', () => {
  const road = roadOf([{ length: 100, grade: 0 }]);
  const bins = recordOf(
    20,
    Array.from({ length: 5 }, () => ({ time: 1 })),
  );
  const chosen = (holdable: number[]): number[] =>
    Array.from(
      chooseBins(bins, 'holdable', { road, demand: { holdable: Uint8Array.from(holdable) } as Demand }, []),
    );

  it('are those that lie whole on holdable road', () => {
    // Knots every 10 m; the one at 50 m is not holdable: it spoils the bin from 40 to 60 m and no other.
    expect(chosen([1, 1, 1, 1, 1, 0, 1, 1, 1, 1, 1])).toEqual([1, 1, 0, 1, 1]);
    // The one at 40 m is the border of two bins and spoils both.
    expect(chosen([1, 1, 1, 1, 0, 1, 1, 1, 1, 1, 1])).toEqual([1, 0, 0, 1, 1]);
    expect(chosen([0, 1, 1, 1, 1, 1, 1, 1, 1, 1, 1])).toEqual([0, 1, 1, 1, 1]);
    expect(chosen([1, 1, 1, 1, 1, 1, 1, 1, 1, 1, 0])).toEqual([1, 1, 1, 1, 0]);
  });

  it('are none in which the candidate follows a change of set speed', () => {
    const held = { road, demand: { holdable: new Uint8Array(road.size).fill(1) } as Demand };
    const settling = [{ from: 39, to: 60 }];
    expect(Array.from(chooseBins(bins, 'holdable', held, settling))).toEqual([1, 0, 0, 1, 1]);
    expect(Array.from(chooseBins(bins, 'all', held, settling))).toEqual([1, 1, 1, 1, 1]);
  });

  it('are those whose middle is in a stretch', () => {
    const of = (from: number, to: number): number[] =>
      Array.from(chooseBins(bins, { from, to }, { road, demand: {} as Demand }, []));
    expect(of(20, 60)).toEqual([0, 1, 1, 0, 0]);
    expect(of(31, 71)).toEqual([0, 0, 1, 1, 0]);
  });
});

describe('candidates side by side', () => {
  const road = oneHill(0.08);
  const { replayed, demand, hills } = study({
    locked: planOf(road, vehicleOf(), { kind: 'locked', throttle: 'level' }),
    pi: planOf(road, vehicleOf(), STIFF),
  });

  it('have every figure of the table, none of them NaN, and less error where a hold can be asked for', () => {
    const rows = compareCandidates(replayed, { road, demand, hills }, BAND);
    expect(rows.map((row) => row.candidate)).toEqual(['locked', 'pi']);
    for (const row of rows)
      for (const { name } of FIGURES)
        for (const figure of [row.all[name], row.holdable[name]])
          expect(typeof figure === 'number' ? Number.isFinite(figure) : figure !== undefined, name).toBe(
            true,
          );
    const pi = rows[1]!;
    expect(pi.holdable.rms_error_kmh as number).toBeLessThan(pi.all.rms_error_kmh as number);
    expect(pi.holdable.within_band_pct).toBe(100);
  });
});
