import type { LoggedRun } from './read-log.ts';

/** What a log is of. */
export const LOG_KINDS = ['coast-down', 'step', 'ride'] as const;
export type LogKind = (typeof LOG_KINDS)[number];

/** A throttle below this share is closed: the rest is the zero of its sensor. */
export const CLOSED = 0.01;

/**
 * What logs are of, from their columns: with a power at the wheel, or with a throttle and a place (distance, elevation,
 * position), a ride; with a throttle that opens and nothing of the kind a step test; else a coast-down.
 */
export function logKindOf(runs: readonly LoggedRun[]): LogKind {
  const driven = runs.some(({ throttle }) => throttle?.some((share) => share > CLOSED) ?? false);
  if (runs.some(({ wheelPower }) => wheelPower !== null)) return 'ride';
  if (!driven) return 'coast-down';
  const placed = ({ distance, elevation, grade, latitudeDeg }: LoggedRun): boolean =>
    distance !== null || elevation !== null || grade !== null || latitudeDeg !== null;
  return runs.some(placed) ? 'ride' : 'step';
}
