import { expect, it } from 'vitest';
import { viewOf } from '../../../src/report/model/view.ts';
import { candidatesSection } from '../../../src/report/sections/candidates-section.ts';
import type { Figure } from '../../../src/study/findings.ts';
import { type FixtureWish, fixtureResult } from '../fixture.ts';

/** Texts of the cells of a row, bold ones between stars. */
function rowOf(
  label: string,
  wish: FixtureWish,
  figures: Readonly<Record<string, Readonly<Record<string, Figure>>>>,
) {
  const result = fixtureResult({ lengthKm: 12, designs: ['a', 'b'], locked: false, ...wish });
  const candidates = result.candidates.map((one) => ({
    ...one,
    figures: { ...one.figures, ...figures[one.name] },
  }));
  const page = candidatesSection(viewOf({ ...result, candidates }, 'kmh')).body.toString();
  const row = page.split(/<tr[^>]*>/).find((text) => text.includes(`>${label}`))!;
  return row
    .split('<td>')
    .slice(1)
    .map((cell) =>
      cell
        .replace(/<\/?strong>/g, '*')
        .replace(/<[^>]*>/g, '')
        .replace(/\u00a0/g, ' ')
        .trim(),
    );
}

it('the best design is bold, and one that ended early is never best', () => {
  const figures = { a: { rms_error_kmh: 2 }, b: { rms_error_kmh: 1 } };
  expect(rowOf('Rms error', {}, figures)).toEqual(['2.0 km/h', '*1.0 km/h*']);
  const ends = { b: { km: 5, status: 'stopped' } } as const;
  expect(rowOf('Rms error', { ends }, figures)).toEqual(['2.0 km/h', '1.0 km/h †']);
});

it('the best time lost is the one nearest to zero', () => {
  const figures = { a: { time_lost_s: -20 }, b: { time_lost_s: 3 } };
  expect(rowOf('Time lost', {}, figures)).toEqual(['\u221220 s', '*3.0 s*']);
});

it('tells what swings are looked for, and whose linear loop swings anyway', () => {
  const base = fixtureResult({ lengthKm: 12, designs: ['a', 'b'] });
  const told = (stable: boolean): string => {
    const candidates = base.candidates.map((one) =>
      one.name === 'b' && one.loop !== null ? { ...one, loop: { ...one.loop, stable } } : one,
    );
    const page = candidatesSection(viewOf({ ...base, candidates }, 'kmh')).body.toString();
    return page.replace(/<[^>]*>/g, '').replace(/\u00a0/g, ' ');
  };
  expect(told(true)).toContain('± 0.50 km/h or more, with a period of 2 to 25 s, in at least 4 turns');
  expect(told(true)).not.toContain('unstable');
  expect(told(false)).toContain('The linear loop of b is unstable and swings on any road, told here or not.');
});

it('what is told alike is not better, and what all tell as nothing has no bar', () => {
  const near = { a: { mean_error_kmh: 0.01 }, b: { mean_error_kmh: -0.04 } };
  expect(rowOf('Mean error', {}, near)).toEqual(['0.0 km/h', '0.0 km/h']);
  const bars = (figures: Readonly<Record<string, Readonly<Record<string, Figure>>>>): number => {
    const result = fixtureResult({ lengthKm: 12, designs: ['a', 'b'], locked: false });
    const candidates = result.candidates.map((one) => ({
      ...one,
      figures: { ...one.figures, ...figures[one.name] },
    }));
    const page = candidatesSection(viewOf({ ...result, candidates }, 'kmh')).body.toString();
    const row = page.split(/<tr[^>]*>/).find((text) => text.includes('>Mean error'))!;
    return row.split('class="bar"').length - 1;
  };
  expect(bars(near)).toBe(0);
  expect(bars({ ...near, b: { mean_error_kmh: -0.4 } })).toBe(2);
  // A hundredth of a second is no better time lost.
  const lost = { a: { time_lost_s: 0.01 }, b: { time_lost_s: 0.03 } };
  expect(rowOf('Time lost', {}, lost)).toEqual(['0.0 s', '0.0 s']);
});
