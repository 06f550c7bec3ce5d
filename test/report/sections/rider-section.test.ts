import { expect, test } from 'vitest';
import { viewOf } from '../../../src/report/model/view.ts';
import { reportSections } from '../../../src/report/render-report.ts';
import { cautions } from '../../../src/report/sections/cautions.ts';
import { riderSection } from '../../../src/report/sections/rider-section.ts';
import { unitRules } from '../../../src/report/sections/unit-rules.ts';
import { fixtureResult } from '../fixture.ts';
import { withRider } from '../fixture-rider.ts';

const plain = viewOf(fixtureResult({ lengthKm: 12 }), 'kmh');
const view = viewOf(withRider(plain.result), 'kmh');
const sections = reportSections(view);
const text = (markup: { toString(): string } | null): string =>
  String(markup)
    .replace(/<[^>]*>/g, ' ')
    .replaceAll('\u00a0', ' ')
    .replace(/\s+/g, ' ');

test('a case that asks nothing of the hold has no such section, and its cautions say so', () => {
  expect(riderSection(plain)).toBeNull();
  expect(unitRules(plain)).toBeNull();
  expect(cautions(plain).join(' ')).toContain('are outside this model');
});

test('the section begins with how often hold ended, and stands behind the lanes', () => {
  const ids = sections.map(({ id }) => id);
  expect(ids.indexOf('rider')).toBe(ids.indexOf('lanes') + 1);
  const body = text(riderSection(view)!.body);
  expect(body.trimStart()).toMatch(/^pi-\w+ has hold on for \d+ % of the time, off for/);
  expect(body).toContain(
    'pi-firm at km 8.00, at 39.6 km/h measured, with 60.0 km/h set: the speed stayed too far below the set speed.',
  );
  expect(body).toContain('Not settled: pi-firm, what came next on the way came first.');
  expect(body).toContain('All events of the hold');
});

test('all candidates that had an event stand in one picture of it', () => {
  const body = String(riderSection(view)!.body);
  const cards = body.split('<article').slice(1);
  // The bend and the rule, two resumes, the override.
  expect(cards).toHaveLength(5);
  const bend = cards.find((card) => card.includes('Hold ended: a bend'))!;
  expect(text(bend)).toContain('Hold ended: a bend km 4.00');
  expect(text(bend)).toMatch(/pi-firm .* pi-soft/);
  expect(bend.match(/<title>hold is off<\/title>/g)).toHaveLength(1);
});

test('places where speed hold does not belong are listed, in the profile and in the plan', () => {
  const body = text(riderSection(view)!.body);
  expect(body).toContain('km 4.00 to 5.00 : 2 bends down to 36 km/h, so near to each other');
  expect(body).toContain('2 bends ask for less than the set speed');
  const [road, where] = ['road', 'where'].map((id) => String(sections.find((one) => one.id === id)!.body));
  expect(road).toContain('speed hold does not belong');
  expect(where).toContain('speed hold does not belong');
});

test('rules stand with the values that were used, cautions follow the case', () => {
  const rules = text(unitRules(view));
  expect(rules).toContain('below 35.0 km/h measured, hold ends');
  expect(rules).toContain('20.0 km/h below the set speed for 1.0 s ends hold');
  expect(rules).toContain('the integral runs on');
  expect(rules).toContain('km 7.00, no pulses for 2.00 s');
  const words = cautions(view).join(' ');
  expect(words).not.toContain('are outside this model');
  expect(words).toContain('as the case writes them');
  expect(words).toContain('Bends are known by the radius of the track alone');
});

test('where hold is off the lanes are hatched', () => {
  const lanes = String(sections.find(({ id }) => id === 'lanes')!.body);
  expect(lanes).toContain('<title>hold is off</title>');
  expect(text({ toString: () => lanes })).toContain('Hatched, with brackets: hold is off');
});
