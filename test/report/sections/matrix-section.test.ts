import { parse } from 'csv-parse/sync';
import { describe, expect, it } from 'vitest';
import { dataFiles } from '../../../src/report/data/data-files.ts';
import { summaryJson } from '../../../src/report/data/summary.ts';
import { answerOf } from '../../../src/report/model/answer.ts';
import { viewOf } from '../../../src/report/model/view.ts';
import { renderReport } from '../../../src/report/render-report.ts';
import { fixtureResult } from '../fixture.ts';
import { type MatrixWish, withFixtureMatrix } from '../fixture-matrix.ts';

const RUN = fixtureResult({ designs: ['pi-firm'], requirements: 'met' });
const ROWS = RUN.requirements.length;
const matrix = (wish: MatrixWish) => withFixtureMatrix(RUN, wish);
const render = (wish: MatrixWish, units: 'kmh' | 'mph' = 'kmh'): string =>
  renderReport(matrix(wish), { units });
const sectionOf = (page: string): string =>
  page.slice(page.indexOf('<section id="matrix"'), page.indexOf('<section id="road"'));
const wordsOf = (text: string): string => text.replace(/<[^>]*>/g, ' ').replace(/\s+/g, ' ');
const tableOf = (page: string): string => /<table class="dense matrix">[\s\S]*?<\/table>/.exec(page)![0];
const rowsOf = (page: string): readonly string[] =>
  /<tbody>([\s\S]*)<\/tbody>/.exec(tableOf(page))![1]!.split('</tr>').slice(0, -1);
const cellsOf = (row: string): readonly string[] => row.match(/<td[\s\S]*?<\/td>/g) ?? [];

const LOADS = ['solo', 'bags', 'two up'];
const WINDS = ['still air', 'head'];

describe('the matrix in the report', () => {
  it('stands behind the answer, and only where there is one', () => {
    const ids = (page: string) => [...page.matchAll(/<section id="([^"]+)"/g)].map(([, id]) => id);
    expect(ids(renderReport(RUN, { units: 'kmh' }))).not.toContain('matrix');
    const page = render({ loads: LOADS });
    expect(ids(page).slice(0, 3)).toEqual(['answer', 'matrix', 'road']);
    const numbers = [...page.matchAll(/<h2[^>]*><span class="n">(\d+)<\/span>/g)].map(([, n]) => Number(n));
    expect(numbers).toEqual(numbers.map((_, i) => i + 1));
  });

  it('has a row for each requirement and candidate, a column for each combination', () => {
    const rows = rowsOf(render({ loads: LOADS, winds: WINDS, directions: ['there', 'back'] }));
    expect(rows).toHaveLength(ROWS);
    for (const row of rows) expect(cellsOf(row)).toHaveLength(12);
  });

  it('says each verdict by mark, word and shade, with the figure', () => {
    const page = render({ loads: LOADS, margin: (cell) => (cell === 1 ? -0.1 : 0.2) });
    const cells = cellsOf(rowsOf(page)[0]!);
    expect(cells.map((cell) => /wash (\w+)/.exec(cell)![1])).toEqual(['good', 'bad', 'good']);
    expect(cells.map((cell) => /[✓✗] ?<\/span> (?:not )?met/.test(cell))).toEqual([true, true, true]);
    for (const cell of cells) expect(wordsOf(cell)).toMatch(/\d/);
  });

  it('folds lists that it has no room for into the worst, and counts', () => {
    const page = render({
      loads: LOADS,
      winds: WINDS,
      directions: ['there', 'back'],
      speeds: [50, 60],
      margin: (cell) => (cell === 1 ? -0.3 : 0.1),
    });
    const cells = cellsOf(rowsOf(page)[0]!).map(wordsOf);
    expect(cells).toHaveLength(12);
    expect(cells[0]).toMatch(/not met.*1 of 2/);
    expect(cells.slice(1).every((cell) => /✓ met.*2 of 2/.test(cell))).toBe(true);
    expect(wordsOf(sectionOf(page))).toContain('the worst over every set speed');
  });

  it('cuts one list that is too long alone into pieces that hold all of it', () => {
    const speeds = Array.from({ length: 40 }, (_, i) => 40 + i);
    const page = render({ speeds, margin: (cell) => (cell === 39 ? -0.3 : 0.1) });
    const cells = cellsOf(rowsOf(page)[0]!).map(wordsOf);
    expect(cells.length).toBeLessThanOrEqual(12);
    const counts = cells.map((cell) => (/of (\d+)/.exec(cell)?.[1] ? Number(/of (\d+)/.exec(cell)![1]) : 1));
    expect(counts.reduce((sum, count) => sum + count, 0)).toBe(40);
    expect(cells.at(-1)).toContain('not met');
  });

  it('links every cell to a card on the page, with its place and a picture', () => {
    const page = render({ loads: LOADS, winds: WINDS, margin: (cell, row) => 0.1 * (row + 1) - 0.05 * cell });
    const links = [...tableOf(page).matchAll(/href="#([^"]+)"/g)].map(([, id]) => id!);
    expect(links).toHaveLength(6 * ROWS);
    for (const id of links) {
      const card = new RegExp(`<article class="card" id="${id}">[\\s\\S]*?</article>`).exec(page);
      expect(card?.[0]).toMatch(/km\u00a0\d/);
      expect(card?.[0]).toContain('<svg');
    }
    const ids = [...page.matchAll(/\sid="([^"]+)"/g)].map(([, id]) => id);
    expect(new Set(ids).size).toBe(ids.length);
  });

  it('draws all pictures on the same scales', () => {
    const section = sectionOf(render({ loads: LOADS, winds: WINDS }));
    const axes = [...section.matchAll(/<article[\s\S]*?<\/article>/g)].map(([card]) =>
      [...card.matchAll(/<text x="28"[^>]*text-anchor="end"[^>]*>([^<]*)</g)]
        .map(([, tick]) => tick)
        .join(' '),
    );
    expect(axes).toHaveLength(6 * ROWS);
    expect(axes[0]).toMatch(/\d/);
    expect(new Set(axes).size).toBe(1);
  });

  it('says in how many combinations a candidate meets all, and where it is worst', () => {
    const words = wordsOf(
      sectionOf(render({ loads: LOADS, winds: WINDS, margin: (cell) => (cell >= 4 ? -0.1 * cell : 0.2) })),
    );
    expect(words).toContain(
      'every requirement met in 4 of 6 combinations, not met in 2; worst: two up, head (',
    );
  });

  it('takes a run that ended early for worse than any figure', () => {
    const words = wordsOf(
      sectionOf(render({ loads: LOADS, margin: (cell) => (cell === 1 ? 'ended' : cell === 2 ? -0.9 : 0.2) })),
    );
    expect(words).toContain('worst: bags (');
    expect(words).toContain('the run ended at km 3.00 (stalled)');
  });

  it('says why a combination was not judged', () => {
    const words = wordsOf(
      sectionOf(render({ gears: [1, 4], margin: (cell) => (cell === 0 ? 'unable' : 0.2) })),
    );
    expect(words).toContain('not judged in 1');
    expect(words).toContain('gear 1: the engine would turn beyond its limit');
  });

  it('names the place on the way back by the way of the case too', () => {
    const section = sectionOf(render({ directions: ['there', 'back'] }));
    const [there, back] = ['there', 'back'].map((way) =>
      wordsOf(
        new RegExp(`<article[^>]*><h4>[^/]*/span> [^/]*/span> ${way}<[\\s\\S]*?</article>`).exec(section)![0],
      ),
    );
    expect(there).toMatch(/Worst at km 2\.00\./);
    // 28 km of road, so 26 km on the way there.
    expect(back).toMatch(/Worst at km 2\.00, km 26\.00 of the way there\./);
  });

  it('writes names from files as text', () => {
    const page = render({ loads: ['<img src=x onerror=alert(1)>', 'b'] });
    expect(page).not.toContain('<img');
    expect(page).toContain('&lt;img');
  });

  it('stays a page that opens at once, however large the matrix', () => {
    const speeds = Array.from({ length: 40 }, (_, i) => 40 + i);
    const bare = renderReport(RUN, { units: 'kmh' }).length;
    const page = render({ loads: LOADS, winds: WINDS, speeds, margin: (cell) => 0.1 - 0.01 * cell });
    expect(page.length - bare).toBeLessThan(900_000);
  });

  it('keeps the first sentence about the case itself and adds one clause', () => {
    const alone = answerOf(viewOf(RUN, 'kmh')).sentence;
    const wish: MatrixWish = { loads: LOADS, winds: WINDS, margin: (cell) => (cell === 5 ? -0.1 : 0.2) };
    const { sentence, standing } = answerOf(viewOf(matrix(wish), 'kmh'));
    expect(sentence.startsWith(alone.slice(0, -1))).toBe(true);
    expect(sentence.slice(alone.length - 1)).toBe(
      '; over 6 combinations of load and wind it meets every requirement in 5, and is worst at two up, head.',
    );
    expect(standing).toBe('met');
    expect(render(wish)).toContain('(pi-firm, the case itself)');
    expect(renderReport(RUN, { units: 'kmh' })).toContain('(pi-firm)');
  });

  it('speaks the unit of the reader', () => {
    const words = wordsOf(sectionOf(render({ speeds: [50, 60] }, 'mph')));
    expect(words).toContain('37.3 mph');
    expect(words).not.toContain('km/h');
  });
});

describe('the matrix in the files', () => {
  const run = matrix({
    loads: LOADS,
    directions: ['there', 'back'],
    margin: (cell) => (cell === 1 ? 'ended' : 0.25),
  });
  const text = dataFiles(run).find(({ name }) => name === 'matrix.csv')?.text ?? '';
  const table: Record<string, string>[] = parse(text, { columns: true });

  it('has a row for each combination, requirement and candidate', () => {
    expect(table).toHaveLength(6 * ROWS);
    expect(Object.keys(table[0]!)).toEqual([
      ...[
        'combination',
        'load',
        'carried_kg',
        'wind',
        'wind_speed_m_s',
        'wind_from_deg',
        'direction',
        'gear',
      ],
      ...[
        'set_speed_kmh',
        'candidate',
        'requirement',
        'figure',
        'unit',
        'measured',
        'sense',
        'limit',
        'margin',
      ],
      ...['verdict', 'worst_at_km', 'reason'],
    ]);
    expect(table.map(({ combination }) => Number(combination))).toEqual(
      Array.from({ length: 6 * ROWS }, (_, i) => 1 + Math.floor(i / ROWS)),
    );
    expect(table[0]).toMatchObject({ load: 'solo', carried_kg: '75.00', direction: 'there', gear: '' });
  });

  it('leaves a margin that does not exist empty, and says why', () => {
    const ended = table.filter(({ combination }) => combination === '2');
    expect(ended.map(({ margin, reason }) => [margin, reason])).toEqual(
      ended.map(() => ['', 'the run ended at km 3.00 (stalled)']),
    );
  });

  it('tells the same in summary.json', () => {
    const { matrix: told } = JSON.parse(summaryJson(run, [])) as {
      matrix: {
        lists: string[];
        combinations: { combination: number; requirements: { verdict: string; measured: number }[] }[];
      };
    };
    expect(told.lists).toEqual(['loads', 'directions']);
    expect(
      told.combinations.flatMap(({ requirements }) => requirements.map(({ verdict }) => verdict)),
    ).toEqual(table.map(({ verdict }) => verdict));
    expect(JSON.parse(summaryJson(RUN, []))).not.toHaveProperty('matrix');
  });

  it('is not written without a matrix', () => {
    expect(dataFiles(RUN).map(({ name }) => name)).not.toContain('matrix.csv');
  });
});
