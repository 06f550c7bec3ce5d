import { type Html, html } from '../html.ts';

/** 6: how a step is turned into numbers. */
export const stepMethod = (): Html => html`<dl class="equations">
<dt>v = v₀ + K Δu (1 − e<sup>−(t − L) / T</sup>), t &gt; L</dt>
<dd>First order with dead time, fitted by least squares to the whole record of a step: v₀, K, T and L together, by halved Gauss-Newton steps.</dd>
<dt>T = 1.5 (t₆₃ − t₂₈), L = t₆₃ − T</dt>
<dd>Where the fit starts: the times at which 28.3 and 63.2 % of the change are behind (C. L. Smith, Digital Computer Process Control, 1972, from memory).</dd>
<dt>standard errors</dt>
<dd>Residuals whose neighbours correlate by φ count as n (1 − φ) / (1 + φ) samples (G. V. Bayley, J. M. Hammersley, 1946, from memory); intervals by Student's t. Of several steps, the scatter between them.</dd>
<dt>gains</dt>
<dd>SIMC: S. Skogestad, J. Process Control 13 (2003) 291-309.</dd>
</dl>
<h3 id="method-cautions">Cautions</h3>
<ul>
<li>One first-order lag is a picture of the vehicle near one speed, not of the engine: idle, fuel cut and full load are outside it.</li>
<li>A step of the throttle on a public road is a manoeuvre: closed road, clear sight, qualified rider.</li>
<li>Gains on paper are no approval to ride. Replay them over roads first; type-approval rules, local law and a qualified person's judgement come first.</li>
</ul>`;
