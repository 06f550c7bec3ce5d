import { html } from '../html.ts';
import type { Section } from '../sections/section.ts';

/** 6: how the comparison was made, and what it cannot say. */
export function methodPart(): Section {
  const body = html`<ul>
<li>Read: summary.json of both folders, and the series of the candidates that both have. Candidates are matched by name, requirements by id and candidate, combinations of a matrix by load, wind, direction, gear and set speed, hills by their place.</li>
<li>A requirement that was met is lost when its verdict is anything but <em>met</em>, or when it is no longer asked of a candidate that is still there: then, as for a verdict lost in the matrix, the command ends with exit status 1. Of a candidate that is in one result only nothing can be lost.</li>
<li>A difference is after less before. It is <em>the same</em> within 0.05 km/h, 0.05 % or 0.05 s, and for other units within one part in 2000: less is not seen in the figures of a report. How far an energy account is open counts from 10⁻⁶. Better and worse follow the table of figures; a figure without a good direction is <em>changed</em>.</li>
<li><em>Not comparable</em>: a figure that one run does not have, a share of time in another band, and sums (times, energies, lengths) over distances that differ.</li>
<li>A stretch is a hill where the demand leaves the range, or a candidate leaves its band or sits on a limit: what is one hill before may be two after. Hills are at one place where at least half of the shorter lies on the longer; a place tells the speed error furthest from zero, whatever its sign, over all that its hills cover in either run, with the cause of the hill that strayed most, and the longest recovery.</li>
<li>Hills are not matched where the roads differ by more than 1 % in length. Of two roads of about the same length a place on one need not be a place on the other: the files above tell whether the track is the same.</li>
</ul>
<h3 id="method-cautions">Cautions</h3>
<ul>
<li>A simulation is no approval to ride. It shows where a design fails on paper; it cannot show that one is safe on the road.</li>
<li>Both results are as good as their inputs. A difference within the spread of the figures, which each report tells, may be no difference on the road.</li>
<li>Speed hold can hide a slide, a bend or a stop ahead, before a change and after it.</li>
<li>Type-approval rules, local law and a qualified person's judgement come first.</li>
</ul>`;
  return { id: 'method', number: 6, title: 'How it was compared', body };
}
