import { describe, expect, it } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { has, type Limitation, without } from '../../src/study/limitations.ts';
import { wheelForce } from '../../src/vehicle/drive-law.ts';
import { electricDrive } from '../../src/vehicle/electric-drive.ts';
import { expectClose } from '../compare.ts';
import { gearedVehicle } from './geared.ts';
import { oneHill, STIFF } from './scene.ts';
import { planOf, vehicleOf } from './vehicle-of.ts';

const ROAD = oneHill(0.05);
const AUTOMATIC = {
  kind: 'automatic',
  throttle: Float64Array.of(0, 1),
  upSpeed: Float64Array.of(200, 420),
  downSpeed: Float64Array.of(110, 150),
  gap: 0.3,
  dwell: 1,
} as const;
const hot = electricDrive({
  peakForce: 300,
  peakPower: 4000,
  closedThrottleForce: 20,
  regenerationForce: 100,
  regenerationPower: null,
  fadeSpeed: 3,
  throttleMin: -1,
  lag: 0,
  efficiency: { drive: 0.9, regeneration: 0.6 },
  battery: {
    capacity: 4e6,
    charge: 0.9,
    reserve: 0.1,
    cells: null,
    acceptance: { charge: Float64Array.of(0.8, 1), share: Float64Array.of(1, 0) },
  },
  heating: { continuousPower: 2000, peakPowerTime: 60, onset: 0.8 },
});
const traction = { friction: 0.8, wheelbase: 1.3, massCentreAhead: 0.65, massCentreHeight: 0.6 };
const cut = { above: 130, blend: 10, throttle: 0.05, torque: 2 };

/** A plan that has the limitation, one that has not, and what differs once it is taken away. */
const ROWS: readonly [Limitation, LoopPlan][] = [
  ['slack', planOf(ROAD, vehicleOf({ actuator: { slack: 0.1 } }), STIFF)],
  ['resolution', planOf(ROAD, vehicleOf({ actuator: { resolution: 0.01 } }), STIFF)],
  ['dead_time', planOf(ROAD, vehicleOf({ actuator: { deadTime: 0.1 } }), STIFF)],
  ['rate', planOf(ROAD, vehicleOf({ actuator: { rateLimit: 1 } }), STIFF)],
  ['fuel_cut', planOf(ROAD, gearedVehicle({ fuelCut: cut }), STIFF)],
  ['shifting', planOf(ROAD, gearedVehicle({ gearbox: AUTOMATIC }), STIFF)],
  ['grip', planOf(ROAD, gearedVehicle({}, { traction }), STIFF)],
  ['derating', planOf(ROAD, { ...vehicleOf(), drive: hot }, STIFF)],
  ['derating', planOf(ROAD, gearedVehicle({ derate: 'naturally_aspirated' }), STIFF)],
];

describe('a limitation', () => {
  it('is there in the plan that has it and gone from the plan without it', () => {
    for (const [limitation, plan] of ROWS) {
      expect(has(plan, limitation), limitation).toBe(true);
      expect(has(without(plan, limitation), limitation), limitation).toBe(false);
      expect(has(planOf(ROAD, vehicleOf(), STIFF), limitation), limitation).toBe(false);
    }
    const seen = vehicleOf();
    const counting = { spacing: 0.04, reading: { kind: 'counted', window: 0.1 } } as const;
    const counted = planOf(ROAD, { ...seen, sensor: { ...seen.sensor, pulses: counting } }, STIFF);
    expect(has(counted, 'pulses')).toBe(true);
    expect(without(counted, 'pulses')).toEqual(planOf(ROAD, seen, STIFF));
  });

  it('leaves every other one as it was', () => {
    for (const [limitation, plan] of ROWS)
      for (const [other] of ROWS)
        if (other !== limitation) expect(has(without(plan, limitation), other), other).toBe(has(plan, other));
  });

  it('of the fuel cut takes the step away and keeps gear, range and the force above it', () => {
    const plan = planOf(ROAD, gearedVehicle({ fuelCut: cut, gear: 1 }), STIFF);
    const { drive } = without(without(plan, 'range'), 'fuel_cut').vehicle;
    expect(drive.gear).toBe(1);
    expect(drive.throttleMax).toBeGreaterThan(1);
    const force = (of: typeof drive, throttle: number): number => wheelForce(of, 1, 60 / 3.6, throttle, 1);
    // 5 N m of drag and 2 more below the cut, times 14 1/m.
    expectClose(force(plan.vehicle.drive, 0), -98, 1e-9);
    expectClose(force(drive, 0), -70, 1e-9);
    expectClose(force(drive, 0.6), force(plan.vehicle.drive, 0.6), 1e-9);
  });

  it('of the range takes the end stops of the actuator away too', () => {
    const stopped = vehicleOf({ actuator: { travel: { least: 0, greatest: 0.7 } } });
    expect(without(planOf(ROAD, stopped, STIFF), 'range').vehicle.actuator.travel).toBeNull();
  });
});
