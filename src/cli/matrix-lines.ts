import { matrixStandings } from '../report/model/matrix-standing.ts';
import { combinationText } from '../report/model/matrix-words.ts';
import { SPEED_UNITS, type Units } from '../report/quantity.ts';
import type { MatrixResult } from '../run/matrix-result.ts';

/** A line for each candidate: in how many combinations every requirement is met, and where it is worst. */
export function matrixLines(matrix: MatrixResult, units: Units): readonly string[] {
  return matrixStandings(matrix).map(({ candidate, counts, combinations, worst }) => {
    const { finding, cell } = worst;
    const where = combinationText(cell, matrix.lists, SPEED_UNITS[units]);
    return `  matrix   ${candidate}: every requirement met in ${counts.met} of ${combinations} combinations; worst: ${where} (${finding.requirement.id} ${finding.verdict})`;
  });
}
