import { isMissed } from '../../run/with-matrix.ts';
import type { RequirementFinding } from '../../study/findings.ts';

/** Ids of the requirements that are missed (what is not judged counts), and that are too close to call. */
export const missedIds = (findings: readonly RequirementFinding[]): readonly string[] =>
  findings.filter(isMissed).map(({ requirement }) => requirement.id);
export const closeIds = (findings: readonly RequirementFinding[]): readonly string[] =>
  findings.filter(({ verdict }) => verdict === 'too close to call').map(({ requirement }) => requirement.id);

/** `meets 3 of 4; misses SH-03`; of one with nothing asked of it an empty text. `noun` in the singular. */
export function requirementWords(findings: readonly RequirementFinding[], noun = ''): string {
  if (findings.length === 0) return '';
  const [missed, close] = [missedIds(findings), closeIds(findings)];
  const met = findings.length - missed.length - close.length;
  return [
    `meets ${met} of ${findings.length}${noun === '' ? '' : ` ${noun}${findings.length === 1 ? '' : 's'}`}`,
    ...(missed.length === 0 ? [] : [`misses ${missed.join(', ')}`]),
    ...(close.length === 0 ? [] : [`too close to call ${close.join(', ')}`]),
  ].join('; ');
}
