import { describe, expect, it } from 'vitest';
import { demandOf } from '../../src/study/demand.ts';
import { findHills } from '../../src/study/find-hills.ts';
import { expectClose } from '../compare.ts';
import { electricOf, FULL_FADE, SAGGING } from './electric.ts';
import { roadOf } from './road-of.ts';
import { HOLD_60 } from './vehicle-of.ts';

const V = 60 / 3.6;
/** Of the vehicle of these tests [N]: 215 kg, CdA 0.58, crr 0.014, still air of 1.2 kg/m3. */
const requiredOn = (grade: number): number => {
  const cos = 1 / Math.sqrt(1 + grade * grade);
  return 0.6 * 0.58 * V * V + 215 * 9.80665 * cos * (0.014 + grade);
};

describe('demand on a battery', () => {
  it('has the regeneration that the battery accepts at the charge of the start', () => {
    const road = roadOf([{ length: 300, grade: -0.1 }]);
    const lowerAt = (charge: number): number =>
      demandOf(road, electricOf({ battery: { charge, acceptance: FULL_FADE } }), HOLD_60).lower[5]!;
    expectClose(lowerAt(0.6), -230, 1e-9);
    expectClose(lowerAt(0.95), -130, 1e-9);
    expectClose(lowerAt(1), -30, 1e-9);
  });

  it('makes a descent of a full battery one that needs a brake', () => {
    const road = roadOf([
      { length: 1000, grade: 0 },
      { length: 1000, grade: -0.1 },
    ]);
    const vehicle = electricOf({ battery: { charge: 1, acceptance: FULL_FADE } });
    const demand = demandOf(road, vehicle, HOLD_60);
    const [hill] = findHills({ road, demand, replayed: [], band: 0.5 });
    expect(hill!.kind).toBe('descent');
    // 83 N push where the drag of the motor holds back 30 N.
    expectClose(hill!.requiredForce, requiredOn(-0.1), 1e-6);
    expectClose(hill!.availableForce, -30, 1e-9);
    expectClose(hill!.brakePower, (-30 - requiredOn(-0.1)) * V, 1e-6);
    expect(
      findHills({ road, demand: demandOf(road, electricOf(), HOLD_60), replayed: [], band: 0.5 }),
    ).toEqual([]);
  });

  it('has the force that the voltage leaves at the charge of the start', () => {
    const road = roadOf([{ length: 300, grade: 0.1 }]);
    const at = (charge: number) =>
      demandOf(road, electricOf({ battery: { charge, cells: SAGGING } }), HOLD_60);
    expectClose(at(0.8).upper[5]!, 400, 1e-9);
    // 82 V of 90 V.
    expectClose(at(0.1).upper[5]!, (400 * 82) / 90, 1e-9);
    expectClose(at(0.1).share[5]!, requiredOn(0.1) / ((400 * 82) / 90), 1e-9);
    expectClose(at(0.1).lower[5]!, -230, 1e-9);
    // An empty battery gives nothing.
    expect(at(0).upper[5]!).toBeLessThanOrEqual(0);
  });
});
