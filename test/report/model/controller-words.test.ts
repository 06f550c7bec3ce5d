import { expect, it } from 'vitest';
import type { PiSetup } from '../../../src/control/setup.ts';
import { controllerWords } from '../../../src/report/model/controller-words.ts';
import { SPEED_UNITS } from '../../../src/report/quantity.ts';

const setup = (kpPctPerKmh: number, kiPctPerKmhS: number): PiSetup => ({
  kind: 'pi',
  kp: (kpPctPerKmh / 100) * 3.6,
  ki: (kiPctPerKmhS / 100) * 3.6,
  setpointWeight: 1,
  sample: 0.02,
  computingDelay: 0,
  integration: 'forward',
  antiWindup: { kind: 'none' },
  ramp: null,
  design: null,
});
const words = (kp: number, ki: number, units: 'kmh' | 'mph' = 'kmh') =>
  controllerWords(setup(kp, ki), SPEED_UNITS[units]).replace(/\u00a0/g, ' ');

it('a PI law is told by Kp and Ti, an integral alone by Ki', () => {
  expect(words(4, 0.5)).toMatch(/^PI, Kp 4\.00 % per km\/h, Ti 8\.00 s,/);
  expect(words(4, 0)).toMatch(/^PI, Kp 4\.00 % per km\/h, no integral,/);
  expect(words(0, 0.01)).toMatch(/^I alone, Ki 0\.0100 % per km\/h s,/);
});

it('the gains of a design are told once, its demand in the unit of the reader', () => {
  const design = {
    method: 'droop' as const,
    speed: 60 / 3.6,
    asked: {},
    promised: {},
    words:
      'Designed at 60 km/h to lose 2 km/h on a step of 6 % of grade: kp 4 % per km/h, ki 0.5 % per km/h s.',
  };
  const told = controllerWords({ ...setup(4, 0.5), design }, SPEED_UNITS.mph).replace(/\u00a0/g, ' ');
  expect(told).toMatch(/Designed at 37\.3 mph to lose 1\.2 mph on a step of 6 % of grade\.$/);
});

// 1 mile = 1.609344 km.
it('gains are told per mph to readers of mph', () => {
  expect(words(4, 0.5, 'mph')).toMatch(/^PI, Kp 6\.44 % per mph, Ti 8\.00 s,/);
});
