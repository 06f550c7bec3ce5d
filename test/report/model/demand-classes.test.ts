import { describe, expect, it } from 'vitest';
import { demandClass, demandRuns } from '../../../src/report/model/demand-classes.ts';
import { viewOf } from '../../../src/report/model/view.ts';
import { fixtureResult } from '../fixture.ts';

describe('classes of demand', () => {
  it('change at 60 %, 90 % and 100 % of what there is, and below the least force', () => {
    const shares = [-1.01, -1, -0.1, 0, 0.59, 0.6, 0.9, 1, 1.01];
    expect(shares.map(demandClass)).toEqual([
      'below',
      'hold-back',
      'hold-back',
      'light',
      'light',
      'strong',
      'near-limit',
      'near-limit',
      'above',
    ]);
  });

  it('cover the road without gaps, and hide no knot that cannot be held', () => {
    const view = viewOf(fixtureResult(), 'kmh');
    const { road, demand } = view.result;
    const runs = demandRuns(view, 60);
    expect(runs[0]!.from).toBe(0);
    expect(runs[runs.length - 1]!.to).toBe(view.length);
    for (let i = 1; i < runs.length; i++) expect(runs[i]!.from).toBe(runs[i - 1]!.to);
    let unheld = 0;
    for (let i = 0; i < road.size; i++) {
      if (demand.share[i]! <= 1) continue;
      unheld++;
      const run = runs.find((one) => road.distance[i]! >= one.from && road.distance[i]! < one.to);
      expect(run?.name).toBe('above');
    }
    expect(unheld).toBeGreaterThan(10);
  });
});
