import { expect, it } from 'vitest';
import { holdingThrottle } from '../../../src/report/model/holding-throttle.ts';
import { viewOf } from '../../../src/report/model/view.ts';
import { expectClose } from '../../compare.ts';
import { fixtureResult } from '../fixture.ts';
import { PLANT } from '../fixture-run.ts';

it('the holding throttle shares out the force between closed and full, and goes on beyond both in a straight line', () => {
  const base = fixtureResult({ lengthKm: 12 });
  const drive = { ...base.vehicle.drive, derate: 'none' as const };
  const full = Math.min(PLANT.peak, PLANT.power / (60 / 3.6));
  const required = base.demand.required.slice();
  const forces = [-PLANT.drag, full, (full - PLANT.drag) / 2, full + 50, -PLANT.drag - 50];
  forces.forEach((force, knot) => {
    required[knot] = force;
  });
  const view = viewOf(
    { ...base, vehicle: { ...base.vehicle, drive }, demand: { ...base.demand, required } },
    'kmh',
  );
  const beyond = 50 / (full + PLANT.drag);
  [0, 1, 0.5, 1 + beyond, -beyond].forEach((throttle, knot) => {
    expectClose(holdingThrottle(view, knot), throttle, 1e-12);
  });
  expect(view.result.demand.setSpeed[0]).toBeCloseTo(60 / 3.6, 12);
});
