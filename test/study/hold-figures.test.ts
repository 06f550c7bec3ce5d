import { describe, expect, it } from 'vitest';
import type { HoldEvent, HoldEventKind } from '../../src/loop/result.ts';
import type { FigureRecord } from '../../src/study/figure-measures.ts';
import { figureRow } from '../../src/study/figure-table.ts';
import type { HoldMeasure, HoldRecord } from '../../src/study/hold-transient.ts';
import { expectClose } from '../compare.ts';

const event = (kind: HoldEventKind, distance: number): HoldEvent => ({
  time: distance / 20,
  distance,
  kind,
  cause: 'rider',
  setSpeed: 20,
  measured: 20,
  command: 0.3,
});
const measure = (kind: HoldEventKind, distance: number, some: Partial<HoldMeasure>): HoldMeasure => ({
  candidate: 'pi',
  event: event(kind, distance),
  commandStep: 0,
  lowest: 0,
  highest: 0,
  settling: 0,
  jerk: 0,
  ...some,
});

function figure(name: string, some: Partial<HoldRecord>) {
  const hold = { measures: [], off: [], endedByRule: [], ...some };
  const bins = { size: 1, time: Float64Array.of(120) };
  const record = { hold: () => hold, bins, chosen: Uint8Array.of(1) };
  return figureRow(name)!.measure(record as unknown as FigureRecord);
}

/** Said of what the next event cut short. */
const CUT = { none: 'what came next on the way came first' };

describe('figures of the hold', () => {
  it('take the worst of all engagings, and where it was', () => {
    const measures = [
      measure('engaged', 100, { lowest: -0.5 }),
      measure('engaged', 300, { lowest: -1.5 }),
      measure('resumed', 500, { lowest: -4, highest: 2, settling: 7 }),
    ];
    const sag = figure('engage_sag_kmh', { measures });
    expectClose(sag.value as number, 5.4, 1e-9);
    expect(sag.at).toBe(300);
    expectClose(figure('resume_overshoot_kmh', { measures }).value as number, 7.2, 1e-9);
    expect(figure('resume_settling_s', { measures })).toEqual({ value: 7, at: 500 });
  });

  it('do not exist where there was nothing of the kind', () => {
    for (const name of ['engage_sag_kmh', 'resume_overshoot_kmh', 'resume_settling_s', 'command_step_pct'])
      expect(figure(name, { measures: [measure('ended', 100, {})] }).value).toHaveProperty('none');
    expect(figure('hold_off_s', {}).value).toBe(0);
    expect(figure('hold_off_events', {}).value).toBe(0);
  });

  it('put a resume that never settled before all others', () => {
    const never = { none: 'it was not within 1 km/h for 3 s in a minute' };
    const measures = [
      measure('resumed', 100, { settling: 50 }),
      measure('resumed', 900, { settling: never }),
    ];
    expect(figure('resume_settling_s', { measures })).toEqual({ value: never, at: 900 });
  });

  it('leave the settling open where something else cut one short', () => {
    const measures = [measure('resumed', 100, { settling: 5 }), measure('resumed', 900, { settling: CUT })];
    expect(figure('resume_settling_s', { measures })).toEqual({ value: 5, at: 100, open: CUT.none });
    expect(figure('resume_settling_s', { measures: measures.slice(1) })).toEqual({ value: CUT, at: 900 });
  });

  it('take the greatest step of the command where hold takes over, and not where it ends', () => {
    const measures = [
      measure('engaged', 100, { commandStep: 0.02 }),
      measure('override_ended', 200, { commandStep: 0.05 }),
      measure('ended', 300, { commandStep: 0.8 }),
      measure('override_ended', 400, { commandStep: { none: 'hold did not come back first' } }),
    ];
    const step = figure('command_step_pct', { measures });
    expectClose(step.value as number, 5, 1e-12);
    expect(step.at).toBe(200);
    expect(step.open).toBeUndefined();
  });

  it('add up the time with hold off, and count what rules ended', () => {
    const off = [
      { from: 100, to: 200, since: 5, until: 12, ended: null, back: true },
      { from: 900, to: 1400, since: 60, until: 90, ended: null, back: false },
    ];
    expect(figure('hold_off_s', { off })).toEqual({ value: 37, at: 900 });
    expect(figure('hold_off_events', { endedByRule: [900, 1200] })).toEqual({ value: 2, at: 900 });
  });
});
