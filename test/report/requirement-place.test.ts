import { expect, it } from 'vitest';
import { requirementLines } from '../../src/cli/requirement-lines.ts';
import { whereWords } from '../../src/report/sections/answer-section.ts';
import type { Requirement, RequirementFinding, Where } from '../../src/study/findings.ts';

function asked(figure: string, where: Where): { readonly page: string; readonly line: string } {
  const requirement: Requirement = {
    id: 'R-1',
    figure,
    candidates: null,
    band: null,
    atLeast: null,
    atMost: 5,
    where,
  };
  const finding: RequirementFinding = {
    requirement,
    candidate: 'pi',
    measured: 3,
    margin: 2,
    spread: 0,
    worstAt: null,
    verdict: 'met',
    words: '',
  };
  return { page: whereWords(requirement), line: requirementLines([finding], 'kmh')[0]! };
}

it('a figure of how hold takes over is told of the whole road, also where it is asked for what can be held', () => {
  for (const figure of [
    'engage_sag_kmh',
    'resume_settling_s',
    'command_step_pct',
    'hold_off_s',
    'hold_off_events',
  ])
    for (const where of ['holdable', 'all'] as const) {
      const { page, line } = asked(figure, where);
      expect(page).toBe('on the whole road');
      expect(line).toMatch(/everywhere$/);
    }
  expect(asked('rms_error_kmh', 'holdable').page).toBe('where the drive can hold it');
  expect(asked('rms_error_kmh', 'holdable').line).toMatch(/on holdable road$/);
  expect(asked('hold_off_s', { from: 0, to: 2000 }).line).toMatch(/on its stretch$/);
});
