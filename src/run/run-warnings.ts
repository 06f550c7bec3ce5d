import { USUAL_GAIN_MARGIN, USUAL_PHASE_MARGIN } from '../control/loop-stability.ts';
import type { RiderPlan } from '../loop/plan.ts';
import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import type { Demand, Replayed } from '../study/findings.ts';
import { toDeg, toKm, toKmh } from '../units/convert.ts';
import { CORRECTION_RANGE, correctionFactor, deratingExtrapolates } from '../vehicle/derating.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { batteryWarnings } from './battery-warnings.ts';
import { biteWarnings } from './bite-warnings.ts';
import { chatterWarnings } from './chatter-warnings.ts';
import { gearWarnings } from './gear-warnings.ts';
import { gripWarnings } from './grip-warnings.ts';
import type { CandidateResult } from './run-result.ts';

/** An energy account that is further open than this says that the solver went wrong. */
const GREATEST_RESIDUAL = 1e-6;

const ENDINGS = {
  stalled: 'stalled: the drive cannot turn so slowly',
  stopped: 'came to a stop',
  time_limit: 'was cut off: it took far longer than the set speed would',
  non_finite: 'failed numerically: its speed is no number any more',
} as const;

/** What a run found, as far as it gives cause to warn. */
interface Warned {
  readonly road: Road;
  readonly vehicle: Vehicle;
  readonly rider: RiderPlan;
  readonly demand: Demand;
  readonly replayed: readonly Replayed[];
  readonly candidates: readonly CandidateResult[];
}

/** What the road, the drive in its air, gears, grip, battery and the runs give cause to say, in the order of the work. */
export function runWarnings({
  road,
  vehicle,
  rider,
  demand,
  replayed,
  candidates,
}: Warned): readonly Warning[] {
  return [
    ...road.warnings,
    ...deratingWarnings(road, vehicle.drive),
    ...gearWarnings(road, vehicle, rider, demand, replayed),
    ...gripWarnings(replayed, demand),
    ...batteryWarnings(replayed),
    ...candidates.flatMap((candidate) => [
      ...candidateWarnings(candidate, vehicle),
      ...biteWarnings(candidate),
      ...chatterWarnings(candidate, vehicle, demand),
    ]),
  ];
}

/** One warning over all places where the altitude correction of the drive goes beyond its published range. */
function deratingWarnings(road: Road, drive: Vehicle['drive']): readonly Warning[] {
  let [first, last, most] = [-1, -1, 0];
  for (let i = 0; i < road.size; i++) {
    const density = road.airDensity[i] ?? 0;
    const temperature = road.airTemperature[i] ?? 0;
    if (!deratingExtrapolates(drive, density, temperature)) continue;
    if (first < 0) first = i;
    last = i;
    most = Math.max(most, correctionFactor(density, temperature));
  }
  if (first < 0) return [];
  const from = road.distance[first] ?? 0;
  const to = road.distance[last] ?? 0;
  return [
    {
      code: 'derating-extrapolated',
      message: `The altitude correction of the drive is extrapolated between km ${toKm(from).toFixed(2)} and ${toKm(to).toFixed(2)}: its factor reaches ${most.toFixed(2)}, and ISO 1585 vouches for ${CORRECTION_RANGE.least} to ${CORRECTION_RANGE.greatest}.`,
      from,
      to,
    },
  ];
}

function candidateWarnings({ name, result, loop }: CandidateResult, { drive }: Vehicle): readonly Warning[] {
  const warnings: Warning[] = loopWarnings(name, loop, drive.gears.length > 1);
  const { status, endDistance, ledger } = result;
  if (status !== 'completed')
    warnings.push({
      code: status.replace('_', '-'),
      message: `${name} ${ENDINGS[status]}, at km ${toKm(endDistance).toFixed(2)}.`,
      from: endDistance,
      to: endDistance,
    });
  if (!(Math.abs(ledger.residual) <= GREATEST_RESIDUAL))
    warnings.push({
      code: 'energy-open',
      message: `The energy account of ${name} does not close: ${ledger.residual.toExponential(1)} of the energy is missing, and ${GREATEST_RESIDUAL.toExponential(0)} is allowed.`,
    });
  return warnings;
}

/** What the linear loop says of the gains before any road does. */
function loopWarnings(name: string, loop: CandidateResult['loop'], geared: boolean): Warning[] {
  if (loop === null) return [];
  const gear = geared ? ` in gear ${loop.gear + 1}` : '';
  const at = `${toKmh(loop.speed).toFixed(1)} km/h${gear} on the level`;
  if (loop.gainMargin === null || loop.phaseMargin === null)
    return [
      {
        code: 'loop-unstable',
        message: `The gains of ${name} cannot work: with its lags and its sample time the linear loop at ${at} is unstable, and the throttle swings on any road.`,
      },
    ];
  if (loop.gainMargin >= USUAL_GAIN_MARGIN && Math.abs(loop.phaseMargin) >= USUAL_PHASE_MARGIN) return [];
  const gain = Number.isFinite(loop.gainMargin) ? loop.gainMargin.toFixed(2) : 'without limit';
  const phase = Number.isFinite(loop.phaseMargin)
    ? `${toDeg(loop.phaseMargin).toFixed(0)} deg`
    : 'without limit';
  return [
    {
      code: 'loop-margins-thin',
      message: `The loop of ${name} at ${at} is close to oscillating: gain margin ${gain}, phase margin ${phase}. Common practice is at least ${USUAL_GAIN_MARGIN} and ${toDeg(USUAL_PHASE_MARGIN).toFixed(0)} deg (Astrom and Hagglund, Advanced PID Control, 2006, from memory).`,
    },
  ];
}
