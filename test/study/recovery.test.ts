import { describe, expect, it } from 'vitest';
import type { FullSeries } from '../../src/loop/result.ts';
import { judge } from '../../src/study/judge.ts';
import { type RecoveryRule, recoveryOf } from '../../src/study/recovery.ts';
import { expectClose } from '../compare.ts';
import { oneHill, outcomeOn, study } from './scene.ts';
import { seriesOf } from './series-of.ts';
import { piOf, planOf, vehicleOf } from './vehicle-of.ts';

const KMH = 1 / 3.6;
const UPPER = 1;
const NO_LIMIT = () => 0;

/** Recovery over the seconds [from, to) of a series at 20 m/s, so that second t is at 20 t metres. */
function recover(
  series: FullSeries,
  [from, to]: readonly [number, number],
  rule: Partial<RecoveryRule> = {},
): ReturnType<typeof recoveryOf> {
  const every = { outOfRange: [], settling: [], whole: true };
  return recoveryOf(series, 10 * from, 10 * to, {
    band: 2 * KMH,
    recoveryBand: 1 * KMH,
    ...every,
    ...rule,
  });
}
const seconds = (from: number, to: number) => ({ from: 20 * from, to: 20 * to });

describe('recovery', () => {
  it('runs from leaving the band where the demand is in range, to the beginning of 3 s within 1 km/h', () => {
    const series = seriesOf(60, (t) => (t >= 10 && t < 18.5 ? -1 : 0), NO_LIMIT);
    expectClose(recover(series, [0, 30]).time as number, 8.5, 0.051);
  });

  it('counts the time at a limit that the demand does not ask for', () => {
    const atLimit = (t: number): number => (t >= 12 && t < 25 ? UPPER : 0);
    const series = seriesOf(60, (t) => (t >= 10 && t < 25.5 ? -1 : 0), atLimit);
    expectClose(recover(series, [0, 30]).time as number, 15.5, 0.051);
  });

  it('runs from where the demand comes back into range, not from leaving the limit', () => {
    // Out of range from 10 s to 20 s; the command stays at its limit until 26 s, the error until 27 s.
    const series = seriesOf(
      60,
      (t) => (t < 10 ? 0 : t < 27 ? -1 : 0.1),
      (t) => (t >= 10 && t < 26 ? UPPER : 0),
    );
    expectClose(recover(series, [8, 22], { outOfRange: [seconds(10, 20)] }).time as number, 7, 0.051);
  });

  it('is the longest of a hill on which the demand leaves the range twice', () => {
    const series = seriesOf(90, (t) => ((t >= 10 && t < 26) || (t >= 40 && t < 54) ? -1 : 0), NO_LIMIT);
    const out = { outOfRange: [seconds(10, 20), seconds(40, 45)] };
    expectClose(recover(series, [8, 60], out).time as number, 9, 0.051);
  });

  it('is none where a rule of the unit ended hold while it was waited for, and not where the rider did', () => {
    const series = seriesOf(90, (t) => (t >= 10 && t < 30 ? -1 : 0), NO_LIMIT);
    const off = { settling: [seconds(20, 60)] };
    expect(recover(series, [0, 40], { ...off, gaveUp: [400] }).time).toHaveProperty('none');
    expectClose(recover(series, [0, 40], off).time as number, 10, 0.051);
    expectClose(recover(series, [0, 40], { gaveUp: [1500] }).time as number, 20, 0.051);
    // Out of range when the rule ended hold: the road had asked for more than there is.
    const out = { ...off, gaveUp: [400], outOfRange: [seconds(8, 25)] };
    expect(recover(series, [0, 40], out).time).toBe(0);
  });

  it('counts up to where the demand leaves the range again, on the hill and behind it', () => {
    const series = seriesOf(120, (t) => (t >= 10 && t < 70 ? -1 : 0), NO_LIMIT);
    const out = { outOfRange: [seconds(10, 20), seconds(50, 65)] };
    // 30 s before the demand is out again, and 5 s after that.
    expectClose(recover(series, [8, 80], out).time as number, 30, 0.11);
    expectClose(recover(series, [8, 30], out).time as number, 30, 0.11);
    expectClose(recover(series, [48, 80], out).time as number, 5, 0.11);
  });

  it('counts up to a change of set speed, and nothing while that is followed', () => {
    const series = seriesOf(90, (t) => (t >= 10 && t < 40 ? 3 : 0), NO_LIMIT);
    const changed = { settling: [seconds(22, 45)] };
    expectClose(recover(series, [0, 50], changed).time as number, 12, 0.11);
    expect(recover(series, [22, 50], changed).time).toBe(0);
  });

  it('starts anew when the error leaves 1 km/h again within the 3 s', () => {
    const series = seriesOf(60, (t) => ((t >= 10 && t < 12) || (t >= 14 && t < 15) ? 1 : 0), NO_LIMIT);
    expectClose(recover(series, [0, 30]).time as number, 5, 0.051);
  });

  it('is 0 where there was nothing to recover from, and says why where it never came', () => {
    expect(
      recover(
        seriesOf(20, () => 0, NO_LIMIT),
        [0, 10],
      ).time,
    ).toBe(0);
    const lost = seriesOf(30, (t) => (t > 5 ? -3 : 0), NO_LIMIT);
    expect(recover(lost, [0, 20]).time).toEqual({
      none: 'it was not back within 1 km/h for 3 s in two minutes',
    });
    const ended = { none: 'the run ended before it was back within 1 km/h for 3 s' };
    expect(recover(lost, [0, 20], { whole: false }).time).toEqual(ended);
    // The road ends where the demand is still out of range.
    expect(recover(lost, [0, 30], { whole: false, outOfRange: [seconds(10, 31)] }).time).toEqual(ended);
  });
});

describe('a hill whose demand stays just in range', () => {
  // 800 m at 6 % ask for 98 % of 260 N. The gains are slow, the command meets its limit late, and leaves it when the
  // error is already gone: counted from there, the recovery would be 0 s after 25 s out of band.
  const [kp, ti] = [(0.04 * 3600) / 1000, 6];
  const slow = piOf({ kp, ki: kp / ti, setpointWeight: 1 });
  const vehicle = vehicleOf({ drive: { peakPower: 8500 } });
  const road = oneHill(0.06);
  const { replayed, demand, hills } = study({ pi: planOf(road, vehicle, slow) });

  it('has a recovery as long as the error was out of the band, as the record by bins has it', () => {
    const { bins } = replayed[0]!.result;
    let left = Number.NaN;
    let back = Number.NaN;
    for (let i = 0; i < bins.size; i++) {
      const worst = Math.max(bins.errorMax[i]!, -bins.errorMin[i]!);
      if (Number.isNaN(left) && worst > 2 * KMH) left = bins.timeAt[i]!;
      if (left >= 0 && Number.isNaN(back) && worst <= 1 * KMH) back = bins.timeAt[i]!;
    }
    expect(back - left).toBeGreaterThan(15);
    // Bins of 20 m take 1.2 s.
    expectClose(outcomeOn(hills[0]!, 'pi').recovery as number, back - left, 2.5);
  });

  it('does not meet a recovery of 10 s', () => {
    const limits = {
      figure: 'recovery_s',
      band: null,
      atLeast: null,
      atMost: 10,
      where: 'holdable',
    } as const;
    const [finding] = judge([{ id: 'SH-03', candidates: null, ...limits }], replayed, {
      road,
      demand,
      hills,
    });
    expect(finding!.verdict).toBe('not met');
  });
});
