import { angleOfComplex, sizeOfComplex } from '../../numeric/complex.ts';
import { log } from '../../numeric/elementary.ts';
import type { CandidateLoop, LoopSheet, PointCurves } from '../../study/loop-sheet.ts';
import type { PointSteps } from '../../study/point-figures.ts';
import { toDeg } from '../../units/convert.ts';
import type { SpeedUnit } from '../quantity.ts';
import { placeOfPoint } from './point-words.ts';

/** How a curve is drawn; colour null: the muted ink. */
export interface CurveLook {
  readonly colour: number | null;
  readonly dash: string;
  readonly strong: boolean;
}

/** A loop at an operating point, as charts draw it. */
export interface LoopCurves {
  readonly name: string;
  readonly look: CurveLook;
  /** [rad/s] */
  readonly frequency: readonly number[];
  readonly magnitudeDb: readonly number[];
  /** Unwrapped, from where it begins between -270 and 90. */
  readonly phaseDeg: readonly number[];
  readonly crossings: Crossings;
  readonly steps: PointSteps | null;
}

/** Frequencies of the crossovers [rad/s] and the margins there; null: none. */
export interface Crossings {
  readonly gain: { readonly at: number; readonly phaseMarginDeg: number } | null;
  readonly phase: { readonly at: number; readonly gainMarginDb: number } | null;
}

/** The curves of a candidate: the worst point first, then the usual one where that is another. */
export function loopCurves(
  sheet: LoopSheet,
  loop: CandidateLoop,
  look: { readonly colour: number },
  speed: SpeedUnit,
): readonly LoopCurves[] {
  const { worst, nominal } = loop;
  const curves = (drawn: PointCurves, words: string, of: CurveLook): LoopCurves => {
    const { gainCrossover, phaseMargin, phaseCrossover, gainMargin } = loop.figures[drawn.point].margins;
    const place = placeOfPoint(sheet.points[drawn.point], speed);
    return {
      name: `${words}: ${place}`,
      look: of,
      ...bodeOf(drawn),
      crossings: {
        gain:
          gainCrossover === null || phaseMargin === null
            ? null
            : { at: gainCrossover, phaseMarginDeg: toDeg(phaseMargin) },
        phase:
          phaseCrossover === null || gainMargin === null
            ? null
            : { at: phaseCrossover, gainMarginDb: toDecibel(gainMargin) },
      },
      steps: drawn.steps,
    };
  };
  const found: LoopCurves[] = [];
  if (worst !== null) found.push(curves(worst, 'worst', { colour: look.colour, dash: '', strong: true }));
  if (nominal !== null && nominal.point !== worst?.point)
    found.push(curves(nominal, 'most of the time', { colour: null, dash: '6 4', strong: false }));
  return found;
}

function bodeOf({ response }: PointCurves): Pick<LoopCurves, 'frequency' | 'magnitudeDb' | 'phaseDeg'> {
  const frequency: number[] = [];
  const magnitudeDb: number[] = [];
  const phaseDeg: number[] = [];
  let phase = 0;
  response.frequency.forEach((w, i) => {
    const value = { re: response.re[i], im: response.im[i] };
    const size = sizeOfComplex(value);
    if (!(size > 0 && Number.isFinite(size))) return;
    let angle = toDeg(angleOfComplex(value));
    if (phaseDeg.length === 0) angle = angle > 90 ? angle - 360 : angle;
    else angle += 360 * Math.round((phase - angle) / 360);
    phase = angle;
    frequency.push(w);
    magnitudeDb.push(toDecibel(size));
    phaseDeg.push(angle);
  });
  return { frequency, magnitudeDb, phaseDeg };
}

/** Ratio of amplitudes in decibels. */
const toDecibel = (ratio: number): number => (20 * log(ratio)) / Math.LN10;
