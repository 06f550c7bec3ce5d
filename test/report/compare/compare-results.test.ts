import { describe, expect, test } from 'vitest';
import { candidatesInBoth, compareResults, lostOf } from '../../../src/report/compare/compare-results.ts';
import { comparisonAnswer } from '../../../src/report/compare/comparison-answer.ts';
import type { SummaryRequirement } from '../../../src/report/compare/read-summary.ts';
import { SPEED_UNITS } from '../../../src/report/quantity.ts';
import { flatPairs, summaryWith } from './fixture-summaries.ts';

const one = (figures: Record<string, unknown>, more: Parameters<typeof summaryWith>[0] = {}) =>
  summaryWith({ ...more, candidates: { 'pi-a': figures } });
const changeOf = (figure: string, before: unknown, after: unknown, more: [object, object] = [{}, {}]) => {
  const comparison = compareResults(
    one({ [figure]: before, ...more[0] }),
    one({ [figure]: after, ...more[1] }),
    flatPairs('pi-a'),
  );
  return comparison.candidates[0]!.figures.find((found) => found.figure === figure)!;
};
const sentence = (...[before, after]: Parameters<typeof compareResults>) =>
  comparisonAnswer(
    compareResults(before, after, flatPairs(...candidatesInBoth(before, after))),
    SPEED_UNITS.kmh,
  );

describe('a figure is better or worse', () => {
  test.each([
    ['within_band_pct', 90, 91, 'better'],
    ['within_band_pct', 91, 90, 'worse'],
    ['rms_error_kmh', 2, 1.9, 'better'],
    ['worst_low_kmh', -8, -7, 'better'],
    ['worst_low_kmh', -7, -8, 'worse'],
    ['worst_high_kmh', 3, 4, 'worse'],
    ['wheel_energy_wh_per_km', 40, 41, 'worse'],
    ['range_km', 300, 310, 'better'],
    ['gain_margin', 10, 5, 'worse'],
    ['phase_margin_deg', 40, 55, 'better'],
    ['mean_error_kmh', 0.5, -0.5, 'changed'],
    ['throttle_mean_pct', 30, 34, 'changed'],
  ])('%s from %f to %f: %s', (figure, before, after, change) => {
    const found = changeOf(figure, before, after);
    expect(found.change).toBe(change);
    expect(found.difference).toBe(after - before);
  });

  test.each([
    ['rms_error_kmh', 2, 2.0499],
    ['recovery_s', 10, 10.04],
    ['within_band_pct', 95, 94.96],
    ['wheel_energy_wh', 2000, 2000.9],
    ['ledger_residual', 3e-15, 8e-10],
  ])('%s from %f to %f is the same to any reader', (figure, before, after) => {
    expect(changeOf(figure, before, after).change).toBe('same');
  });
});

describe('what is not of the same thing is not compared', () => {
  test('a figure that one run does not have, with its reason', () => {
    const found = changeOf('recovery_s', 10, null, [{}, { recovery_s_reason: 'it was not back' }]);
    expect(found).toMatchObject({
      before: 10,
      after: { none: 'it was not back' },
      difference: { none: 'after: it was not back' },
      change: 'not comparable',
    });
    expect(changeOf('recovery_s', null, null).change).toBe('same');
  });

  test('a sum over another distance, but a mean is', () => {
    const ends: [object, object] = [{ end_m: 10_000 }, { end_m: 6000 }];
    const found = changeOf('time_s', 600, 360, ends);
    expect(found.change).toBe('not comparable');
    expect(found.difference).toEqual({ none: 'over 10.00 km before and 6.00 km after' });
    expect(changeOf('shifts', 3, 1, ends).change).toBe('not comparable');
    expect(changeOf('rms_error_kmh', 2, 1, ends).change).toBe('better');
    expect(changeOf('recovery_s', 12, 10, ends).change).toBe('better');
  });

  test('a share of time in another band', () => {
    const { candidates } = compareResults(
      one({ within_band_pct: 90, rms_error_kmh: 2 }, { bandKmh: 2 }),
      one({ within_band_pct: 99, rms_error_kmh: 1 }, { bandKmh: 5 }),
      flatPairs('pi-a'),
    );
    expect(candidates[0]!.figures.map(({ figure, change }) => [figure, change])).toEqual([
      ['within_band_pct', 'not comparable'],
      ['rms_error_kmh', 'better'],
    ]);
  });
});

describe('a requirement', () => {
  const VERDICTS: SummaryRequirement['verdict'][] = ['met', 'not met', 'too close to call', 'not judged'];
  const fate = (before: object | null, after: object | null, names: [string, string] = ['pi-a', 'pi-a']) => {
    const side = (asked: object | null, name: string) =>
      summaryWith({ candidates: { [name]: {} }, requirements: asked === null ? [] : [asked] });
    const comparison = compareResults(side(before, names[0]), side(after, names[1]), new Map());
    return { ...comparison.requirements[0]!, lost: lostOf(comparison).length };
  };

  test.each(VERDICTS.flatMap((a) => VERDICTS.map((b) => [a, b] as const)))('%s, then %s', (a, b) => {
    const expected = a === b ? 'same' : a === 'met' ? 'lost' : b === 'met' ? 'gained' : 'changed';
    const found = fate({ verdict: a }, { verdict: b });
    expect(found).toMatchObject({
      fate: expected,
      lost: expected === 'lost' ? 1 : 0,
      askedDifferently: false,
    });
  });

  test('no longer asked is lost where it was met and the candidate is still there', () => {
    expect(fate({ verdict: 'met' }, null).fate).toBe('lost');
    expect(fate({ verdict: 'not met' }, null).fate).toBe('dropped');
    expect(fate({ verdict: 'met' }, null, ['pi-a', 'pi-b']).fate).toBe('dropped');
    expect(fate(null, { verdict: 'not met' }).fate).toBe('new');
  });

  test.each([
    { limit: 5 },
    { where: 'holdable' },
    { band_kmh: 3 },
    { figure: 'rms_error_kmh' },
    { sense: 'at least' as const },
  ])('with another %j is told to be asked differently', (other) => {
    expect(fate({}, other).askedDifferently).toBe(true);
  });
});

describe('inputs', () => {
  test('files are matched by name, then by what is in them; the case is always the case', () => {
    const before = summaryWith({
      inputs: [
        ['a.yaml', '0'],
        ['v.yaml', '1'],
        ['old.gpx', '2'],
        ['gone.csv', '3'],
      ],
    });
    const after = summaryWith({
      inputs: [
        ['b.yaml', '0'],
        ['v.yaml', '4'],
        ['new.gpx', '2'],
        ['more.csv', '5'],
      ],
    });
    const { files } = compareResults(before, after, new Map()).inputs;
    expect(files.map(({ role, change, before, after }) => [role, change, before?.name, after?.name])).toEqual(
      [
        ['case', 'renamed', 'a.yaml', 'b.yaml'],
        ['file', 'changed', 'v.yaml', 'v.yaml'],
        ['file', 'renamed', 'old.gpx', 'new.gpx'],
        ['file', 'only after', undefined, 'more.csv'],
        ['file', 'only before', 'gone.csv', undefined],
      ],
    );
  });

  test('a value that is given as its default is no change, and a default that is left is one', () => {
    const before = summaryWith({
      given: [
        ['grid', '10'],
        ['band', '3'],
        ['odd', '1'],
      ],
      defaults: [['wind', '0']],
    });
    const after = summaryWith({
      given: [['wind', '0']],
      defaults: [
        ['grid', '10'],
        ['band', '2'],
      ],
    });
    expect(compareResults(before, after, new Map()).inputs.values).toEqual([
      {
        of: 'case',
        key: 'band',
        before: { value: '3', isDefault: false },
        after: { value: '2', isDefault: true },
      },
      { of: 'case', key: 'odd', before: { value: '1', isDefault: false }, after: null },
    ]);
  });
});

describe('the answer', () => {
  const asked = (...verdicts: SummaryRequirement['verdict'][]) =>
    summaryWith({
      requirements: verdicts.map((verdict, i) => ({ id: `R-${i + 1}`, verdict, measured: 3 + i })),
    });

  test('tells first what is lost, with both values and the limit, then what is won', () => {
    const found = sentence(asked('met', 'not met'), asked('not met', 'met'), new Map());
    expect(found.standing).toBe('worse');
    expect(found.sentence.replaceAll('\u00a0', ' ')).toMatch(
      /^One requirement that was met no longer is: R-1 of pi-a \(furthest above, 3\.0 km\/h before and 3\.0 km\/h after, at most 4\.0 km\/h\); one other is now met that was not; /,
    );
  });

  test('names two of many', () => {
    const { sentence: words } = sentence(
      asked('met', 'met', 'met'),
      asked('not met', 'not judged', 'not met'),
      new Map(),
    );
    expect(words).toMatch(
      /^Three requirements that were met no longer are: R-1 of .*, R-2 of .* and 1 more; /,
    );
  });

  test('is better where more is met, and even where nothing is', () => {
    expect(sentence(asked('not met'), asked('met'), new Map()).standing).toBe('better');
    const same = sentence(asked('met', 'not met'), asked('met', 'not met'), new Map());
    expect(same).toEqual({
      standing: 'even',
      sentence: 'Every requirement stands as it did (1 of 2 met); every figure is the same.',
    });
    expect(sentence(asked('not judged'), asked('not met'), new Map()).sentence).toMatch(
      /^Nothing that was met is lost \(0 of 1 met\)/,
    );
  });

  test('says so where no requirement is in both, whatever was met', () => {
    const other = summaryWith({ candidates: { 'pi-b': {} }, requirements: [{ candidate: 'pi-b' }] });
    expect(sentence(asked('met'), other, new Map())).toEqual({
      standing: 'apart',
      sentence: 'No requirement is asked of the same candidate in both results; no candidate is in both.',
    });
    expect(sentence(one({}), one({}), new Map()).standing).toBe('apart');
  });

  test('tells a candidate that no longer ends, and that nothing can be compared', () => {
    const stalled = one({ status: 'stalled', end_m: 4000 });
    expect(sentence(one({}), stalled, new Map()).sentence).toContain(
      'pi-a no longer reaches the end of the road',
    );
    expect(sentence(stalled, one({}), new Map()).sentence).toContain('pi-a now reaches the end of the road');
    const other = summaryWith({ candidates: { 'pi-b': {} } });
    expect(sentence(one({}), other, new Map()).sentence).toBe(
      'Neither result has a requirement; no candidate is in both.',
    );
  });
});
