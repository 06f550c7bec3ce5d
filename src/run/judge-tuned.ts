import { allRecoveries } from '../study/all-recoveries.ts';
import type { Demand, Replayed, Requirement, RequirementFinding } from '../study/findings.ts';
import { judge } from '../study/judge.ts';

/** Where candidates are judged, and by what. */
export interface JudgedOn {
  readonly requirements: readonly Requirement[];
  readonly demand: Demand;
  /** Half-width of the band that a hill defeats [m/s]. */
  readonly band: number;
}

/**
 * The verdicts that `run` finds of one candidate, with the spread from the grade's uncertainty over the same drawn roads.
 *
 * @param one that is judged, after its run
 * @param among all candidates of that case, that one too: a hill is what any of them makes one
 */
export function judgeTuned(
  one: Replayed,
  among: readonly Replayed[],
  { requirements, demand, band }: JudgedOn,
): readonly RequirementFinding[] {
  if (requirements.length === 0) return [];
  const { road } = one.plan;
  const hills = allRecoveries(road, demand, one, among, band);
  return judge(requirements, [one], { road, demand, hills });
}
