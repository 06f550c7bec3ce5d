import { describe, expect, it } from 'vitest';
import { answerOf } from '../../../src/report/model/answer.ts';
import { startingCharge } from '../../../src/report/model/battery-words.ts';
import { causeName, causeWords } from '../../../src/report/model/cause-words.ts';
import { viewOf } from '../../../src/report/model/view.ts';
import type { RunResult } from '../../../src/run/run-result.ts';
import type { Battery } from '../../../src/vehicle/energy-source.ts';
import { fixtureResult } from '../fixture.ts';

const plain = (text: string) => text.replace(/\u00a0/g, ' ');
/** Half full at the start, with a reserve of 20 % and half of the regeneration taken. */
const BATTERY: Battery = {
  kind: 'battery',
  map: {
    shaftSpeed: Float64Array.of(0, 1),
    torque: Float64Array.of(0, 1),
    power: new Float64Array(4),
    least: 0,
  },
  capacity: 1e6,
  charge: 0.5,
  reserve: 0.2,
  sag: null,
  acceptance: { charge: Float64Array.of(0, 1), share: Float64Array.of(1, 0) },
  heating: null,
};

/** Every run draws a tenth of the battery in each of its first bins, so many of them. */
function onBattery(tenths: number, status: 'completed' | 'stopped' = 'completed'): RunResult {
  const base = fixtureResult({ lengthKm: 12, designs: ['pi-firm'] });
  const { drive } = base.vehicle;
  return {
    ...base,
    vehicle: { ...base.vehicle, drive: { ...drive, source: BATTERY } },
    candidates: base.candidates.map((candidate) => {
      const { bins, ledger } = candidate.result;
      const drawn = bins.drawn.map((_, i) => (i < tenths ? 1e5 : 0));
      const driveLost = bins.driveLost.map((_, i) => (tenths >= 5 && i >= 4 ? 1 : 0));
      const chargeAtEnd = Math.max(0, 0.5 - 0.1 * tenths);
      return {
        ...candidate,
        result: {
          ...candidate.result,
          status,
          ledger: { ...ledger, chargeAtEnd },
          bins: { ...bins, drawn, driveLost },
        },
      };
    }),
  };
}
const sentenceOf = (run: RunResult): string => plain(answerOf(viewOf(run, 'kmh')).sentence);
/** End of a bin as the page writes a place. */
const endOf = (run: RunResult, bin: number): string =>
  `km ${(run.candidates[0]!.result.bins.edge[bin + 1]! / 1000).toFixed(2)}`;

describe('a battery in the answer', () => {
  it('is told with the place where it comes to its reserve', () => {
    const run = onBattery(3);
    expect(sentenceOf(run)).toContain(`its battery is down to its reserve at ${endOf(run, 2)}`);
    expect(sentenceOf(onBattery(2))).not.toContain('battery');
  });

  it('is told empty, as the end of the run where that came of it', () => {
    const stopped = onBattery(5, 'stopped');
    expect(sentenceOf(stopped)).toContain(`ran its battery empty at ${endOf(stopped, 4)} and came to a stop`);
    const rolled = onBattery(5);
    expect(sentenceOf(rolled)).toContain(`its battery is empty at ${endOf(rolled, 4)}`);
  });
});

describe('what is said of a battery', () => {
  it('is the charge at the start and what that leaves', () => {
    const charge = startingCharge(viewOf(onBattery(0), 'kmh'))!;
    expect(plain(`${charge.state}${charge.left}`)).toBe(
      "cold, at the start's charge of 50 %, which leaves 50 % of the regeneration",
    );
    expect(startingCharge(viewOf(fixtureResult({ lengthKm: 12 }), 'kmh'))).toBeNull();
  });

  it('is thin air only where that is the reason', () => {
    expect(causeName({ cause: 'derating', derating: 'altitude' })).toBe('thin air');
    for (const derating of ['heat', 'voltage', 'empty', 'full'] as const) {
      expect(causeName({ cause: 'derating', derating })).not.toContain('air');
      expect(causeWords({ cause: 'derating', derating })).toMatch(/heat|battery/);
    }
    expect(causeWords({ cause: { none: 'it kept its band' } })).toBeNull();
  });
});

describe('grip in the answer', () => {
  const withFriction = (friction: number): string => {
    const base = fixtureResult({ lengthKm: 12, designs: ['pi-firm'] });
    const traction = { friction, wheelbase: 1.3, massCentreAhead: 0.65, massCentreHeight: 0.6 };
    const candidates = base.candidates.map((candidate) => {
      // Once 400 N at the wheel, where a friction of 0.1 passes on a twentieth of the weight.
      const { bins } = candidate.result;
      const driveForceMax = bins.driveForceMax.map((_, i) => (i === 10 ? 400 : 0));
      return { ...candidate, result: { ...candidate.result, bins: { ...bins, driveForceMax } } };
    });
    return sentenceOf({ ...base, candidates, vehicle: { ...base.vehicle, traction } });
  };

  it('is told where the tyre would lose it, and not where it never would', () => {
    expect(withFriction(0.1)).toMatch(
      /(at km \d+\.\d\d|at \d+ places, first at km \d+\.\d\d,) its tyre would lose/,
    );
    expect(withFriction(1)).not.toContain('grip');
  });
});
