import type { Hill } from '../../study/findings.ts';

/** What to call it: where the road does not go up or down it is no hill. */
export const hillNoun = (hill: Pick<Hill, 'kind'>): 'hill' | 'stretch' =>
  hill.kind === 'level' ? 'stretch' : 'hill';
