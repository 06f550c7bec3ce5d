import { type Html, html } from '../html.ts';

/** 6: how a ride is held against its vehicle. */
export const rideMethod = (): Html => html`<dl class="equations">
<dt>∫ F<sub>drive</sub> ds = Δ(m<sub>e</sub> v² / 2 + m g z) + Crr m g ∫ cos θ ds + CdA ½ ρ ∫ v<sub>a</sub> (v + w) ds</dt>
<dd>The balance of energy over pieces of 20 s, the drive's work from the log. CdA, m and m Crr are linear in it and come by least squares; growth of CdA with yaw and of Crr with speed stay those of the vehicle file.</dd>
<dt>left out</dt>
<dd>Pieces in which the drive gave nothing for more than a tenth of the time (a brake may have been on), rows slower than 9 km/h, and what lies beside a pause of more than 5 s or a gap of the track.</dd>
<dt>z<sub>v</sub> = ∫ [(F<sub>drive</sub> − F<sub>air</sub> − m<sub>e</sub> dv/dt) / (m g) − Crr] ds</dt>
<dd>Elevation closure: CdA and Crr that make this height follow the road's, with an offset (R. Chung, Estimating CdA with a power meter, 2012; J. C. Martin et al., J. Appl. Biomech. 14 (1998) 276-291). Integrated, not differentiated; a height that drifts goes into Crr.</dd>
<dt>speed residual</dt>
<dd>Each segment is simulated from its logged starting speed with the logged drive, midpoint rule, at most 0.25 s a step. Drive lag and shifts are not in it.</dd>
<dt>standard errors</dt>
<dd>Up to 15 groups of pieces that follow each other count as independent (Liang and Zeger 1986), with Student's t; those of the closure by the correlation of neighbouring residuals.</dd>
</dl>
<h3 id="method-cautions">Cautions</h3>
<ul>
<li>No interval has an error in it that the whole ride shares: mass, air density, speed scale, the drive's curves, a wind that nobody logged.</li>
<li>A fitted number is that which makes this ride agree: where the drive is wrong, a wrong CdA may agree best.</li>
<li>A simulation with these numbers is no approval to ride. Type-approval rules, local law and a qualified person's judgement come first.</li>
</ul>`;
