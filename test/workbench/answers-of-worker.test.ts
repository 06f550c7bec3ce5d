import { expect, it } from 'vitest';
import { renderReport } from '../../src/report/render-report.ts';
import { runCase } from '../../src/run/run-case.ts';
import type { Question, Reply } from '../../src/workbench/worker/messages.ts';
import { QuickAnswers } from '../../src/workbench/worker/quick-answer.ts';
import { StudyFiles } from '../../src/workbench/worker/study-files.ts';
import { WholeAnswer } from '../../src/workbench/worker/whole-answer.ts';

const CASE = `track: {profile: [{length_m: 400, grade_pct: 0}, {length_m: 200, grade_pct: 6}, {length_m: 400, grade_pct: 0}]}
vehicle:
  mass: {kerb_kg: 125, rider_kg: 75}
  road_load: {cda_m2: 0.58, crr: 0.014}
  drive: {kind: force, peak_force_n: 320, peak_power_kw: 8.5, closed_throttle_force_n: 40}
hold: {set_speed_kmh: 60}
candidates: [{name: typed, kind: pi, kp_pct_per_kmh: 3, ti_s: 8}]
requirements: [{id: W-1, figure: within_band_pct, band_kmh: 2, at_least: 95}]
`;
const MATRIX = `${CASE}matrix: {loads: [solo, two_up], set_speeds_kmh: [50, 60]}\n`;
const read = (text: string) => () => new TextEncoder().encode(text);
const silent = () => {};

it('a report that is taken out has the matrix, worked out only then, and is that of the whole job', () => {
  const whole = new WholeAnswer();
  const told = whole.run('c.yaml', read(MATRIX), 'kmh', silent);
  expect(told.cells).toBe(4);
  expect(told.sections.map(({ id }) => id)).not.toContain('matrix');
  const shares: number[] = [];
  const [report] = whole.take('report', (share) => shares.push(share));
  expect(report!.text).toBe(renderReport(runCase({ file: 'c.yaml', read: read(MATRIX) }), { units: 'kmh' }));
  expect(shares).toHaveLength(4);
  const after = whole.matrix(silent);
  expect(after.cells).toBe(0);
  expect(after.sections.map(({ id }) => id)).toContain('matrix');
});

it('nothing can be taken out of a run that was refused', () => {
  const whole = new WholeAnswer();
  whole.run('c.yaml', read(CASE), 'kmh', silent);
  expect(() => whole.run('c.yaml', read('hold: 3'), 'kmh', silent)).toThrow(/c\.yaml/);
  expect(() => whole.take('report', silent)).toThrow('nothing was run');
});

type Quick = Extract<Question, { kind: 'quick' }>;

/** Asks some questions while the first is at work, and gives the numbers of the replies. */
async function asked(second: readonly Partial<Quick>[]): Promise<readonly Reply[]> {
  const files = new StudyFiles();
  const replies: Reply[] = [];
  let steps = 0;
  const question = (number: number, more: Partial<Quick> = {}): Quick => ({
    kind: 'quick',
    number,
    study: { file: 'c.yaml', files: [{ name: 'c.yaml', content: 1 }], fresh: [] },
    units: 'kmh',
    road: false,
    moving: true,
    ...more,
  });
  files.take({ file: '', files: [], fresh: [{ content: 1, bytes: read(CASE)() }] });
  const quick: QuickAnswers = new QuickAnswers(
    files,
    (reply) => replies.push(reply),
    async () => {
      if (++steps === 2) for (const [i, more] of second.entries()) void quick.ask(question(2 + i, more));
    },
  );
  await quick.ask(question(1));
  return replies;
}

it('of quick questions that wait only the newest is answered, after the one at work', async () => {
  const replies = await asked([{}, {}, { road: true }]);
  expect(replies.map(({ kind, number }) => [kind, number])).toEqual([
    ['quick', 1],
    ['quick', 4],
  ]);
  const sections = replies.map((reply) => (reply.kind === 'quick' ? reply.sections.map(({ id }) => id) : []));
  expect(sections).toEqual([
    ['candidates', 'lanes'],
    ['road', 'candidates', 'lanes'],
  ]);
});

it('the one at work is left for a question that is not part of the same movement', async () => {
  const replies = await asked([{ moving: false }]);
  expect(replies.map(({ number }) => number)).toEqual([2]);
});

it('a file that is not here is refused by its name, and the next question is answered', async () => {
  const replies = await asked([{ study: { file: 'gone.yaml', files: [], fresh: [] } }, {}]);
  expect(replies.map(({ kind }) => kind)).toEqual(['quick', 'quick']);
  const [, refused] = await asked([{ study: { file: 'gone.yaml', files: [], fresh: [] } }]);
  expect(refused).toMatchObject({
    kind: 'refused',
    problems: [{ code: 'file-not-found', place: { file: 'gone.yaml' } }],
  });
});
