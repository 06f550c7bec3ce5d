import { it } from 'vitest';
import { runLoop } from '../../src/loop/run-loop.ts';
import { demandOf } from '../../src/study/demand.ts';
import { findLimitCycles } from '../../src/study/limit-cycles.ts';
import { roadOf } from './road-of.ts';
import { piOf, planOf, vehicleOf } from './vehicle-of.ts';

function cycles(plan: any) {
  const result = runLoop(plan);
  const replayed = [{ name: 'pi', plan, result }];
  const demand = demandOf(plan.road, plan.vehicle, plan.hold, plan.rider);
  const t = process.cpuUsage().user;
  const found = findLimitCycles({ road: plan.road, demand, replayed });
  console.log(result.status, demand.holdableShare, (process.cpuUsage().user - t) / 1000);
  return found;
}
const flat = roadOf([
  { length: 200, grade: 0 },
  { length: 10, grade: 0.03 },
  { length: 5000, grade: 0 },
]);
it('gains', () => {
  const v = vehicleOf({actuator: {lag: 1.5}});
  const late = {...v, sensor: {...v.sensor, delay: 0.6}};
  for (const kp of [0.3, 0.5, 0.7, 1, 2, 3, 5]) console.log(kp, cycles(planOf(flat, late, piOf({ kp, ki: 0.03 }))));
});
