import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import { toKm } from '../units/convert.ts';
import { CORRECTION_RANGE, correctionFactor, deratingExtrapolates } from '../vehicle/derating.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import type { CandidateResult } from './run-result.ts';

/** An energy account that is further open than this says that the solver went wrong. */
const GREATEST_RESIDUAL = 1e-6;

const ENDINGS = {
  stalled: 'stalled: the drive cannot turn so slowly',
  stopped: 'came to a stop',
  time_limit: 'was cut off: it took far longer than the set speed would',
  non_finite: 'failed numerically: its speed is no number any more',
} as const;

/** What the road, the drive in its air and the runs give cause to say, in the order of the work. */
export function runWarnings(
  road: Road,
  { drive }: Vehicle,
  candidates: readonly CandidateResult[],
): readonly Warning[] {
  return [
    ...road.warnings,
    ...deratingWarnings(road, drive),
    ...candidates.flatMap((candidate) => candidateWarnings(candidate)),
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

function candidateWarnings({ name, result }: CandidateResult): readonly Warning[] {
  const warnings: Warning[] = [];
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
