import { CORRECTION_RANGE } from '../../vehicle/derating.ts';
import type { Drive } from '../../vehicle/drive.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';
import { type Html, html } from '../html.ts';
import { hasGears, turns } from '../model/gear-words.ts';

const i = (text: string) => html`<i>${text}</i>`;
const sub = (text: string, below: string) => html`<i>${text}</i><sub>${below}</sub>`;

/** The plant of this vehicle, as text that every reader and every browser can read. */
export function equations({ drive, traction, actuator, sensor }: Vehicle): Html {
  return html`<dl class="equations">
<dt>${sub('m', 'e')} d${i('v')}/d${i('t')} = ${sub('F', 'drive')} − ${sub('F', 'aero')} − ${sub('F', 'roll')} − ${i('m')} ${i('g')} sin ${i('θ')} − ${sub('F', 'brake')}</dt>
<dd>along the slope; tan ${i('θ')} is the grade, ${sub('m', 'e')} the mass with all that turns${turns(drive) && html`: the wheels, and what turns before the gear with its inertia ${i('J')} as ${i('J')} ${i('r')}²`}</dd>
<dt>${sub('F', 'aero')} = ½ ${i('ρ')} ${sub('C', 'd')}${i('A')}(${i('β')}) ${sub('v', 'a')} (${i('v')} + ${i('w')})</dt>
<dd>${i('w')} headwind, ${i('c')} crosswind, ${sub('v', 'a')} = √((${i('v')} + ${i('w')})² + ${i('c')}²), yaw ${i('β')} = atan2(${i('c')}, ${i('v')} + ${i('w')}); wind axes; signed, so that a strong tailwind pushes</dd>
<dt>${sub('F', 'roll')} = ${i('m')} ${i('g')} cos ${i('θ')} (${sub('c', '0')} + ${sub('c', '1')} ${i('v')} + ${sub('c', '2')} ${i('v')}²)</dt>
<dd>against the motion; from the coefficients, or from a published road load with its test mass</dd>
<dt>${sub('F', 'drive')} = ${i('r')} ${i('T')}, ${i('T')} = ${sub('a', '0')} + ${sub('a', '1')} ${i('ω')} + ${i('x')} (${sub('b', '0')} + ${sub('b', '1')} ${i('ω')} + ${sub('b', '2')} ${i('ω')}² + ${sub('b', '3')}/${i('ω')}) − (1 − ${i('d')}) ${i('L')}(${i('ω')}, ${i('x')}), ${i('ω')} = ${i('r')} ${i('v')}</dt>
<dd>in each cell of shaft speed ${i('ω')} and throttle ${i('x')}, behind a first-order lag; ${i('r')} the whole ratio from wheel speed to shaft speed${turns(drive) ? '' : ' (1 for this drive, whose law is over speed)'}; ${i('L')} what full throttle loses where the factor ${i('d')} of air, voltage and heat is below 1. ${lawWords(drive)}</dd>
${gearEquation(drive)}
${factorEquation(drive)}
${batteryEquation(drive)}
${
  traction !== null &&
  html`<dt>−${i('μ')} ${i('m')} ${i('g')} cos ${i('θ')} (${i('p')} − ${i('b')}) / (${i('p')} + ${i('μ')} ${i('h')}) ≤ ${sub('F', 'drive')} ≤ ${i('μ')} ${i('m')} ${i('g')} cos ${i('θ')} (${i('p')} − ${i('b')}) / (${i('p')} − ${i('μ')} ${i('h')})</dt>
<dd>grip of the driven rear wheel with load transfer: friction ${i('μ')}, wheelbase ${i('p')}, centre of mass ${i('b')} ahead of the rear contact and ${i('h')} high. It bounds what demand counts as there; in the loop the wheel does not slip, and a force beyond the grip is told as a warning</dd>`
}
<dt>${i('x')} = play(lag(stops(steps(delay(${i('u')})))))</dt>
<dd>the actuator, in this order: dead time, steps of the resolution, end stops, first-order lag with a rate limit, slack; the play operator keeps the throttle within half of the slack of what moves it. ${actuator.slack > 0 ? 'A throttle with slack stays where it is until the slack is taken up.' : 'This one has no slack.'}</dd>
<dt>${i('y')} = delay(filter((1 + ${i('ε')}) ${i('v')} + noise))</dt>
<dd>the sensor, in this order: pulses, scale error ${i('ε')}, noise, first-order filter, delay. ${pulseWords(sensor)}</dd>
<dt>${i('u')} = ${sub('K', 'p')} (${i('b')} ${i('s')} − ${i('y')}) + ${i('I')}, ${i('I')} += ${sub('K', 'i')} ${sub('T', 's')} (${i('s')} − ${i('y')})</dt>
<dd>the PI law on measured speed ${i('y')} and reference ${i('s')}, set-point weight ${i('b')}, sample time ${sub('T', 's')}, command cut to the range of the throttle; anti-windup as each candidate says</dd>
<dt>${i('S')} = 1 / (1 + ${i('L')}), ${sub('M', 's')} = max |${i('S')}|, ${i('L')} = ${i('C')}(${i('z')}) ${i('P')}(${i('z')})</dt>
<dd>the loop on paper: ${i('P')} the exact derivatives of all above at an operating point, with every lag, held over a sample (zero-order hold), dead times exact to parts of a sample; ${i('C')} the law of the candidate. Gain margin: the factor on the gain with which the loop oscillates; phase margin: the lag where |${i('L')}| = 1 with which it does; stability by the turns of 1 + ${i('L')} round 0 (Nyquist). Limits of range and rate, slack and steps have no part in it</dd>
</dl>
<p class="small">Sources: longitudinal dynamics as in J. C. Martin et al., J. Appl. Biomech. 14 (1998) 276, with the wind of both directions; ISA air by ISO 2533; anti-windup and margins as in K. J. Åström and T. Hägglund, Advanced PID Control (2006), the sampled loop as in K. J. Åström and B. Wittenmark, Computer-Controlled Systems, both from memory${traction !== null && '; load transfer as in V. Cossalter, Motorcycle Dynamics, from memory'}.</p>`;
}

/** What the cells of a drive are made from. */
function lawWords(drive: Drive): string {
  switch (drive.kind) {
    case 'force':
      return 'Here: closed-throttle drag, and a force in proportion to the throttle up to a power limit.';
    case 'electric':
      return 'Here: force up to a power limit for pushing, another for regeneration, which fades in a straight line below a speed.';
    default:
      return `Here: the torque of the engine over shaft speed and throttle, bilinear between its points, with the losses of the driveline; at closed throttle its drag, which an idle governor takes away down at idle; above the rev limit torque falls in a straight line to that of closed throttle${
        drive.withoutFuelCut === null ? '' : '; the fuel cut is a step of the torque at a small throttle'
      }.`;
  }
}

function gearEquation({ belt, gears, gearbox }: Drive): Html | false {
  if (belt !== null)
    return html`<dt>${i('r')} → min(max(${sub('ω', 'line')}(${i('x')}) / ${i('v')}, ${sub('r', 'least')}), ${sub('r', 'greatest')})</dt>
<dd>the belt: a first-order lag towards the ratio at which the engine turns at its line ${sub('ω', 'line')} over throttle. While the ratio moves, the kinetic energy with that of the engine is kept. Where the greatest ratio would turn the engine too slowly the centrifugal clutch slips</dd>`;
  return (
    hasGears({ gears }) &&
    gearbox.kind !== 'fixed' &&
    html`<dt>${sub('E', 'shift')} = ½ (${sub('m', 'e, before')} − ${sub('m', 'e, after')}) ${i('v')}²</dt>
<dd>at a shift the speed stays, and the difference of kinetic energy is the clutch's; while it is open nothing drives and the engine idles</dd>`
  );
}

function factorEquation({ derate }: Drive): Html | false {
  return (
    derate === 'naturally_aspirated' &&
    html`<dt>${i('d')} = min(1, 1/${i('α')}), ${i('α')} = (99 kPa / ${i('p')})<sup>1.2</sup> (${i('T')} / 298 K)<sup>0.6</sup></dt>
<dd>correction of ISO 1585 (and UN Regulation 85) for spark-ignition engines without supercharging, formula from memory, taken for dry air of pressure ${i('p')} and temperature ${i('T')}; it is vouched for between ${CORRECTION_RANGE.least} and ${CORRECTION_RANGE.greatest}, in standard air up to 890 m; beyond that it is extrapolated, and a warning says where</dd>`
  );
}

function batteryEquation({ source }: Drive): Html | false {
  if (source?.kind !== 'battery') return false;
  const { heating, sag } = source;
  const heat =
    heating !== null &&
    html`<dt>${i('τ')} d${i('h')}/d${i('t')} = (${i('P')} / ${sub('P', 'continuous')})² − ${i('h')}</dt>
<dd>heat ${i('h')} of motor and controller under wheel power ${i('P')}, 0 when cold; ${i('d')} falls in a straight line from 1 at its onset to its least value at ${i('h')} = 1</dd>`;
  return html`${heat}${
    sag !== null &&
    html`<dt>${i('d')} = ${i('d')}(charge)</dt>
<dd>share of the full force that the voltage of the battery leaves, over its charge</dd>`
  }`;
}

function pulseWords({ pulses }: Vehicle['sensor']): string {
  if (pulses === null) return 'This one sees the speed itself.';
  return pulses.reading.kind === 'counted'
    ? 'This one counts pulses in a window: the speed comes in steps of one pulse over the window.'
    : 'This one times the interval between the last two pulses, rounded to its clock; when slow, no speed is shown above one pulse over the time since the last.';
}
