import type { RequirementFinding } from '../../study/findings.ts';

export type Verdict = RequirementFinding['verdict'];

/** All verdicts, the one that weighs most first: a design stands as the first that it has. */
export const VERDICTS: readonly Verdict[] = ['not met', 'too close to call', 'not judged', 'met'];
