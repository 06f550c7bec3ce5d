import { type Html, html } from '../html.ts';

/** 6: how a coast-down is turned into numbers, and what that cannot say. */
export const coastDownMethod = (): Html => html`<dl class="equations">
<dt>(m + m<sub>r</sub>) (v₁² − v₂²) / 2 − m g Δz = Crr m g ∫ cos θ ds + CdA ½ ρ ∫ v<sub>a</sub> (v + w) ds</dt>
<dd>The balance of energy between two moments of a run; m all that rolls, m<sub>r</sub> the equivalent mass of what turns, w the headwind. It is linear in CdA and Crr, and nothing is differentiated (integral form of SAE J1263 and ISO 10521-1, from memory; law of motion: G. D. Thompson, The Vehicle Road Load Problem, US EPA).</dd>
<dt>pieces</dt>
<dd>Each run is cut into up to twelve pieces; both sides are averaged over a piece and neighbours subtracted, which keeps the equation exact and averages the noise of the speed. Slower than 9 km/h is left out. Integrals by parabolas through three samples.</dd>
<dt>three terms</dt>
<dd>The same balance with a rolling coefficient Crr + c v beside, so that f1 = m g c; by the same least squares and with the same intervals. They are given where zero lies outside of the interval of f1: else two terms say as much, and say it better. f1 is corrected to reference conditions as f0 is (form of ISO 10521-1, from memory).</dd>
<dt>wind and grade</dt>
<dd>Where they were not logged, one steady wind along the road and one steady grade are estimated from the difference between the ways; the square of the wind, which stays behind in the mean of both ways, is in the air term by Gauss-Newton steps. Crosswind is not seen: it adds to CdA.</dd>
<dt>standard errors</dt>
<dd>Each run is one piece of evidence, whatever the colour of its residuals: covariance by runs (K.-Y. Liang, S. L. Zeger, Biometrika 73 (1986) 13-22, from memory), each way by itself where the ways differ by a wind or a grade that is not known, widened by n / (n − 1) for n runs of a way; intervals by Student's t with the degrees of freedom of B. L. Welch, Biometrika 34 (1947) 28-35 (from memory). Of 1000 simulated coast-downs with noise, 93 to 97 % of the intervals hold the truth: a test of the program. The correlation is that of the least-squares fit.</dd>
</dl>
<h3 id="method-cautions">Cautions</h3>
<ul>
<li>An interval has the scatter of these runs in it, and no error that they share: mass, density, scale of the speed sensor, posture, tyre pressure and temperature.</li>
<li>CdA is that of the air as it came, wind axis: with crosswind it is more than in still air.</li>
<li>In neutral, bearings and output drag are in Crr, and are not to be counted again in the driveline.</li>
<li>A simulation with these numbers is no approval to ride. Type-approval rules, local law and a qualified person's judgement come first.</li>
</ul>`;
