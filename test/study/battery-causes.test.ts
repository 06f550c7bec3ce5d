import { describe, expect, it } from 'vitest';
import type { LoopPlan } from '../../src/loop/plan.ts';
import { expectClose } from '../compare.ts';
import { electricOf, FULL_FADE, SAGGING } from './electric.ts';
import { oneHill, outcomeOn, STIFF, study } from './scene.ts';
import { piOf, planOf } from './vehicle-of.ts';

function worstOutcome(plan: LoopPlan) {
  const { hills } = study({ pi: plan });
  const found = hills.map((hill) => ({ hill, outcome: outcomeOn(hill, 'pi') }));
  expect(found.length).toBeGreaterThan(0);
  return found.reduce((a, b) => (Math.abs(b.outcome.speedChange) > Math.abs(a.outcome.speedChange) ? b : a));
}

/** Of gains that leave the band of 2 km/h on a step of 6 % by themselves. */
const SOFT = piOf({ kp: 0.1, ki: 0.01 });
/** So much that a few kilometres do not change its charge. */
const VAST = 4e8;

// Road load at 60 km/h 126 N, 21 N a per cent of grade.
describe('the cause of a hill on a battery', () => {
  const heating = { continuousPower: 2500, peakPowerTime: 60, onset: 0.8 };

  it.each([
    ['stiff', STIFF],
    ['soft', SOFT],
  ])('is heat where what it leaves is not enough, with %s gains', (_, gains) => {
    // 6 % asks 252 N, 4.2 kW; hot it gives 2.5 kW, 150 N.
    const { outcome } = worstOutcome(planOf(oneHill(0.06, 6000), electricOf({ heating }), gains));
    expect(outcome).toMatchObject({ cause: 'derating', derating: 'heat' });
    const words = /needs 252 N and full throttle gives (\d+) N: heat leaves (\d+) % of the force/.exec(
      outcome.why,
    );
    expectClose(Number(words![1]), 4 * Number(words![2]), 3);
    expect(Number(words![1])).toBeLessThan(252);
    expect(Number(words![1])).toBeGreaterThan(125);
    expect(outcome.why).toContain('it would be 400 N, which is enough');
    expect(outcome.why).not.toMatch(/air|sea level/);
  });

  it('is an empty battery, at its place, where the run ends for it', () => {
    // 126 N for 1500 m and 252 N for 500 m over 80 %: 394 kJ of 4 MJ.
    const vehicle = electricOf({ battery: { charge: 0.0984 } });
    const { hills, replayed } = study({ pi: planOf(oneHill(0.06, 1500), vehicle, STIFF) });
    expect(replayed[0]!.result.status).toBe('stopped');
    const outcome = outcomeOn(hills.at(-1)!, 'pi');
    expect(outcome).toMatchObject({ cause: 'derating', derating: 'empty' });
    expect(outcome.why).toMatch(/At km (1\.9\d|2\.0\d) its battery is empty/);
  });

  it.each([
    ['stiff', STIFF],
    ['milder', piOf({ kp: 0.25, ki: 0.06 })],
  ])('is a full battery where a descent is left without regeneration, with %s gains', (_, gains) => {
    // 10 % pushes with 84 N; the drag holds back 30 N, full regeneration would 230 N.
    const vehicle = electricOf({ battery: { capacity: VAST, charge: 1, acceptance: FULL_FADE } });
    const { hill, outcome } = worstOutcome(planOf(oneHill(-0.1), vehicle, gains));
    expect(hill.kind).toBe('descent');
    expect(hill.brakePower).toBeGreaterThan(0);
    expect(outcome).toMatchObject({ cause: 'derating', derating: 'full' });
    expect(outcome.why).toMatch(/needs \u22128[34] N and the least throttle gives \u22123[01] N/);
    expect(outcome.why).toMatch(/takes [01] % of the regeneration/);
    expect(outcome.why).toContain('\u2212230 N, which is enough');
  });

  it('is the voltage where it leaves too little force', () => {
    // 82 of 90 V leave 364 N of 400 N; 11.5 % asks 367 N.
    const vehicle = electricOf({ battery: { capacity: VAST, charge: 0.1, cells: SAGGING } });
    const { hill, outcome } = worstOutcome(planOf(oneHill(0.115, 3000), vehicle, STIFF));
    expectClose(hill.availableForce, (400 * 82) / 90, 1e-6);
    expect(outcome).toMatchObject({ cause: 'derating', derating: 'voltage' });
    expect(outcome.why).toContain(
      'the voltage of the battery at 10 % of its charge leaves 91 % of the force',
    );
  });

  it('is the gains where the battery takes something, but not what is needed', () => {
    // 6 % asks 252 N of 364 N.
    const vehicle = electricOf({ battery: { capacity: VAST, charge: 0.1, cells: SAGGING } });
    const { outcome } = worstOutcome(planOf(oneHill(0.06), vehicle, SOFT));
    expect(outcome.cause).toBe('gains');
  });

  it('is the torque where even a fresh battery is far from enough', () => {
    // 20 % asks 539 N.
    const vehicle = electricOf({ battery: { capacity: VAST, charge: 0.1, cells: SAGGING } });
    expect(worstOutcome(planOf(oneHill(0.2), vehicle, STIFF)).outcome.cause).toBe('torque');
  });
});
