import { describe, expect, it } from 'vitest';
import { demandOf } from '../../src/study/demand.ts';
import { candidatesOf, figureSpread, spreadMethod } from '../../src/study/figure-spread.ts';
import type { Hill, HillOutcome, Replayed, Requirement } from '../../src/study/findings.ts';
import { judge } from '../../src/study/judge.ts';
import type { FigureContext } from '../../src/study/measure-figure.ts';
import { expectClose } from '../compare.ts';
import { recordOf, resultOf } from './record-of.ts';
import { roadOf } from './road-of.ts';
import { oneHill, STIFF, study } from './scene.ts';
import { HOLD_60, piOf, planOf, vehicleOf } from './vehicle-of.ts';

const ROAD = roadOf([{ length: 400, grade: 0 }]);
const CONTEXT: FigureContext = { road: ROAD, demand: demandOf(ROAD, vehicleOf(), HOLD_60), hills: [] };

/** Four bins of 100 m, 5 s each; errors in km/h. */
function runOf(name: string, errorsKmh: readonly number[], more: Partial<Replayed['result']> = {}): Replayed {
  const bins = recordOf(
    100,
    errorsKmh.map((kmh) => ({
      time: 5,
      setSpeed: 60 / 3.6,
      errorMin: Math.min(0, kmh / 3.6),
      errorMax: Math.max(0, kmh / 3.6),
      timeInBand: [Math.abs(kmh) <= 2 ? 5 : 0],
    })),
  );
  return { name, plan: planOf(ROAD, vehicleOf(), STIFF), result: resultOf(bins, more) };
}

const requirementOf = (more: Partial<Requirement>): Requirement => ({
  id: 'SH-01',
  figure: 'worst_high_kmh',
  band: null,
  atLeast: null,
  atMost: 4,
  where: 'all',
  candidates: null,
  ...more,
});

const spreadOf = (sd: number, failed = 0) => ({
  roads: 8,
  seed: 1,
  rows: [{ requirement: 'SH-01', candidate: 'pi', sd, failed }],
});
const verdictOf = (requirement: Requirement, run: Replayed, sd = 0, context = CONTEXT) =>
  judge([requirement], [run], context, spreadOf(sd))[0]!;

describe('a requirement', () => {
  it('is met or not met by its margin, with the place of the worst', () => {
    const met = verdictOf(requirementOf({}), runOf('pi', [0, 3, 1, 0]));
    expect(met.verdict).toBe('met');
    expectClose(met.measured as number, 3, 1e-9);
    expectClose(met.margin as number, 1, 1e-9);
    expect(met.worstAt).toBe(150);
    const missed = verdictOf(requirementOf({}), runOf('pi', [0, 3, 4.5, 0]));
    expect(missed.verdict).toBe('not met');
    expectClose(missed.margin as number, -0.5, 1e-9);
    const low = verdictOf(
      requirementOf({ figure: 'worst_low_kmh', atMost: null, atLeast: -5 }),
      runOf('pi', [-6, 0]),
    );
    expect(low.verdict).toBe('not met');
    expectClose(low.margin as number, -1, 1e-9);
    const share = verdictOf(
      requirementOf({ figure: 'within_band_pct', band: 2 / 3.6, atMost: null, atLeast: 75 }),
      runOf('pi', [0, 1, 2.5, 0]),
    );
    expect(share.measured).toBe(75);
    expect(share.verdict).toBe('met');
  });

  it('is too close to call when the limit lies within two standard deviations, on either side', () => {
    const run = runOf('pi', [0, 3, 1, 0]);
    expect(verdictOf(requirementOf({}), run, 0.49).verdict).toBe('met');
    expect(verdictOf(requirementOf({}), run, 0.51).verdict).toBe('too close to call');
    const above = runOf('pi', [0, 5, 1, 0]);
    expect(verdictOf(requirementOf({}), above, 0.51).verdict).toBe('too close to call');
    expect(verdictOf(requirementOf({}), above, 0.49).verdict).toBe('not met');
  });

  it('counts only the stretch that it names', () => {
    const run = runOf('pi', [9, 3, 1, 9]);
    const finding = verdictOf(requirementOf({ where: { from: 100, to: 300 } }), run);
    expectClose(finding.measured as number, 3, 1e-9);
    const nowhere = verdictOf(requirementOf({ where: { from: 5000, to: 6000 } }), run);
    expect(nowhere.measured).toHaveProperty('none');
    expect(nowhere.verdict).toBe('not judged');
    expect(nowhere.words).toContain('not judged, no such stretch');
  });

  it('is not judged where the drive can hold the set speed nowhere', () => {
    const hold = { ...HOLD_60, setSpeed: 200 / 3.6, startSpeed: 200 / 3.6 };
    const demand = demandOf(ROAD, vehicleOf(), hold);
    const finding = verdictOf(requirementOf({ where: 'holdable' }), runOf('pi', [0, 0]), 0, {
      ...CONTEXT,
      demand,
    });
    expect(finding.verdict).toBe('not judged');
    expect(finding.words).toContain('on no part of the road');
  });

  it('is not met by a run that did not get there', () => {
    const run = runOf('pi', [0, 0], { status: 'stopped', endDistance: 200 });
    const finding = verdictOf(requirementOf({}), run);
    expect(finding.verdict).toBe('not met');
    expect(finding.words).toContain('not met, the run ended at km 0.20 (stopped)');
    expect(finding.measured).toBe(0);
    expect(finding.margin).toEqual({ none: 'the run ended at km 0.20 (stopped)' });
    expect(verdictOf(requirementOf({ where: { from: 0, to: 150 } }), run).verdict).toBe('met');
  });

  it('speaks of all candidates but the locked ones, or of those it names', () => {
    const locked: Replayed = {
      ...runOf('locked', [0, 9]),
      plan: planOf(ROAD, vehicleOf(), { kind: 'locked', throttle: 0.3 }),
    };
    const all = [locked, runOf('a', [0]), runOf('b', [0])];
    expect(candidatesOf(requirementOf({}), all).map((c) => c.name)).toEqual(['a', 'b']);
    expect(candidatesOf(requirementOf({ candidates: ['b', 'locked'] }), all).map((c) => c.name)).toEqual([
      'locked',
      'b',
    ]);
  });

  it('on recovery is not met when the recovery never came', () => {
    const outcome = { candidate: 'pi', affected: true } as HillOutcome;
    const hillOf = (recovery: HillOutcome['recovery']): Hill =>
      ({ from: 0, to: 100, outcomes: [{ ...outcome, recovery }] }) as unknown as Hill;
    const recovery = requirementOf({ figure: 'recovery_s', atMost: 10 });
    const judged = (time: HillOutcome['recovery']) =>
      verdictOf(recovery, runOf('pi', [0]), 0, { ...CONTEXT, hills: [hillOf(time)] }).verdict;
    expect(judged(8)).toBe('met');
    expect(judged(12)).toBe('not met');
    expect(judged({ none: 'it was not back within 1 km/h for 3 s in two minutes' })).toBe('not met');
    expect(judged({ none: 'the run ended before it was back within 1 km/h for 3 s' })).toBe('not judged');
  });

  it('on recovery is not met by a known one over the limit, whatever is unknown beside it', () => {
    const hill = (from: number, recovery: HillOutcome['recovery']): Hill =>
      ({
        number: from / 100 + 7,
        from,
        to: from + 100,
        outcomes: [{ candidate: 'pi', affected: true, recovery }],
      }) as unknown as Hill;
    const ended = { none: 'the run ended before it was back within 1 km/h for 3 s' };
    const judged = (...hills: Hill[]) =>
      verdictOf(requirementOf({ figure: 'recovery_s', atMost: 10 }), runOf('pi', [0]), 0, {
        ...CONTEXT,
        hills,
      });
    const failed = judged(hill(0, 25), hill(200, ended));
    expect(failed.verdict).toBe('not met');
    expect(failed.measured).toBe(25);
    expect(failed.words).toContain('short, after hill 7');
    expect(failed.afterHill).toBe(7);
    expect(failed.worstAt).toBe(100);
    const open = judged(hill(0, 8), hill(200, ended));
    expect(open.verdict).toBe('too close to call');
    expect(open.words).toContain(ended.none);
  });

  it('is too close to call, not met, when it failed on a drawn road', () => {
    const judged = (failed: number, kmh: number) =>
      judge([requirementOf({})], [runOf('pi', [0, kmh, 1, 0])], CONTEXT, spreadOf(0.1, failed))[0]!;
    expect(judged(0, 3).verdict).toBe('met');
    expect(judged(1, 3).verdict).toBe('too close to call');
    expect(judged(1, 3).words).toContain('1 of 8 drawn roads');
    expect(judged(1, 5).verdict).toBe('not met');
  });

  it('of an unknown figure is refused', () => {
    expect(() => judge([requirementOf({ figure: 'worst' })], [], CONTEXT)).toThrow(/no such figure.*worst/s);
  });
});

describe('the holdable part', () => {
  it('leaves out the hill that no design can hold, and what comes right behind it', () => {
    const road = oneHill(0.08);
    const { replayed, demand, hills } = study({ pi: planOf(road, vehicleOf(), STIFF) });
    const of = (where: Requirement['where']) =>
      judge([requirementOf({ figure: 'worst_low_kmh', atMost: null, atLeast: -2, where })], replayed, {
        road,
        demand,
        hills,
      })[0]!;
    expect(of('all').verdict).toBe('not met');
    expect(of('holdable').verdict).toBe('met');
    expect(of('holdable').measured as number).toBeGreaterThan(-2);
  });
});

describe('the spread of a figure', () => {
  it('is 0 on a written road, and says so', () => {
    const spread = figureSpread([requirementOf({})], [runOf('pi', [0, 3])], CONTEXT);
    expect(spread.roads).toBe(0);
    expect(spread.rows).toEqual([{ requirement: 'SH-01', candidate: 'pi', sd: 0, failed: 0 }]);
    expect(spreadMethod(spread)).toContain('no uncertainty');
  });

  it('is the same for the same seed, and grows in proportion to the uncertainty of the grade', () => {
    const road = {
      ...oneHill(0.04),
      smoothing: {
        source: 'lidar',
        wavelength: 200,
        lambda: 1000,
        residualSd: 0.1,
        sourceGradeSd: 0.002,
        shortestHill: 300,
      },
    };
    const soft = piOf({ kp: 0.15, ki: 0.02 });
    const requirement = requirementOf({ figure: 'rms_error_kmh' });
    const spreadAt = (sd: number, seed: number) => {
      const uncertain = { ...road, gradeSd: new Float64Array(road.size).fill(sd) };
      const { replayed, demand, hills } = study({ pi: planOf(uncertain, vehicleOf(), soft) });
      return figureSpread([requirement], replayed, { road: uncertain, demand, hills }, { roads: 16, seed });
    };
    const once = spreadAt(0.0005, 7);
    expect(once.roads).toBe(16);
    expect(once).toEqual(spreadAt(0.0005, 7));
    expect(once.rows[0]!.sd).toBeGreaterThan(0);
    expect(once.rows[0]!.sd).not.toBe(spreadAt(0.0005, 8).rows[0]!.sd);
    // Small enough to be linear: twice the s.d. of the grade, twice that of the figure.
    expectClose(spreadAt(0.001, 7).rows[0]!.sd / once.rows[0]!.sd, 2, 0.2);
    expect(spreadMethod(once)).toContain('16 roads');
  });
});
