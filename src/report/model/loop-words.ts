import type { CandidateView } from './view.ts';

/** The linear loop of a candidate swings by itself, whatever the road. */
export const isUnstable = ({ loop }: Pick<CandidateView, 'loop'>): boolean => loop !== null && !loop.stable;
