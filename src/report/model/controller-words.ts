import type { AntiWindup, ControllerSetup } from '../../control/setup.ts';
import { toPct } from '../../units/convert.ts';
import { fixed, type SpeedUnit, significant, withUnit } from '../quantity.ts';
import { inReaderUnit } from './reader-unit.ts';

function antiWindupWords(setup: AntiWindup): string {
  switch (setup.kind) {
    case 'none':
      return 'no anti-windup';
    case 'conditional':
      return 'conditional integration';
    case 'back_calculation':
      return `back calculation over ${withUnit(significant(setup.trackingTime, 2), 's')}`;
  }
}

/** A design ends with its gains, which stand before it here. */
const GAINS_AGAIN = /: kp \S+ % per km\/h, ki \S+ % per km\/h s/;

/** A controller in a few words, gains in per cent of throttle per unit of the reader's speed. */
export function controllerWords(setup: ControllerSetup, speed: SpeedUnit): string {
  if (setup.kind === 'locked')
    return setup.throttle === 'level'
      ? 'locked at what holds the set speed on the level in still air'
      : `locked at ${withUnit(fixed(toPct(setup.throttle), 1), '%')}`;
  const perUnit = 1 / speed.of(1);
  const perSpeed = (gain: number, unit: string) => withUnit(significant(toPct(gain) * perUnit, 3), unit);
  const gains =
    setup.kp === 0
      ? `I alone, Ki ${perSpeed(setup.ki, `% per ${speed.name} s`)}`
      : `PI, Kp ${perSpeed(setup.kp, `% per ${speed.name}`)}, ${setup.ki > 0 ? `Ti ${withUnit(significant(setup.kp / setup.ki, 3), 's')}` : 'no integral'}`;
  const every = `every ${withUnit(fixed(setup.sample * 1000), 'ms')}`;
  const weight = `set-point weight ${significant(setup.setpointWeight, 2)}`;
  const design =
    setup.design === null ? '' : `. ${inReaderUnit(setup.design.words.replace(GAINS_AGAIN, ''), speed)}`;
  return `${gains}, ${weight}, ${every}, ${antiWindupWords(setup.antiWindup)}${design}`;
}
