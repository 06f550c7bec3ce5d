import { figureLabel, figureText } from '../report/model/figure-text.ts';
import { bandText, placeText, SPEED_UNITS, type Units } from '../report/quantity.ts';
import { isNone, type RequirementFinding } from '../study/findings.ts';
import { whereMeasured } from '../study/where-measured.ts';

/** A line for each requirement and candidate, in columns: verdict, id, candidate, figure, limit, place. */
export function requirementLines(findings: readonly RequirementFinding[], units: Units): readonly string[] {
  const speed = SPEED_UNITS[units];
  const rows = findings.map(({ requirement, candidate, measured, margin, worstAt, afterHill, verdict }) => {
    const { id, figure, band, atLeast, atMost, where } = requirement;
    const { label, unit } = figureLabel(figure);
    const limit = `${atLeast === null ? 'at most' : 'at least'} ${figureText(atLeast ?? atMost ?? 0, unit, speed)}`;
    const of = band === null ? label : `${label} (${bandText(band, speed)})`;
    const worst = afterHill === undefined ? `at ${placeText(worstAt ?? 0)}` : `after hill ${afterHill}`;
    const place = worstAt === null ? '' : `, worst ${worst}`;
    // Why there is no figure, or no margin: the run ended on the way, or nothing could be measured.
    const reason = isNone(margin) ? `: ${margin.none}` : '';
    const over = whereMeasured(figure, where);
    const scope = over === 'holdable' ? 'on holdable road' : over === 'all' ? 'everywhere' : 'on its stretch';
    return [
      verdict,
      id,
      candidate,
      `${of} ${figureText(measured, unit, speed)}; ${limit} ${scope}${isNone(margin) && afterHill === undefined ? '' : place}${reason}`,
    ];
  });
  const widths = [0, 1, 2].map((k) => Math.max(0, ...rows.map((row) => row[k]?.length ?? 0)));
  return rows.map((row) => `  ${row.map((cell, k) => cell.padEnd(widths[k] ?? 0)).join('  ')}`);
}
