import { describe, expect, it } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { Hill, Remedy } from '../../src/study/findings.ts';
import { withMoreForce, withPayload } from '../../src/study/levers.ts';
import { wheelForce } from '../../src/vehicle/drive-law.ts';
import { electricDrive } from '../../src/vehicle/electric-drive.ts';
import { expectClose } from '../compare.ts';
import { BAND, oneHill, outcomeOn, STIFF, study } from './scene.ts';
import { HOLD_60, piOf, planOf, vehicleOf } from './vehicle-of.ts';

/** Every sample from a settled start to the end of what the hill is answerable for stays in the band. */
function holdsOn(plan: LoopPlan, hill: Hill): boolean {
  const { status, series } = replay(plan, { settledAt: hill.from - 1200 }, hill.until);
  if (status !== 'completed') return false;
  for (let i = 0; i < series.size; i++)
    if (series.distance[i]! >= hill.from && Math.abs(series.speed[i]! - series.setSpeed[i]!) > BAND)
      return false;
  return true;
}

const remedy = (hill: Hill, lever: Remedy['lever']): Remedy => {
  const found = outcomeOn(hill, 'pi').wouldHold.find((r) => r.lever === lever);
  if (found === undefined) throw new Error(`no remedy by ${lever}`);
  return found;
};

describe('what would hold', () => {
  const road = oneHill(0.08);
  const plan = planOf(road, vehicleOf(), STIFF);
  const hill = study({ pi: plan }).hills[0]!;
  const atKmh = (kmh: number): LoopPlan => ({
    ...plan,
    hold: { ...HOLD_60, setSpeed: kmh / 3.6, startSpeed: kmh / 3.6 },
  });

  it('a lower set speed: the value holds, one km/h more does not', () => {
    const { holds, fails, words } = remedy(hill, 'set_speed');
    const kmh = Math.round((holds as number) * 3.6);
    expectClose(holds as number, kmh / 3.6, 1e-12);
    expectClose(fails as number, (kmh + 1) / 3.6, 1e-12);
    expect(holdsOn(atKmh(kmh), hill)).toBe(true);
    expect(holdsOn(atKmh(kmh + 1), hill)).toBe(false);
    expect(words).toContain(`${kmh} km/h`);
  });

  it('more force: the value holds, 5 % less does not', () => {
    const { holds, fails } = remedy(hill, 'power');
    // Power at the wheel at 60 km/h; the drive has no power limit, so the force is power over speed.
    const forceOf = (watts: number): number => watts / (60 / 3.6);
    expectClose(((holds as number) - (fails as number)) / (60 / 3.6), 0.05 * 260, 1e-9);
    const withForce = (peakForce: number): LoopPlan => ({
      ...plan,
      vehicle: vehicleOf({ drive: { peakForce } }),
    });
    expect(holdsOn(withForce(forceOf(holds as number)), hill)).toBe(true);
    expect(holdsOn(withForce(forceOf(fails as number)), hill)).toBe(false);
  });

  it('less load: the value holds, 5 kg more does not', () => {
    const loaded = planOf(oneHill(0.0645), vehicleOf({ mass: 260, payload: 62 }), STIFF);
    const steep = study({ pi: loaded }).hills[0]!;
    const { holds, fails } = remedy(steep, 'load');
    expectClose((fails as number) - (holds as number), 5, 1e-12);
    const withLoad = (kg: number): LoopPlan => ({
      ...loaded,
      vehicle: vehicleOf({ mass: 198 + kg, payload: kg }),
    });
    expect(holdsOn(withLoad(holds as number), steep)).toBe(true);
    expect(holdsOn(withLoad(fails as number), steep)).toBe(false);
  });

  it('says so where a lever cannot help', () => {
    expect(remedy(hill, 'load').holds).toHaveProperty('none');
    const empty = planOf(road, vehicleOf({ payload: 0 }), STIFF);
    expect(remedy(study({ pi: empty }).hills[0]!, 'load').words).toBe('There is no payload to take off.');
    const down = study({ pi: planOf(oneHill(-0.1), vehicleOf(), STIFF) }).hills[0]!;
    expect(remedy(down, 'set_speed').holds).toHaveProperty('none');
    expect(remedy(down, 'set_speed').words).toContain('brake');
  });

  it('a lower set speed on a descent, where the drive holds back by power', () => {
    // 2 kW of regeneration: the slower, the more force. 215 kg on 16 % push with 333 N, rolling and drag off 68 N.
    const drive = electricDrive({
      peakForce: 400,
      peakPower: null,
      closedThrottleForce: 40,
      regenerationForce: 400,
      regenerationPower: 2000,
      fadeSpeed: 0,
      throttleMin: -1,
      lag: 0.1,
      efficiency: null,
    });
    const steep = planOf(oneHill(-0.16), { ...vehicleOf(), drive }, piOf({ kp: 3, ki: 1 }));
    const found = study({ pi: steep }).hills[0]!;
    const { holds, fails, words } = remedy(found, 'set_speed');
    const at = (speed: number): LoopPlan => ({
      ...steep,
      hold: { ...HOLD_60, setSpeed: speed, startSpeed: speed },
    });
    expect((holds as number) * 3.6).toBeGreaterThan(22);
    expect((holds as number) * 3.6).toBeLessThan(32);
    expect(holdsOn(at(holds as number), found)).toBe(true);
    expect(holdsOn(at(fails as number), found)).toBe(false);
    expect(words).toContain('the rider must brake');
  });

  it('speaks of speeds in the terms of the set speed, and of power at the true one', () => {
    const scaleError = 0.08;
    const vehicle = vehicleOf();
    const optimistic = { ...vehicle, sensor: { ...vehicle.sensor, scaleError } };
    const setSpeed = ((1 + scaleError) * 60) / 3.6;
    const hold = { ...HOLD_60, setSpeedIs: 'indicated' as const, setSpeed, startSpeed: setSpeed };
    const indicated = study({ pi: planOf(road, optimistic, STIFF, { hold }) }).hills[0]!;
    const { holds, words } = remedy(indicated, 'set_speed');
    expect(words).toMatch(/^Holds at \d+ km\/h indicated; at \d+ km\/h indicated it does not/);
    const sustained = (indicated.sustainedSpeed * 3.6 * (1 + scaleError)).toFixed(1);
    expect(words).toContain(`full throttle sustains ${sustained} km/h indicated`);
    // The same hill, the same vehicle: the true speeds that hold are one step apart at most.
    expectClose((holds as number) / (1 + scaleError), remedy(hill, 'set_speed').holds as number, 1 / 3.6);
    const power = remedy(indicated, 'power');
    expectClose(((power.holds as number) - (power.fails as number)) / (60 / 3.6), 0.05 * 260, 1e-9);
    expect(power.words).toContain('at the wheel at 60.0 km/h true');
  });

  it('says where no lever helps because the gains leave the band by themselves', () => {
    const soft = planOf(oneHill(0.08), vehicleOf(), piOf({ kp: 0.15, ki: 0.02 }));
    const outcome = outcomeOn(study({ pi: soft }).hills[0]!, 'pi');
    const failed = outcome.wouldHold.filter(({ holds }) => typeof holds !== 'number');
    expect(failed.map(({ lever }) => lever)).toContain('power');
    for (const { words } of failed)
      expect(words).toMatch(/: the gains leave the band even without limits\.$/);
    // With gains that hold without limits the words do not blame them.
    for (const { words } of outcomeOn(hill, 'pi').wouldHold) expect(words).not.toContain('gains');
  });
});

describe('levers', () => {
  it('more force scales full throttle at every speed and leaves closed throttle and regeneration alone', () => {
    const drive = electricDrive({
      peakForce: 300,
      peakPower: 4000,
      closedThrottleForce: 20,
      regenerationForce: 120,
      regenerationPower: 2500,
      fadeSpeed: 3,
      throttleMin: -1,
      lag: 0,
      efficiency: null,
    });
    const plan = planOf(oneHill(0.05), { ...vehicleOf(), drive }, STIFF);
    const stronger = withMoreForce(plan, 0.25).vehicle.drive;
    for (const speed of [1, 2.5, 5, 10, 15, 25]) {
      const force = (throttle: number, of = stronger): number => wheelForce(of, 0, speed, throttle, 1);
      expectClose(force(1), 1.25 * force(1, drive), 1e-9);
      expectClose(force(0), force(0, drive), 1e-12);
      expectClose(force(-1), force(-1, drive), 1e-12);
      expectClose(force(0.5), (force(0) + force(1)) / 2, 1e-9);
    }
  });

  it('payload changes the mass by what is taken off', () => {
    const plan = planOf(oneHill(0.05), vehicleOf({ mass: 215, payload: 15 }), STIFF);
    expect(withPayload(plan, 5).vehicle.mass).toBe(205);
    expect(withPayload(plan, 5).vehicle.payload).toBe(5);
  });
});
