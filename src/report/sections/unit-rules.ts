import type { SpeedRule } from '../../control/supervisor-setup.ts';
import { type Html, type HtmlValue, html } from '../html.ts';
import { asksOfHold } from '../model/hold-away.ts';
import type { View } from '../model/view.ts';
import { fixed, placeText, type SpeedUnit, speedText, timeText, trimmed, withUnit } from '../quantity.ts';
import { table } from './table.ts';

const NO_RULE = 'no such rule';

/** How the rider rides, the rules of the unit as they were used, and what the sensor did wrong; null where the case asks nothing of the hold. */
export function unitRules(view: View): Html | null {
  const { result, speed } = view;
  if (!asksOfHold(result)) return null;
  const { supervisor, rider, faults } = result;
  return html`<h3 id="method-rider">The rider and the unit</h3>
<p>The rider is an ideal one: while hold is off they hold the speed that they have, or that they brake to, with full knowledge of road, wind and vehicle, so that what the figures tell is the unit's doing. Error figures are taken over the time with hold on; an override counts as on. Acts are done where the case places them, at the next sample of the controller.${
    typeof rider.resumesAfter === 'number' &&
    ` A hold that a rule of the unit has ended is resumed ${timeText(rider.resumesAfter)} later.`
  }${supervisor === null && ' The unit has no rule by which it ends hold itself.'}</p>
${
  supervisor !== null &&
  table('Rules of the unit', [{ head: 'rule' }, { head: 'as it was used' }], [
    [
      'lowest speed',
      supervisor.lowestSpeed > 0
        ? `below ${speedText(supervisor.lowestSpeed, speed)} measured, hold ends and cannot be engaged`
        : NO_RULE,
    ],
    ['too slow', ruleWords(supervisor.tooSlow, 'below', speed)],
    ['too fast', ruleWords(supervisor.tooFast, 'above', speed)],
    [
      'believable',
      supervisor.believable === null
        ? 'the sensor is believed whatever it says'
        : `a change of the measured speed by more than ${withUnit(trimmed(supervisor.believable, 1), 'm/s²')} between two samples ends hold`,
    ],
    [
      'resume',
      supervisor.resumeRamp === null
        ? 'the reference steps to the set speed'
        : `the reference goes from the measured speed to the set speed at ${withUnit(trimmed(supervisor.resumeRamp, 2), 'm/s²')}`,
    ],
    [
      'tap',
      `${speedText(supervisor.tap, speed)} each, ${supervisor.tapRamp === null ? 'by the ramp of the candidate' : `at ${withUnit(trimmed(supervisor.tapRamp, 2), 'm/s²')}`}`,
    ],
    [
      'override',
      `${supervisor.override.integral === 'held' ? 'the integral stands still' : 'the integral runs on'} while the grip has the throttle; hold is back within ${speedText(supervisor.override.reentry, speed)} of the set speed`,
    ],
  ] satisfies HtmlValue[][])
}${
  faults.length > 0 &&
  html`<p>Faults of the speed sensor that were put in: ${faults
    .map(
      ({ at, shows, for: seconds }) =>
        `${'distance' in at ? placeText(at.distance) : `after ${timeText(at.time)}`}, ${FAULTS[shows]} for ${withUnit(fixed(seconds, seconds < 10 ? 2 : 0), 's')}`,
    )
    .join('; ')}.</p>`
}`;
}

const FAULTS = {
  nothing: 'no pulses',
  last_value: 'the last value',
  double: 'twice the speed',
} as const;

const ruleWords = (rule: SpeedRule | null, side: 'below' | 'above', speed: SpeedUnit): string =>
  rule === null
    ? NO_RULE
    : `${speedText(rule.by, speed)} ${side} the set speed for ${timeText(rule.for)} ends hold`;
