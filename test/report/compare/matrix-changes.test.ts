import { expect, test } from 'vitest';
import { compareResults, isWorse, lostInMatrix } from '../../../src/report/compare/compare-results.ts';
import { comparisonAnswer } from '../../../src/report/compare/comparison-answer.ts';
import type { MatrixCombination } from '../../../src/report/compare/read-summary.ts';
import { SPEED_UNITS } from '../../../src/report/quantity.ts';
import { flatPairs, summaryWith } from './fixture-summaries.ts';

type Verdict = MatrixCombination['requirements'][number]['verdict'];
const cell = (load: string, verdict: Verdict, more: Partial<MatrixCombination> = {}): MatrixCombination => ({
  load,
  wind: 'still air',
  direction: 'there',
  gear: 4,
  set_speed_kmh: 60,
  requirements: [{ id: 'R-1', candidate: 'pi-a', verdict }],
  ...more,
});
const compared = (before: MatrixCombination[], after: MatrixCombination[]) => {
  const side = (combinations: MatrixCombination[]) =>
    summaryWith({ requirements: [{ verdict: 'met' }], matrix: { combinations } });
  return compareResults(side(before), side(after), flatPairs('pi-a'));
};

test('a verdict that is lost in one combination makes the result worse, whatever the case itself says', () => {
  const comparison = compared(
    [cell('alone', 'met'), cell('two up', 'met'), cell('light', 'not met')],
    [cell('two up', 'not met'), cell('alone', 'met'), cell('light', 'met')],
  );
  expect(isWorse(comparison)).toBe(true);
  expect(lostInMatrix(comparison)).toEqual([
    {
      combination: 'two up, still air, there, gear 4, 60 km/h',
      id: 'R-1',
      candidate: 'pi-a',
      fate: 'lost',
      before: 'met',
      after: 'not met',
    },
  ]);
  const { standing, sentence } = comparisonAnswer(comparison, SPEED_UNITS.kmh);
  expect(standing).toBe('worse');
  expect(sentence).toContain('of 3 verdicts in the 3 combinations that both have 1 is lost and 1 won');
});

test('combinations that only one has are not matched, by any of what they are', () => {
  const comparison = compared(
    [cell('alone', 'met')],
    [
      cell('two up', 'not met'),
      cell('alone', 'not met', { wind: 'from behind' }),
      cell('alone', 'not met', { direction: 'back' }),
      cell('alone', 'not met', { gear: 5 }),
      cell('alone', 'not met', { set_speed_kmh: 70 }),
    ],
  );
  expect(comparison.matrix).toEqual({ combinations: 0, verdicts: 0, changes: [] });
  expect(isWorse(comparison)).toBe(false);
  expect(comparisonAnswer(comparison, SPEED_UNITS.kmh).sentence).toContain(
    'the matrices are not compared: no combination is in both',
  );
});

test('without a matrix in both there is nothing to say', () => {
  expect(compareResults(summaryWith(), summaryWith(), flatPairs('pi-a')).matrix).toBeNull();
  expect(compared([cell('alone', 'met')], [cell('alone', 'met')]).matrix).toEqual({
    combinations: 1,
    verdicts: 1,
    changes: [],
  });
});
