import { html } from '../html.ts';

const i = (text: string) => html`<i>${text}</i>`;
const sub = (text: string, below: string) => html`<i>${text}</i><sub>${below}</sub>`;

/** The plant, as text that every reader and every browser can read. */
export const EQUATIONS = html`<dl class="equations">
<dt>${sub('m', 'e')} d${i('v')}/d${i('t')} = ${sub('F', 'drive')} − ${sub('F', 'aero')} − ${sub('F', 'roll')} − ${i('m')} ${i('g')} sin ${i('θ')} − ${sub('F', 'brake')}</dt>
<dd>along the slope; tan ${i('θ')} is the grade, ${sub('m', 'e')} the mass with all that turns</dd>
<dt>${sub('F', 'aero')} = ½ ${i('ρ')} ${sub('C', 'd')}${i('A')}(${i('β')}) ${sub('v', 'a')} (${i('v')} + ${i('w')})</dt>
<dd>${i('w')} headwind, ${i('c')} crosswind, ${sub('v', 'a')} = √((${i('v')} + ${i('w')})² + ${i('c')}²), yaw ${i('β')} = atan2(${i('c')}, ${i('v')} + ${i('w')}); wind axes; signed, so that a strong tailwind pushes</dd>
<dt>${sub('F', 'roll')} = ${i('m')} ${i('g')} cos ${i('θ')} (${sub('c', '0')} + ${sub('c', '1')} ${i('v')} + ${sub('c', '2')} ${i('v')}²)</dt>
<dd>against the motion; from the coefficients, or from a published road load with its test mass</dd>
<dt>${sub('F', 'drive')} = ratio · (${sub('a', '0')} + ${sub('a', '1')} ${i('ω')} + ${i('u')} (${sub('b', '0')} + ${sub('b', '1')} ${i('ω')} + ${sub('b', '2')} ${i('ω')}² + ${sub('b', '3')}/${i('ω')}))</dt>
<dd>in each cell of shaft speed ${i('ω')} and throttle ${i('u')}, behind a first-order lag; actuator, sensor, delays and limits as the vehicle gives them</dd>
<dt>${i('u')} = ${sub('K', 'p')} (${i('b')} ${i('r')} − ${i('y')}) + ${i('I')}, ${i('I')} += ${sub('K', 'i')} ${sub('T', 's')} (${i('r')} − ${i('y')})</dt>
<dd>the PI law on measured speed ${i('y')} and reference ${i('r')}, set-point weight ${i('b')}, sample time ${sub('T', 's')}, command cut to the range of the throttle; anti-windup as each candidate says</dd>
</dl>
<p class="small">Sources: longitudinal dynamics as in J. C. Martin et al., J. Appl. Biomech. 14 (1998) 276, with the wind of both directions; ISA air by ISO 2533; anti-windup as in K. J. Åström and T. Hägglund, Advanced PID Control (2006), from memory.</p>`;
