import { figureLabel, figureText } from '../report/model/figure-text.ts';
import { bandText, placeText, SPEED_UNITS, type Units } from '../report/quantity.ts';
import type { RequirementFinding } from '../study/findings.ts';

/** A line for each requirement and candidate, in columns: verdict, id, candidate, figure, limit, place. */
export function requirementLines(findings: readonly RequirementFinding[], units: Units): readonly string[] {
  const speed = SPEED_UNITS[units];
  const rows = findings.map(({ requirement, candidate, measured, worstAt, verdict }) => {
    const { id, figure, band, atLeast, atMost, where } = requirement;
    const { label, unit } = figureLabel(figure);
    const limit = `${atLeast === null ? 'at most' : 'at least'} ${figureText(atLeast ?? atMost ?? 0, unit, speed)}`;
    const of = band === null ? label : `${label} (${bandText(band, speed)})`;
    const place = worstAt === null ? '' : `, worst at ${placeText(worstAt)}`;
    const scope =
      where === 'holdable' ? 'on holdable road' : where === 'all' ? 'everywhere' : 'on its stretch';
    return [verdict, id, candidate, `${of} ${figureText(measured, unit, speed)}; ${limit} ${scope}${place}`];
  });
  const widths = [0, 1, 2].map((k) => Math.max(0, ...rows.map((row) => row[k]?.length ?? 0)));
  return rows.map((row) => `  ${row.map((cell, k) => cell.padEnd(widths[k] ?? 0)).join('  ')}`);
}
