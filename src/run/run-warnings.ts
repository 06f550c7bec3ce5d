import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import { toKm } from '../units/convert.ts';
import type { CandidateResult } from './run-result.ts';

/** An energy account that is further open than this says that the solver went wrong. */
const GREATEST_RESIDUAL = 1e-6;

const ENDINGS = {
  stalled: 'stalled: the drive cannot turn so slowly',
  stopped: 'came to a stop',
  time_limit: 'was cut off: it took far longer than the set speed would',
  non_finite: 'failed numerically: its speed is no number any more',
} as const;

/** What the road and the runs give cause to say, in the order of the work. */
export function runWarnings(road: Road, candidates: readonly CandidateResult[]): readonly Warning[] {
  return [...road.warnings, ...candidates.flatMap((candidate) => candidateWarnings(candidate))];
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
