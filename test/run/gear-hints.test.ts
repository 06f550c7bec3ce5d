import { expect, test } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { runCase } from '../../src/run/run-case.ts';
import { ENGINE } from './small-engine.ts';

const GAINS = { kp_pct_per_kmh: 4, ti_s: 8 };

interface Wish {
  readonly hold: object;
  readonly drive?: object;
  readonly controller?: object;
  readonly overrides?: readonly string[];
}

/** The messages of a run on 3 km of level road, by code. */
function told({
  hold,
  drive,
  controller = GAINS,
  overrides = [],
}: Wish): (code: string) => readonly string[] {
  const text = JSON.stringify({
    track: { profile: [{ length_m: 3000, grade_pct: 0 }] },
    vehicle: {
      mass: { kerb_kg: 125, rider_kg: 75 },
      road_load: { cda_m2: 0.58, crr: 0.014 },
      drive: { ...ENGINE, ...drive },
    },
    hold,
    candidates: [{ name: 'pi', kind: 'pi', ...controller }],
  });
  const { warnings } = runCase({ file: 'case.json', read: () => new TextEncoder().encode(text), overrides });
  return (code) => warnings.filter((one) => one.code === code).map(({ message }) => message);
}

test('a set speed below the idle of its gear is told, with the speed of the gear at 1000 rpm', () => {
  // 1.2 x 3 x 3 = 10.8 turns of the engine to one of the wheel: 1000 rpm are 0.3 x 104.72 / 10.8 = 2.91 m/s, 10.5 km/h.
  const [message, ...more] = told({ hold: { set_speed_kmh: 12 } })('below-idle');
  expect(more).toEqual([]);
  expect(message).toContain('turns the engine at 1146 rpm in gear 4, below its idle of 1400 rpm');
  expect(message).toContain('10.5 km/h at 1000 rpm');
  // 14.7 km/h are 1400 rpm.
  expect(told({ hold: { set_speed_kmh: 15 } })('below-idle')).toEqual([]);
});

test('a shift that had to wait for the one before says where it was planned', () => {
  const shifts = [
    { at_km: 1, gear: 3 },
    { at_km: 1.01, gear: 4 },
  ];
  const [first, second] = told({ hold: { set_speed_kmh: 60, shifts } })('hold-cancelled');
  expect(first).not.toContain('planned');
  // 2.5 s at 60 km/h are 42 m, less what is lost in them.
  expect(second).toMatch(
    /^Hold is cancelled at km 1\.04: .* It was planned at km 1\.01, where the shift before/,
  );
});

test('a change of the gear that the case overrules is told to do nothing', () => {
  const overrides = ['vehicle.drive.gear=3'];
  const code = 'override-without-effect';
  const [message] = told({ hold: { set_speed_kmh: 60, gear: 4 }, overrides })(code);
  expect(message).toContain('The change vehicle.drive.gear=3 does nothing: the case has hold.gear: 4');
  expect(told({ hold: { set_speed_kmh: 60 }, overrides })(code)).toEqual([]);
});

test('a design beyond the throttle tells the speed of its gear at 1000 rpm', () => {
  // The final drive forgotten: 3.6 turns, and 31.4 km/h at 1000 rpm.
  const wish: Wish = {
    hold: { set_speed_kmh: 100 },
    drive: { final_ratio: 1 },
    controller: { design: { droop_kmh: 2, grade_step_pct: 6, damping: 0.8 } },
  };
  expect(() => told(wish)).toThrow(InputError);
  expect(() => told(wish)).toThrow(/gear 4 goes 31\.4 km\/h at 1000 rpm: are gear and ratios right\?/);
});
