import { describe, expect, it } from 'vitest';
import { demandOf } from '../../src/study/demand.ts';
import { hillFacts } from '../../src/study/hill-facts.ts';
import { expectClose } from '../compare.ts';
import { roadOf } from './road-of.ts';
import { HOLD_60, vehicleOf } from './vehicle-of.ts';

const V = 60 / 3.6;
/** 215 kg, CdA 0.58, crr 0.014, 1.2 kg/m3 [N]. */
const requiredOn = (grade: number): number =>
  0.6 * 0.58 * V * V + (215 * 9.80665 * (0.014 + grade)) / Math.sqrt(1 + grade * grade);

const factsOf = (grade: number, kind: 'descent' | 'climb') => {
  // The brow of a descent, or the foot of a climb, belongs to the stretch.
  const road = roadOf([
    { length: 300, grade: 0 },
    { length: 300, grade: grade / 2 },
    { length: 700, grade },
  ]);
  const demand = demandOf(road, vehicleOf(), HOLD_60);
  return hillFacts(road, demand, { kind, from: 200, to: 1300, until: 1300 }, 1);
};

describe('the demand that stands for a descent', () => {
  it('is the least on it, not that of its brow', () => {
    // 126 N at the brow; 5.5 % leaves 11 N to ask for.
    const facts = factsOf(-0.055, 'descent');
    expectClose(facts.requiredForce, requiredOn(-0.055), 1e-6);
    expectClose(facts.share, requiredOn(-0.055) / 260, 1e-9);
    expect(facts.shareAt).toBeGreaterThanOrEqual(600);
  });

  it('is what must be held back where the road pushes', () => {
    const facts = factsOf(-0.07, 'descent');
    expectClose(facts.requiredForce, requiredOn(-0.07), 1e-6);
    expectClose(facts.share, requiredOn(-0.07) / 40, 1e-9);
    expect(facts.share).toBeLessThan(0);
  });

  it('is the greatest on a climb', () => {
    expectClose(factsOf(0.05, 'climb').share, requiredOn(0.05) / 260, 1e-9);
  });
});
