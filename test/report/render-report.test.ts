import { createHash } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { chartFiles } from '../../src/report/chart-files.ts';
import { renderReport } from '../../src/report/render-report.ts';
import { type FixtureWish, fixtureResult } from './fixture.ts';

const render = (wish: FixtureWish = {}, units: 'kmh' | 'mph' = 'kmh') =>
  renderReport(fixtureResult(wish), { units });

let page: string;
beforeAll(() => {
  page = render();
});

const idsOf = (text: string): readonly string[] => [...text.matchAll(/\sid="([^"]+)"/g)].map((m) => m[1]!);

/** What a reader sees: no style sheet, no tags. */
const wordsOf = (text: string): string =>
  text.replace(/<style>[\s\S]*?<\/style>/g, '').replace(/<[^>]*>/g, ' ');

describe('the report', () => {
  it('has its sections in order, the answer first', () => {
    const sections = [...page.matchAll(/<section id="([^"]+)"/g)].map((m) => m[1]);
    expect(sections).toEqual([
      'answer',
      'road',
      'candidates',
      'force',
      'lanes',
      'hills',
      'where',
      'energy',
      'method',
    ]);
    for (const id of sections) expect(page).toContain(`<a href="#${id}">`);
  });

  it('states the accuracy that holds for this run: crosswind and brake cost some', () => {
    const result = fixtureResult({});
    const still = { ...result.road, crosswind: new Float64Array(result.road.size) };
    const told = (change: Partial<typeof result>) =>
      wordsOf(renderReport({ ...result, ...change }, { units: 'kmh' })).match(
        /At 50 Hz [^.]*\.?\d?[^.]*\./,
      )![0];
    expect(told({ scheme: 'exact' })).toMatch(/1\.4 × 10⁻⁶ m\/s.*2 × 10⁻⁵ m\/s where the rider brakes/);
    expect(told({ scheme: 'exact', road: still, rider: { brakesAbove: null, shifts: [] } })).toContain(
      'within 2 × 10⁻⁸ m/s',
    );
    expect(told({ scheme: 'exact', road: still, rider: { brakesAbove: null, shifts: [] } })).not.toContain(
      'brakes',
    );
    expect(told({ scheme: 'fast' })).toMatch(/2 × 10⁻⁵ m\/s.*10⁻⁴ m\/s where the rider brakes/);
  });

  it('says what moves once a sample, where there is such a thing', () => {
    const result = fixtureResult({});
    const { vehicle } = result;
    const told = (drive: Partial<typeof vehicle.drive>) =>
      wordsOf(
        renderReport(
          { ...result, vehicle: { ...vehicle, drive: { ...vehicle.drive, ...drive } } },
          { units: 'kmh' },
        ),
      );
    const power = Float64Array.of(0, 0, 1, 1);
    const battery = {
      kind: 'battery',
      map: { shaftSpeed: Float64Array.of(0, 1), torque: Float64Array.of(0, 1), power, least: 0 },
      capacity: 1e6,
      charge: 1,
      reserve: 0,
      sag: null,
      acceptance: null,
      heating: null,
    } as const;
    expect(told({ source: battery })).toContain('once a sample: charge and heat of the battery, within 3 ×');
    expect(told({ source: { ...battery, capacity: null } })).not.toContain('once a sample');
    expect(told({})).not.toContain('once a sample');
  });

  it('asks for nothing from outside: no script, no address, no source but itself', () => {
    expect(page).not.toMatch(/<script|<link|<iframe|<img|<object|@import|javascript:/i);
    expect(page).not.toMatch(/\s(src|srcset|action|formaction|background|poster)=/i);
    for (const [, target] of page.matchAll(/\s(?:xlink:)?href="([^"]*)"/g)) expect(target).toMatch(/^#/);
    for (const [, target] of page.matchAll(/url\(([^)]*)\)/g)) expect(target).toMatch(/^#/);
    expect(page.replaceAll('xmlns="http://www.w3.org/2000/svg"', '')).not.toMatch(/https?:\/\//);
  });

  it('allows its own style by the hash that the browser computes, and no style attribute', () => {
    const style = /<style>([\s\S]*?)<\/style>/.exec(page)![1]!;
    const hash = createHash('sha256').update(style, 'utf8').digest('base64');
    const policy = /http-equiv="Content-Security-Policy" content="([^"]*)"/
      .exec(page)![1]!
      .replaceAll('&#39;', "'");
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain(`style-src 'sha256-${hash}'`);
    expect(page).not.toMatch(/\sstyle=/);
    expect(page.match(/<style/g)).toHaveLength(1);
  });

  it('escapes every text that came from a file', () => {
    const evil = `<script>alert(1)</script>"><img src=x onerror='y'>`;
    const base = fixtureResult({ lengthKm: 6 });
    const result = {
      ...base,
      title: evil,
      caseName: evil,
      road: {
        ...base.road,
        name: evil,
        masks: [{ from: 100, to: 300, reason: evil }],
        repairs: [{ ...base.road.repairs[0]!, message: evil }],
      },
      vehicle: { ...base.vehicle, name: evil },
      inputs: [{ name: evil, sha256: evil, bytes: 1 }],
      overrides: [evil],
      warnings: [{ code: 'x', message: evil }],
      defaults: [{ key: evil, value: evil, of: 'vehicle', source: evil }],
      requirements: base.requirements.map((one) => ({
        ...one,
        words: evil,
        requirement: { ...one.requirement, id: evil },
      })),
    } as const;
    for (const text of [
      renderReport(result, { units: 'kmh' }),
      ...chartFiles(result, { units: 'kmh' }).map((f) => f.svg),
    ])
      expect(text).not.toMatch(/<script|<img/i);
  });

  it('shows no number that is none', () => {
    const wishes: readonly FixtureWish[] = [
      {},
      { lengthKm: 6, withPositions: false, requirements: 'none' },
      { lengthKm: 6, designs: [] },
      {
        lengthKm: 6,
        ends: { 'pi-soft': { km: 0.2, status: 'non_finite' }, locked: { km: 3, status: 'stopped' } },
      },
    ];
    for (const wish of wishes) {
      const text = render(wish);
      expect(text).not.toMatch(/\bNaN\b|\bundefined\b|\bInfinity\b|\[object/);
    }
  });

  it('survives a run that broke down numerically', () => {
    const base = fixtureResult({ lengthKm: 6 });
    const [first, ...rest] = base.candidates;
    const { bins } = first!.result;
    const broken = Float64Array.from(bins.speedMax, (v, i) => (i > 200 ? Number.NaN : v));
    const result = {
      ...base,
      candidates: [
        {
          ...first!,
          result: {
            ...first!.result,
            status: 'non_finite' as const,
            bins: {
              ...bins,
              speedMax: broken,
              errorMax: broken,
              errorMean: broken,
              throttleMean: broken,
              wheelPower: broken,
            },
            ledger: { ...first!.result.ledger, kinetic: Number.NaN, residual: Number.NaN },
          },
        },
        ...rest,
      ],
    };
    expect(renderReport(result, { units: 'kmh' })).not.toMatch(/\bNaN\b|\bInfinity\b/);
  });

  it('uses every id once, and points only at ids that exist', () => {
    const ids = idsOf(page);
    expect(new Set(ids).size).toBe(ids.length);
    const known = new Set(ids);
    for (const [, id] of page.matchAll(/href="#([^"]+)"|url\(#([^)]+)\)/g))
      if (id !== undefined) expect(known).toContain(id);
    for (const [, id] of page.matchAll(/url\(#([^)]+)\)/g)) expect(known).toContain(id);
    for (const [, list] of page.matchAll(/aria-labelledby="([^"]+)"/g))
      for (const id of list!.split(' ')) expect(known).toContain(id);
  });

  it('gives every chart a title, a description and axes with units', () => {
    const charts = page.match(/<svg xmlns[\s\S]*?<\/svg>/g)!;
    expect(charts.length).toBeGreaterThan(12);
    for (const chart of charts) {
      expect(chart).toMatch(/role="img"/);
      expect(chart).toMatch(/<title id="[^"]+">[^<]+<\/title><desc id="[^"]+">[^<]+<\/desc>/);
      expect(chart).toMatch(/ \/ (m|km|N|kW|Wh|s|%|\(km\/h\))<\/text>|>\d+ (k?m)<\/text>/);
    }
    const words = wordsOf(page);
    for (const axis of [
      'speed error / (km/h)',
      'throttle / %',
      'wheel power / kW',
      'wheel energy / Wh',
      'wheel force / N',
      'distance / km',
      'time from the foot / s',
    ])
      expect(words).toContain(axis);
  });

  it('always says the cautions', () => {
    const words = wordsOf(render({ lengthKm: 6, requirements: 'met' }));
    for (const caution of [
      'A simulation is no approval to ride',
      'Speed hold can hide a slide, a bend or a stop ahead',
      'cut-outs by brake, clutch and stand, are outside this model',
      'qualified person',
    ])
      expect(words).toContain(caution);
  });

  it('speaks mph to those who want it, everywhere', () => {
    const words = wordsOf(render({ lengthKm: 12 }, 'mph'));
    expect(words).toContain('speed error / mph');
    // The definitions tell the units of the files, which stay metric.
    const own = words.slice(0, words.indexOf('Definitions of the figures'));
    expect(own).not.toContain('km/h');
  });

  it('calls distance nominal for a road along time', () => {
    const base = fixtureResult({ lengthKm: 6, withPositions: false });
    const words = wordsOf(renderReport({ ...base, road: { ...base.road, along: 'time' } }, { units: 'kmh' }));
    expect(words).toContain('nominal distance / km');
    expect(words).toContain('The positions of this road are not known');
  });

  it('gives every row of a table as many cells as its head', () => {
    for (const text of [page, render({ engine: true })]) {
      const tables = text.match(/<table[\s\S]*?<\/table>/g)!;
      expect(tables.length).toBeGreaterThan(8);
      for (const one of tables) {
        const rows = one.match(/<tr>[\s\S]*?<\/tr>/g)!;
        const cells = rows.map((row) => row.match(/<t[hd][ >]/g)!.length);
        expect(new Set(cells).size, one.slice(0, 400)).toBe(1);
      }
    }
  });

  it('tells gears, shifts, limit cycles, braking and fuel of an engine', () => {
    const words = wordsOf(render({ engine: true })).replaceAll('\u00a0', ' ');
    for (const told of [
      'gear 6, engaged',
      'grip of the tyre, µ 0.6',
      'In gear 6; gear 4 would be enough',
      'Speed that each gear sustains, from the first',
      'hold off, gear 6 to 5',
      'Limit cycles',
      '± 0.40 km/h',
      'the step of the fuel cut',
      'Descents that need a brake',
      'Brakes heat',
      'left in the clutch at shifts',
      'pulse every 40 mm of way, counted over 100 ms',
      'ISO 1585',
    ])
      expect(words).toContain(told);
    expect(wordsOf(page)).not.toContain('gear 6');
    for (const one of [page, render({ engine: true })])
      expect(wordsOf(one).replaceAll('\u00a0', ' ')).toContain(
        'Looked for: ± 0.50 km/h or more, with a period of 2 to 25 s, in at least 4 turns',
      );
  });

  it('names a limit cycle in the answer, whether or not the design meets what was asked', () => {
    for (const requirements of ['met', 'missed'] as const) {
      const sentence = /<p class="sentence">.*?<\/p>/.exec(render({ engine: true, requirements }))![0];
      expect(wordsOf(sentence).replaceAll('\u00a0', ' ')).toMatch(
        /it swings by itself on km [\d.]+ to [\d.]+ \(and once elsewhere\): ±0\.86 km\/h every 1\.3 s, because of the step of the fuel cut/,
      );
    }
  });

  it('gives the same bytes twice', () => {
    expect(render()).toBe(page);
  });

  it('stays below 1.5 MB for a road of 100 km and five candidates', () => {
    const long = render({ lengthKm: 100, designs: ['pi-a', 'pi-b', 'pi-c', 'pi-d'] });
    expect(new TextEncoder().encode(long).length).toBeLessThan(1.5e6);
  });
});

describe('chart files', () => {
  it('stand alone: concrete colours, a name space, unique names, ids of their own', () => {
    const files = chartFiles(fixtureResult(), { units: 'kmh' });
    const names = files.map((file) => file.name);
    expect(new Set(names).size).toBe(names.length);
    for (const name of [
      'profile.svg',
      'force-speed.svg',
      'plan.svg',
      'segments.svg',
      'energy.svg',
      'lane-speed-error.svg',
      'hill-1.svg',
    ])
      expect(names).toContain(name);
    for (const { svg } of files) {
      expect(svg).toMatch(
        /^<\?xml version="1.0" encoding="UTF-8"\?>\n<svg xmlns="http:\/\/www\.w3\.org\/2000\/svg" /,
      );
      expect(svg).not.toContain('var(');
      expect(svg).toContain('fill="#ffffff"');
      expect(svg).not.toMatch(/NaN|undefined|Infinity|currentColor/);
      const ids = idsOf(svg);
      expect(new Set(ids).size).toBe(ids.length);
    }
  });

  it('have no plan where the positions are unknown', () => {
    const files = chartFiles(fixtureResult({ lengthKm: 6, withPositions: false }), { units: 'kmh' });
    expect(files.map((file) => file.name)).not.toContain('plan.svg');
  });
});
