import { describe, expect, it } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { replay } from '../../src/loop/replay.ts';
import type { Hill, Remedy } from '../../src/study/findings.ts';
import { withMoreForce } from '../../src/study/levers.ts';
import { wheelForce } from '../../src/vehicle/drive-law.ts';
import { engineDrive } from '../../src/vehicle/engine-drive.ts';
import { expectClose } from '../compare.ts';
import { singleWithGears } from '../vehicle/engines.ts';
import { gearedVehicle } from './geared.ts';
import { BAND, oneHill, outcomeOn, STIFF, study } from './scene.ts';
import { planOf, vehicleOf } from './vehicle-of.ts';

const gearOf = (plan: LoopPlan): { hill: Hill; remedy: Remedy | undefined } => {
  const hill = study({ pi: plan }).hills[0]!;
  return { hill, remedy: outcomeOn(hill, 'pi').wouldHold.find(({ lever }) => lever === 'gear') };
};

/** The whole road from its start: inside the band from where the hill begins to the end of what it is answerable for. */
function holdsOn(plan: LoopPlan, hill: Hill): boolean {
  const { status, series } = replay(plan, { settledAt: 0 }, hill.until);
  for (let i = 0; i < series.size; i++)
    if (series.distance[i]! >= hill.from && Math.abs(series.speed[i]! - series.setSpeed[i]!) > BAND)
      return false;
  return status === 'completed';
}

describe('a lower gear that would hold', () => {
  const road = oneHill(0.09);

  it('is the nearest one, all over the hill, of a gearbox that is not shifted', () => {
    // 313 N are asked: the third gear gives 300, the second 420.
    const plan = planOf(road, gearedVehicle({ gear: 3 }), STIFF);
    const { hill, remedy } = gearOf(plan);
    expect(remedy).toMatchObject({ holds: 2, fails: 3, at: null });
    expect(remedy!.words).toBe('In 2nd gear it holds; in 3rd gear it does not.');
    expect(holdsOn({ ...plan, vehicle: gearedVehicle({ gear: 1 }) }, hill)).toBe(true);
    expect(holdsOn({ ...plan, vehicle: gearedVehicle({ gear: 2 }) }, hill)).toBe(false);
  });

  it('is reached by a shift of the rider on a clutch gearbox, at the latest whole 0.1 km from which it holds', () => {
    const gearbox = { kind: 'clutch', open: 0.6, resume: 1.5 } as const;
    const plan = planOf(road, gearedVehicle({ gear: 3, gearbox }), STIFF);
    const { hill, remedy } = gearOf(plan);
    expect(remedy).toMatchObject({ holds: 2, fails: 3 });
    const at = remedy!.at as number;
    expectClose(at, 100 * Math.round(at / 100), 1e-9);
    expect(at).toBeLessThan(hill.from);
    const shiftedAt = (distance: number): LoopPlan => ({
      ...plan,
      rider: { brakesAbove: null, shifts: [{ distance, gear: 1 }] },
    });
    expect(holdsOn(shiftedAt(at), hill)).toBe(true);
    if (at + 100 <= hill.from) expect(holdsOn(shiftedAt(at + 100), hill)).toBe(false);
    expect(remedy!.words).toContain(
      `The rider changes down to 2nd gear at km ${(at / 1000).toFixed(2)} (hold is cancelled and must be resumed)`,
    );
    expect(remedy!.words).toContain('in 3rd gear it does not.');
  });

  it('is told with what the shift itself costs where that leaves the band', () => {
    // 126 N of road load and 28 N of drag take 0.56 m/s2: 2 s with the clutch open are 4 km/h.
    const gearbox = { kind: 'clutch', open: 2, resume: 1.5 } as const;
    const { remedy } = gearOf(planOf(road, gearedVehicle({ gear: 3, gearbox }), STIFF));
    const fall = /lets the speed fall ([0-9.]+) km\/h below/.exec(remedy!.words);
    expectClose(Number(fall![1]), 4.0, 0.6);
  });

  it('is none where the gearbox or a belt chooses, where none holds, and unasked where there are no gears', () => {
    expect(gearOf(planOf(road, vehicleOf(), STIFF)).remedy).toBeUndefined();
    const lowest = gearOf(planOf(oneHill(0.3), gearedVehicle({ gear: 0 }), STIFF)).remedy!;
    expect(lowest.words).toBe('There is no lower gear.');
    const steep = gearOf(planOf(oneHill(0.3), gearedVehicle({ gear: 2 }), STIFF)).remedy!;
    expect(steep.words).toBe('No lower gear holds either.');
    expect(steep.holds).toHaveProperty('none');
  });
});

describe('more force of an engine', () => {
  it('scales full throttle at every speed, keeps closed throttle, and the shape between', () => {
    const drive = engineDrive(singleWithGears);
    const plan = planOf(oneHill(0.05), { ...vehicleOf(), drive }, STIFF);
    const stronger = withMoreForce(plan, 0.3).vehicle.drive;
    for (const speed of [12, 18, 25, 34, 42]) {
      const force = (throttle: number, of = stronger, derate = 1): number =>
        wheelForce(of, 5, speed, throttle, derate);
      expectClose(force(1), 1.3 * force(1, drive), 1e-9);
      expectClose(force(0), force(0, drive), 1e-9);
      // The share of the way from closed to full throttle, at any throttle above the fuel cut.
      const share = (throttle: number, of: typeof drive): number =>
        (force(throttle, of) - force(0.03, of)) / (force(1, of) - force(0.03, of));
      expectClose(share(0.4, stronger), share(0.4, drive), 0.03);
      expectClose(force(1, stronger, 0.8), 0.8 * 1.3 * force(1, drive), 1e-9);
    }
    const smooth = stronger.withoutFuelCut!;
    expectClose(wheelForce(smooth, 5, 25, 1, 1), wheelForce(stronger, 5, 25, 1, 1), 1e-9);
  });
});
