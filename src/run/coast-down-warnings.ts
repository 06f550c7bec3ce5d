import type { CoastDownFit } from '../identify/coast-down.ts';
import { isTold } from '../identify/estimate.ts';
import type { LoggedRun } from '../identify/read-log.ts';
import { runningIntegral } from '../numeric/running-integral.ts';
import type { Warning } from '../problems/warning.ts';
import { toKmh, toPct } from '../units/convert.ts';

/** Runs each way that 40 CFR 86.529-98 asks for. */
const RUNS_EACH_WAY = 5;
/** Relative half-width of an interval beyond which a number is hardly one. */
const WIDE = 0.1;
const TIED = 0.95;
/** Wind [m/s] beyond which coast-down standards do not let anyone drive (ISO 10521-1: mean below 3 m/s along the road; from memory). */
const MOST_WIND = 3;
/** Disagreement of logged distance and speed that is no rounding. */
const DISTANCE_GAP = 0.02;
/** Scatter of a run beside that of all. */
const APART = 3;

/** What the user should know of a coast-down, and do about it. */
export function coastDownWarnings(
  fit: CoastDownFit,
  logs: readonly LoggedRun[],
  airAssumed: boolean,
): readonly Warning[] {
  const warnings: Warning[] = [];
  const add = (code: string, message: string): void => {
    warnings.push({ code, message });
  };
  if (airAssumed)
    add(
      'air-assumed',
      'Temperature or pressure of the air was not given and is that of the standard atmosphere: 10 K or 35 hPa of error change the drag area by 3.5 %. Give --air-temperature-c and --air-pressure-hpa as read at the road.',
    );
  for (const [name, { value, low, high }] of [
    ['drag area', fit.cda],
    ['rolling coefficient', fit.crr],
  ] as const) {
    const half = (high - low) / 2 / value;
    if (half > WIDE)
      add(
        'wide-interval',
        `The ${name} is known to ±${toPct(half).toFixed(0)} % only: more runs, or a start at a higher and an end at a lower speed, make it better.`,
      );
  }
  if (fit.correlation < -TIED)
    add(
      'tied-coefficients',
      `Drag area and rolling coefficient are tied (correlation ${fit.correlation.toFixed(2)}): their sum is known better than either. Coast down to a lower speed.`,
    );
  const [there, back] = ['there', 'back'].map(
    (way) => fit.runs.filter(({ direction }) => direction === way).length,
  );
  if (there! < RUNS_EACH_WAY || back! < RUNS_EACH_WAY)
    add(
      'few-runs',
      `${there} runs there and ${back} back: 40 CFR 86.529-98 asks for ${RUNS_EACH_WAY} each way, and the intervals narrow with each.`,
    );
  if (fit.wind !== null && Math.abs(fit.wind.value) > MOST_WIND)
    add(
      'windy',
      `The wind along the road was ${Math.abs(fit.wind.value).toFixed(1)} m/s: coast-down standards stop at ${MOST_WIND} m/s (ISO 10521-1, from memory), because gusts and yaw are in the drag area then.`,
    );
  const growth = fit.threeTerms?.growth;
  if (growth !== undefined && isTold(growth))
    add(
      'curved-residuals',
      `The rolling resistance seems to ${growth.value > 0 ? 'grow' : 'fall'} with speed, which CdA and Crr alone do not have: beside them stand three terms, f0, f1 and f2. Look at the residuals over speed; a gear or a brake that drags, or a speed with a zero error, looks like this.`,
    );
  const scatter = fit.rmsForce;
  for (const run of fit.runs)
    if (fit.runs.length > 4 && run.rmsForce > APART * scatter)
      add(
        'run-apart',
        `${run.name} leaves ${run.rmsForce.toFixed(1)} N against ${scatter.toFixed(1)} N of all: look at it.`,
      );
  for (const log of logs) {
    const gap = distanceGap(log);
    if (gap !== null && Math.abs(gap) > DISTANCE_GAP)
      add(
        'distance-against-speed',
        `${log.name}: the logged distance is ${toPct(Math.abs(gap)).toFixed(1)} % ${gap > 0 ? 'more' : 'less'} than the logged speed gives (mean ${toKmh(mean(log.speed)).toFixed(0)} km/h): one of the two has a scale error, and the drag area has twice that.`,
      );
  }
  return warnings;
}

function distanceGap({ distance, time, speed }: LoggedRun): number | null {
  if (distance === null) return null;
  const way = runningIntegral(time, speed).at(-1)!;
  return way > 0 ? (distance.at(-1)! - distance[0]!) / way - 1 : null;
}

const mean = (values: Float64Array): number => values.reduce((sum, x) => sum + x, 0) / values.length;
