import { expect, it } from 'vitest';
import { readCaseFile } from '../../src/case/read-case-file.ts';
import { readVehicleFile } from '../../src/case/read-vehicle-file.ts';
import { bendRidingOf, holdOf, riderOf } from '../../src/case/run-of.ts';
import { faultsOf, supervisorOf } from '../../src/case/unit-of.ts';
import { vehicleOf } from '../../src/case/vehicle-of.ts';
import { rideDefaults } from '../../src/case/vehicle-of-case.ts';
import { expectClose } from '../compare.ts';

const REST = `
track: {profile: [{length_m: 5000, grade_pct: 0}]}
vehicle: {mass: {kerb_kg: 125}, road_load: {cda_m2: 0.5, crr: 0.014}, drive: {kind: force, peak_force_n: 300}}
candidates: [{name: pi, kind: pi, kp_pct_per_kmh: 4, ti_s: 6}]
`;
const read = (text: string, overrides: readonly string[] = []) =>
  readCaseFile(`${text}${REST}`, 'case.yaml', overrides);

it('brings the rules of the unit to SI', () => {
  const setup = supervisorOf(
    read(`
hold: {set_speed_kmh: 72}
supervisor:
  lowest_speed_kmh: 36
  too_slow: {below_set_kmh: 18, for_s: 2}
  too_fast: {above_set_kmh: 9, for_s: 0.5}
  believable_m_s2: 15
  resume_ramp_m_s2: 0.6
  tap_kmh: 1.8
  tap_ramp_m_s2: 0.4
  override: {integral: runs, reentry_kmh: 3.6}
`),
  );
  expect(setup).toEqual({
    lowestSpeed: 10,
    tooSlow: { by: 5, for: 2 },
    tooFast: { by: 2.5, for: 0.5 },
    believable: 15,
    resumeRamp: 0.6,
    tap: 0.5,
    tapRamp: 0.4,
    override: { integral: 'runs', reentry: 1 },
  });
});

it('takes the usual figures for what a rule leaves out, and no rule for what is not written', () => {
  const setup = supervisorOf(read('hold: {set_speed_kmh: 72}\nsupervisor: {too_slow: {}}'));
  expectClose(setup?.tooSlow?.by ?? 0, 20 / 3.6, 1e-12);
  expect(setup).toMatchObject({ lowestSpeed: 0, tooFast: null, believable: null, tapRamp: null });
  expect(setup?.override.integral).toBe('held');
});

it('has no unit in a case that asks nothing of it, and lists no defaults of it', () => {
  const document = read('hold: {set_speed_kmh: 72}\nrider: {brakes_above_kmh: 8}');
  expect(supervisorOf(document)).toBeUndefined();
  expect(riderOf(document)).toEqual({ brakesAbove: 8 / 3.6, shifts: [] });
  expect(holdOf(document)).not.toHaveProperty('starts');
  expect(faultsOf(document)).toEqual([]);
  expect(bendRidingOf(document)).toBeNull();
  expect(rideDefaults(document, document.vehicle!).some(({ key }) => key.startsWith('supervisor'))).toBe(
    false,
  );
});

it.each([
  ['an act', 'hold: {set_speed_kmh: 72}\nrider: {does: [{at_km: 1, act: tap, taps: -2}]}'],
  ['bends', 'hold: {set_speed_kmh: 72}\nrider: {bends: {}}'],
  ['a fault', 'hold: {set_speed_kmh: 72}\nfaults: [{at_s: 3, speed_sensor: double, for_s: 1}]'],
  ['a start by hand', 'hold: {set_speed_kmh: 72, starts: by_hand}\nrider: {does: [{at_km: 1, act: engage}]}'],
])('lists the ramps and taps that it takes where %s asks for a unit and no rules are written', (_, text) => {
  const document = read(text);
  const keys = rideDefaults(document, document.vehicle!).map(({ key }) => key);
  expect(keys).toContain('supervisor.resume_ramp_m_s2');
  expect(keys).toContain('supervisor.override.integral');
  expect(supervisorOf(document)).toMatchObject({ lowestSpeed: 0, tooSlow: null, resumeRamp: 0.7 });
});

it('brings what the rider does to SI, in the order written', () => {
  const document = read(`
hold: {set_speed_kmh: 72, starts: by_hand}
rider:
  resumes_after_s: 4
  does:
    - {at_km: 0.5, act: engage}
    - {at_km: 1, act: tap, taps: 3}
    - {at_km: 1.5, act: override, throttle_pct: 60, for_s: 5}
    - {at_km: 2, act: cancel}
    - {at_km: 2.5, act: resume}
    - {at_km: 3, act: cancel, then: coasts}
    - {at_km: 3.5, act: brake, to_kmh: 36}
    - {at_km: 4, act: clutch, for_s: 1.5}
    - {at_km: 4.5, act: ride, to_kmh: 54, gains_m_s2: 0.8}
supervisor: {too_slow: {}}
`);
  const { acts = [], resumesAfter } = riderOf(document);
  expect(resumesAfter).toBe(4);
  expect(holdOf(document).starts).toBe('by_hand');
  expect(acts.map(({ at }) => at)).toEqual(
    [500, 1000, 1500, 2000, 2500, 3000, 3500, 4000, 4500].map((distance) => ({ distance })),
  );
  expect(acts.map(({ does }) => JSON.stringify(does))).toEqual([
    '{"kind":"engage"}',
    '{"kind":"tap","taps":3}',
    '{"kind":"override","throttle":0.6,"for":5}',
    '{"kind":"cancel","then":"holds_speed"}',
    '{"kind":"resume"}',
    '{"kind":"cancel","then":"coasts"}',
    '{"kind":"brake","to":10,"deceleration":2}',
    '{"kind":"clutch","for":1.5}',
    '{"kind":"ride","to":15,"acceleration":0.8}',
  ]);
});

it('brings faults and bends to SI', () => {
  const document = read(`
hold: {set_speed_kmh: 72}
faults: [{at_km: 1.2, speed_sensor: last_value, for_s: 2}, {at_km: 3, speed_sensor: nothing, for_s: 1}]
rider: {bends: {max_lateral_m_s2: 3, brake_m_s2: 1.5}}
`);
  expect(faultsOf(document)).toEqual([
    { at: { distance: 1200 }, shows: 'last_value', for: 2 },
    { at: { distance: 3000 }, shows: 'nothing', for: 1 },
  ]);
  expect(bendRidingOf(document)).toEqual({
    maxLateral: 3,
    deceleration: 1.5,
    resumesAfter: 2,
    shortestHold: 20,
  });
});

it('takes changes beside the case', () => {
  const document = read('hold: {set_speed_kmh: 72}\nrider: {does: [{at_km: 1, act: tap, taps: 1}]}', [
    'supervisor.tap_kmh=3.6',
    'rider.does.0.taps=-4',
    'rider.does.0.at_km=1.5',
  ]);
  expect(supervisorOf(document)?.tap).toBe(1);
  expect(riderOf(document).acts).toEqual([
    { at: { distance: 1500 }, does: { kind: 'tap', taps: -4 }, reason: 'written' },
  ]);
});

it('reads where an actuator takes over from', () => {
  const at = (actuator: string) =>
    vehicleOf(
      readVehicleFile(
        `mass: {kerb_kg: 125}\nroad_load: {cda_m2: 0.5, crr: 0.014}\ndrive: {kind: force, peak_force_n: 300}\n${actuator}`,
        'v.yaml',
      ),
    ).actuator.engagesFrom;
  expect(at('actuator: {engages_from: rest, slack_pct: 3}')).toBe('rest');
  expect(at('actuator: {engages_from: rider}')).toBe('rider');
  expect(at('actuator: {lag_s: 0.1}')).toBeUndefined();
});
