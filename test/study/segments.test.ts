import { describe, expect, it } from 'vitest';
import type { Replayed } from '../../src/study/findings.ts';
import { segmentRuns, segmentsByLength } from '../../src/study/segments.ts';
import { expectClose } from '../compare.ts';
import { recordOf, resultOf } from './record-of.ts';
import { roadOf } from './road-of.ts';
import { STIFF } from './scene.ts';
import { planOf, vehicleOf } from './vehicle-of.ts';

describe('segments by length', () => {
  it('cover the road; a short rest joins its neighbour', () => {
    const borders = (length: number): number[][] =>
      segmentsByLength(roadOf([{ length, grade: 0.02 }]), 500).map(({ from, to }) => [from, to]);
    expect(borders(1200)).toEqual([
      [0, 500],
      [500, 1000],
      [1000, 1200],
    ]);
    expect(borders(1040)).toEqual([
      [0, 500],
      [500, 1040],
    ]);
    expect(borders(300)).toEqual([[0, 300]]);
    expect(borders(1000)).toEqual([
      [0, 500],
      [500, 1000],
    ]);
  });

  it('have the net climb over length as their grade, and the mean headwind', () => {
    const road = roadOf([
      { length: 300, grade: 0.06, headwind: 5 },
      { length: 700, grade: -0.02, headwind: -1 },
    ]);
    const [first, second] = segmentsByLength(road, 500);
    expectClose(first!.meanGrade, (300 * 0.06 - 200 * 0.02) / 500, 1e-12);
    expectClose(first!.meanHeadwind, (300 * 5 - 200) / 500, 1e-12);
    expectClose(second!.meanGrade, -0.02, 1e-12);
    expect([first!.number, second!.number]).toEqual([1, 2]);
  });
});

describe('runs of segments', () => {
  const road = roadOf([{ length: 300, grade: 0 }]);
  const replayed: Replayed = {
    name: 'pi',
    plan: planOf(road, vehicleOf(), STIFF),
    result: resultOf(
      recordOf(100, [
        {
          time: 5,
          errorMean: -10,
          errorSquare: 20,
          errorMin: -3,
          throttleMean: 0.5,
          timeUpper: 1,
          driveWork: 1000,
        },
        { time: 4, errorMean: 4, errorSquare: 8, errorMax: 2, throttleMean: 0.25, driveWork: 500 },
      ]),
    ),
  };

  it('share out a bin that straddles a border, by length', () => {
    const [a, b, c] = segmentRuns(segmentsByLength(road, 150), [replayed])
      .map((s) => s.runs[0]!)
      .concat();
    // First 150 m: all of the first bin, half of the second.
    expectClose(a!.time as number, 7, 1e-12);
    expectClose(a!.meanError as number, (-10 + 2) / 7, 1e-12);
    expectClose(a!.rmsError as number, Math.sqrt(24 / 7), 1e-12);
    expectClose(a!.meanThrottle as number, (0.5 * 5 + 0.25 * 2) / 7, 1e-12);
    expectClose(a!.atLimit as number, 1 / 7, 1e-12);
    expectClose(a!.wheelEnergy as number, 1250, 1e-12);
    expect(a!.worstError).toBe(-3);
    expectClose(b!.time as number, 2, 1e-12);
    expect(b!.worstError).toBe(2);
    expect(c).toBeUndefined();
  });

  it('do not exist where the run ended before', () => {
    const [, , last] = segmentRuns(segmentsByLength(road, 100), [replayed]);
    expect(last!.runs[0]).toEqual({
      candidate: 'pi',
      meanError: { none: 'the run ended before' },
      rmsError: { none: 'the run ended before' },
      worstError: { none: 'the run ended before' },
      meanThrottle: { none: 'the run ended before' },
      atLimit: { none: 'the run ended before' },
      wheelEnergy: { none: 'the run ended before' },
      time: { none: 'the run ended before' },
    });
  });
});
