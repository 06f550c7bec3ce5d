import { lanesChart } from '../charts/lanes.ts';
import { candidateKey } from '../charts/line-key.ts';
import { html } from '../html.ts';
import { statusWords } from '../model/design-standing.ts';
import { automaticShifts, offMarks, shiftMarks } from '../model/hold-marks.ts';
import { setSpeedMarks } from '../model/settling.ts';
import type { View } from '../model/view.ts';
import { PAGE_PAINT } from '../paint.ts';
import { chartFigure } from './chart-figure.ts';
import type { Section } from './section.ts';

/** 5: what every candidate did, over the same distance. */
export function lanesSection(view: View): Section {
  const early = view.candidates.filter((candidate) => candidate.result.status !== 'completed');
  const body = html`${candidateKey(view.candidates, PAGE_PAINT, view.rides)}
${chartFigure(
  'lanes',
  (canvas) => lanesChart(view, canvas),
  html`Lines: mean of each stretch that is one line of the picture wide; shade around them: least to greatest in it, so that no peak is lost.${
    view.rides.length > 0 &&
    ' In fine dashes with marks: a logged ride, broken where the log has a gap; speed, with the set speed dotted, speed error, and throttle where the log has it.'
  }${
    setSpeedMarks(view).length > 0 &&
    ' Brackets: a change of set speed is being followed, and the error there is planned.'
  }${
    shiftMarks(view).length > 0 &&
    ' Brackets with gears: the rider shifts; the clutch is open, then the throttle is in the rider\u2019s hand, and the hold is off until it resumes.'
  }${
    offMarks(view).length > 0 &&
    html` Hatched, with brackets: <a href="#rider">hold is off</a> in one of the designs at least; the rider rides by hand, and there is no speed error.`
  }${
    view.result.cycles.length > 0 &&
    html` Small waves at the upper edge of the first lane: <a href="#limit-cycles">limit cycles</a>.`
  }${automaticWords(view)}${
    early.length > 0 &&
    ` ${early.map((candidate) => `${candidate.name} ${statusWords(candidate)}`).join('; ')}.`
  }`,
)}`;
  return { id: 'lanes', number: 5, title: 'Along the road', body };
}

/** How often a gearbox shifted by itself, by candidate. */
function automaticWords(view: View): string {
  const counts = view.candidates.map((candidate) => `${candidate.name} ${automaticShifts(candidate)}`);
  return view.candidates.some((candidate) => automaticShifts(candidate) > 0)
    ? ` Shifts of the gearbox: ${counts.join(', ')}.`
    : '';
}
