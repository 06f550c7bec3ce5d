import { integerGains } from '../../control/integer-gains.ts';
import type { ControllerSetup, IntegerSetup, IntegralRule, PidSetup, PiSetup } from '../../control/setup.ts';
import { toDeg, toPct } from '../../units/convert.ts';
import { fixed, type SpeedUnit, significant, withUnit } from '../quantity.ts';
import { inReaderUnit } from './reader-unit.ts';

function integralWords(rule: IntegralRule, speed: SpeedUnit): string {
  switch (rule.kind) {
    case 'none':
      return 'no anti-windup';
    case 'conditional':
      return 'conditional integration';
    case 'back_calculation':
      return `back calculation over ${withUnit(significant(rule.trackingTime, 2), 's')}`;
    case 'clamping':
      return 'integral clamped to what is left of the range';
    case 'cap':
      return rule.of === 'throttle'
        ? `integral capped at ${percent(rule.cap)}`
        : `integral capped in the wrong unit, its sum of error at ${withUnit(significant(speed.of(rule.cap), 3), `${speed.name} s`)}`;
    case 'sign_test':
      return 'conditional integration by the signs of command and error';
  }
}

const percent = (ratio: number): string => withUnit(significant(toPct(ratio), 3), '%');
const seconds = (time: number): string => withUnit(significant(time, 3), 's');
const kilograms = (mass: number): string => withUnit(significant(mass, 4), 'kg');
const every = (sample: number): string =>
  `every ${withUnit(fixed(sample * 1000, Number.isInteger(Math.round(sample * 1e6) / 1000) ? 0 : 1), 'ms')}`;

/** A design ends with its gains, which stand before it here. */
const GAINS_AGAIN = /: kp \S+ % per km\/h, ki \S+ % per km\/h s/;

/** A controller in a few words, gains in per cent of throttle per unit of the reader's speed. */
export function controllerWords(setup: ControllerSetup, speed: SpeedUnit): string {
  switch (setup.kind) {
    case 'locked':
      return setup.throttle === 'level'
        ? 'locked at what holds the set speed on the level in still air'
        : `locked at ${withUnit(fixed(toPct(setup.throttle), 1), '%')}`;
    case 'pi':
      return `${piWords(setup, speed)}, ${integralWords(setup.antiWindup, speed)}${designWords(setup, speed)}`;
    case 'pid':
      return `${[piWords(setup, speed), ...familyWords(setup, speed)].join(', ')}${designWords(setup, speed)}`;
    case 'integer':
      return integerWords(setup, speed);
  }
}

const perSpeed = (gain: number, unit: string, speed: SpeedUnit): string =>
  withUnit(significant(toPct(gain) / speed.of(1), 3), unit);

function piWords(setup: PiSetup | PidSetup, speed: SpeedUnit): string {
  const { kp, ki } = setup;
  const derives = setup.kind === 'pid' && setup.kd > 0;
  const integral = ki > 0 ? `Ti ${seconds(kp / ki)}` : 'no integral';
  const proportional = `Kp ${perSpeed(kp, `% per ${speed.name}`, speed)}`;
  const name = ki > 0 || setup.kind === 'pi' ? (derives ? 'PID' : 'PI') : derives ? 'PD' : 'P';
  const gains =
    kp === 0 && !derives
      ? `I alone, Ki ${perSpeed(ki, `% per ${speed.name} s`, speed)}`
      : kp === 0
        ? `ID, Ki ${perSpeed(ki, `% per ${speed.name} s`, speed)}`
        : name === 'P' || name === 'PD'
          ? `${name}, ${proportional}`
          : `${name}, ${proportional}, ${integral}`;
  const derivative = derives
    ? `, ${kp > 0 ? `Td ${seconds(setup.kd / kp)}` : `Kd ${perSpeed(setup.kd, `% s per ${speed.name}`, speed)}`} on the measurement, filter ${seconds(setup.derivativeFilter)}`
    : '';
  return `${gains}${derivative}, set-point weight ${significant(setup.setpointWeight, 2)}, ${every(setup.sample)}`;
}

const designWords = ({ design }: PiSetup | PidSetup, speed: SpeedUnit): string =>
  design === null ? '' : `. ${inReaderUnit(design.words.replace(GAINS_AGAIN, ''), speed)}`;

function familyWords(setup: PidSetup, speed: SpeedUnit): readonly string[] {
  const { form, deadBand, rateLimit, schedule, observerFilter, model } = setup;
  const words: string[] = [];
  if (form.kind === 'velocity') words.push('velocity form');
  else if (setup.ki > 0) words.push(integralWords(form.antiWindup, speed));
  if (deadBand !== null)
    words.push(
      `dead band of ${withUnit(significant(speed.of(deadBand.halfWidth), 2), speed.name)} either way${deadBand.integratesInside ? ', in which the integral runs on' : ''}`,
    );
  if (rateLimit !== null) words.push(`command limited to ${percent(rateLimit)} a second`);
  if (schedule !== null)
    words.push(
      `gains scheduled over ${schedule.speed.length > 1 ? 'speed' : ''}${schedule.speed.length > 1 && schedule.rows.length > 1 ? ' and ' : ''}${schedule.rows.length > 1 || schedule.speed.length < 2 ? 'gear' : ''}`,
    );
  words.push(...feedforwardWords(setup));
  if (observerFilter !== null) words.push(`disturbance observer with a filter of ${seconds(observerFilter)}`);
  if (model !== null) words.push(`reckoning with ${kilograms(model.mass)}`);
  return words;
}

function feedforwardWords({ feedforward }: PidSetup): readonly string[] {
  if (feedforward === null) return [];
  const { drag, grade } = feedforward;
  if (grade === null) return ['feedforward of drag'];
  const what = `feedforward of ${drag ? 'drag and grade' : 'grade'}`;
  if (grade.kind === 'known_road')
    return [`${what} from the known road${grade.preview > 0 ? `, ${seconds(grade.preview)} ahead` : ''}`];
  const error =
    grade.pitchError === 0
      ? ''
      : ` mounted ${withUnit(significant(toDeg(grade.pitchError), 2), 'deg')} too steep`;
  return [`${what} from an accelerometer${error}, filter ${seconds(grade.filter)}`];
}

/** Gains as they are in force after rounding to counts. */
function integerWords(setup: IntegerSetup, speed: SpeedUnit): string {
  const counts = integerGains(setup);
  const gain = (count: number, inForce: number, unit: string): string =>
    count === 0 ? '0, its count rounds to nothing' : `${perSpeed(inForce, unit, speed)} (count ${count})`;
  return [
    `PI in whole numbers of ${setup.wordBits} bits, Kp ${gain(counts.kp, counts.kpInForce, `% per ${speed.name}`)}`,
    `Ki ${gain(counts.ki, counts.kiInForce, `% per ${speed.name} s`)}`,
    `summing ${setup.integralOf}`,
    `scaled by ${setup.scaling}${setup.rounding === 'nearest' ? ' to nearest' : ''}`,
    setup.overflow === 'wrap' ? 'words wrap around' : 'words saturate',
    every(setup.sample),
    integralWords(setup.integralRule, speed),
  ].join(', ');
}
