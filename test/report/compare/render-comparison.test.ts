import { expect, test } from 'vitest';
import { fixtureResult } from '../fixture.ts';
import { pageOf } from './fixture-comparison.ts';

const before = fixtureResult({ requirements: 'met' });
// The same names the other way round have each other's gains.
const after = fixtureResult({ requirements: 'missed', designs: ['pi-soft', 'pi-firm'] });
const page = pageOf(before, after);
const wordsOf = (text: string): string =>
  text
    .replace(/<style>[\s\S]*?<\/style>/g, '')
    .replace(/<[^>]*>/g, ' ')
    .replaceAll('\u00a0', ' ');

test('it reads like a memo: the answer in one sentence first, the method last', () => {
  const sections = [...page.matchAll(/<section id="([^"]+)"/g)].map((found) => found[1]);
  expect(sections).toEqual(['answer', 'inputs', 'figures', 'along', 'hills', 'method']);
  for (const id of sections) expect(page).toContain(`<a href="#${id}">`);
  expect(page.indexOf('class="sentence"')).toBeLessThan(page.indexOf('<table'));
  expect(wordsOf(page)).toContain('A simulation is no approval to ride.');
});

test('it asks for nothing from outside, and no id stands twice', () => {
  expect(page).not.toMatch(/<script|<link|<iframe|<img|<object|@import|javascript:/i);
  for (const [, target] of page.matchAll(/\s(?:xlink:)?href="([^"]*)"/g)) expect(target).toMatch(/^#/);
  expect(page.replaceAll('xmlns="http://www.w3.org/2000/svg"', '')).not.toMatch(/https?:\/\//);
  const ids = [...page.matchAll(/\sid="([^"]+)"/g)].map((found) => found[1]);
  expect(new Set(ids).size).toBe(ids.length);
  for (const [, target] of page.matchAll(/(?:url\(#|href="#)([^")]+)/g)) expect(ids).toContain(target);
  expect(page).not.toMatch(/\b(NaN|Infinity|undefined)\b/);
});

test('texts from files are escaped', () => {
  const evil = '<script>alert("&\'")</script>';
  const odd = {
    ...after,
    title: evil,
    overrides: [evil],
    given: [{ key: evil, value: evil, of: 'vehicle' as const }],
    inputs: [{ name: evil, sha256: 'ab'.repeat(32), bytes: 1 }],
    vehicle: { ...after.vehicle, name: evil },
    road: { ...after.road, name: evil },
    requirements: after.requirements.map((finding) => ({
      ...finding,
      requirement: { ...finding.requirement, id: evil },
      words: evil,
    })),
  };
  for (const text of [pageOf(before, odd), pageOf(odd, before)]) {
    expect(text).not.toContain('<script');
    expect(text).toContain('&lt;script&gt;');
  }
});

test('before and after are drawn on the same scales in every chart of a design', () => {
  const axes = [...page.matchAll(/<svg[^>]*aria-labelledby="two-(\w[\w-]*)-w-t[\s\S]*?<\/svg>/g)]
    .filter(([, name]) => name !== 'locked')
    .map(([svg]) =>
      [...svg.matchAll(/text-anchor="end" font-size="11"[^>]*>([^<]+)</g)].map((tick) => tick[1]).join(' '),
    );
  expect(axes.length).toBeGreaterThan(1);
  expect(new Set(axes).size).toBe(1);
});

test('the same results give the same bytes, and are said to be the same', () => {
  expect(pageOf(before, after)).toBe(page);
  const same = wordsOf(pageOf(before, before));
  expect(same).toContain('Every requirement stands as it did');
  expect(same).toContain('The same record in both, sample for sample.');
  expect(same).toContain('Case and vehicle gave the same values');
});

test('speeds are in the reader\u2019s unit', () => {
  const mph = wordsOf(pageOf(before, after, 'mph')).replace(/How it was compared[\s\S]*?Cautions/g, '');
  expect(mph).toContain('mph');
  expect(mph).not.toContain('km/h');
});
