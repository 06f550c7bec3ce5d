import { describe, expect, it } from 'vitest';
import { batteryPlaces } from '../../src/study/battery-places.ts';
import type { Battery } from '../../src/vehicle/energy-source.ts';
import { recordOf } from './record-of.ts';

const BATTERY: Battery = {
  kind: 'battery',
  map: {
    shaftSpeed: Float64Array.of(0, 1),
    torque: Float64Array.of(0, 1),
    power: new Float64Array(4),
    least: 0,
  },
  capacity: 1000,
  charge: 0.5,
  reserve: 0.2,
  sag: null,
  acceptance: null,
  heating: null,
};
/** 500 J to begin with: 400, 300, 200, 100 and 0 are left at the ends of bins of 50 m. */
const bins = recordOf(50, [
  { drawn: 100 },
  { drawn: 100 },
  { drawn: 100 },
  { drawn: 100 },
  { drawn: 100, driveLost: 1 },
  { driveLost: 1 },
]);

describe('the places of a battery', () => {
  it('are the ends of the bins in which it comes to its reserve and in which it is empty', () => {
    expect(batteryPlaces(BATTERY, bins)).toEqual({ reserve: 150, empty: 250 });
  });

  it('are none for a reserve that was not there at the start, a battery of unknown size, or a tank', () => {
    expect(batteryPlaces({ ...BATTERY, reserve: 0.6 }, bins).reserve).toBeNull();
    expect(batteryPlaces({ ...BATTERY, capacity: null }, bins)).toEqual({ reserve: null, empty: null });
    expect(batteryPlaces(null, bins)).toEqual({ reserve: null, empty: null });
  });

  it('is not empty where heat or voltage alone leaves no force', () => {
    expect(batteryPlaces({ ...BATTERY, charge: 1 }, bins).empty).toBeNull();
  });
});
