import { expect, it } from 'vitest';
import { answerOf } from '../../../src/report/model/answer.ts';
import { quickAnswerOf } from '../../../src/report/model/quick-answer.ts';
import { viewOf } from '../../../src/report/model/view.ts';
import { fixtureResult } from '../fixture.ts';

const result = fixtureResult();

it('it speaks of the design that the whole answer speaks of, without hills, causes and verdicts', () => {
  const view = viewOf(result, 'kmh');
  const { design } = answerOf(view);
  const sentence = quickAnswerOf(view);
  expect(sentence.startsWith(`${design} holds `)).toBe(true);
  expect(sentence).toMatch(
    /; it strays from \d+\.\d.km\/h below to \d+\.\d.km\/h above; a throttle locked in place /,
  );
  expect(sentence).not.toMatch(/hill|because|requirement/);
});

it('what it tells needs none of what only the whole run has', () => {
  const alone = {
    ...result,
    requirements: [],
    hills: [],
    cycles: [],
    loops: { points: [], notHeld: [], loops: [] },
  };
  expect(quickAnswerOf(viewOf(alone, 'mph'))).toMatch(/mph.*mph below/);
});

it('without a design it tells of the locked throttle', () => {
  const locked = result.candidates.filter(({ controller }) => controller.kind === 'locked');
  const sentence = quickAnswerOf(viewOf({ ...result, candidates: locked }, 'kmh'));
  expect(sentence).toMatch(/^The throttle locked in place .*\.$/);
});

it('a run that ended early says where', () => {
  const candidates = result.candidates.map((candidate) =>
    candidate.controller.kind === 'locked'
      ? candidate
      : {
          ...candidate,
          result: { ...candidate.result, status: 'stalled' as const, endDistance: 1234 },
        },
  );
  expect(quickAnswerOf(viewOf({ ...result, candidates }, 'kmh'))).toMatch(
    /stalled at km.1\.23 and does not finish/,
  );
});
