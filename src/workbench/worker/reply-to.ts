import { InputError } from '../../problems/input-error.ts';
import type { Reply } from './messages.ts';

/** What some work answers; what it refuses, or fails at, as a reply too. */
export async function replyTo<T>(
  number: number,
  work: () => T | Promise<T>,
): Promise<T | Extract<Reply, { kind: 'refused' | 'failed' }>> {
  try {
    return await work();
  } catch (error) {
    if (error instanceof InputError) return { kind: 'refused', number, problems: error.problems };
    return { kind: 'failed', number, message: error instanceof Error ? error.message : String(error) };
  }
}
