import { type LeastSquares, leastSquares } from '../numeric/least-squares.ts';
import { type ClusteredErrors, clusteredErrors } from './clustered-errors.ts';
import type { CoastDownFit, CoastRun, CoastSetting, FittedRun, ThreeTermFit } from './coast-down.ts';
import { type AirRows, airRows, type CoastRows, coastRows } from './coast-rows.ts';
import { type Estimate, estimateOf } from './estimate.ts';

const MOST_ROUNDS = 30;
/** A change of the wind that is none [m/s]. */
const SETTLED = 1e-9;

/**
 * Drag area and rolling coefficient of a coast-down, together, by linear least squares over the balance of energy
 *
 *     m_e (v1^2 - v2^2) / 2 - m g dz = Crr m g ds cos(theta) + CdA 1/2 rho int va ax ds
 *
 * between the pieces of all runs (the integral form of SAE J1263 and ISO 10521-1, from memory; G. D. Thompson, The Vehicle
 * Road Load Problem, US EPA, for the law of motion). Where runs went both ways, a steady wind along the road and a
 * steady grade that were not logged are estimated as well, from the difference between the ways; the wind by
 * Gauss-Newton steps, because its square stays behind in the mean of both ways. Standard errors take each run as one
 * independent piece of evidence: see `clusteredErrors`.
 *
 * @param runs that `coastDownFaults` has nothing against
 * @returns null where the data do not determine the unknowns, or the wind does not settle
 */
export function fitCoastDown(runs: readonly CoastRun[], setting: CoastSetting): CoastDownFit | null {
  const estimatesWind = runs.some(({ headwind }) => headwind === null);
  const estimatesGrade = runs.some(({ elevation, grade }) => elevation === null && grade === null);
  const ofRuns = runs.map((run) => coastRows(run, setting));
  const rowsAt = (along: number): Pooled =>
    pooled(
      ofRuns,
      runs.map((run) => airRows(run, setting, along)),
    );
  let wind = 0;
  let rows = rowsAt(wind);
  let fit: LeastSquares;
  for (let round = 0; ; round++) {
    fit = leastSquares(columnsOf(rows, estimatesWind, estimatesGrade), rows.lost);
    if (fit.status === 'dependent' || round === MOST_ROUNDS) return null;
    const step = estimatesWind ? fit.coefficients[2]! / fit.coefficients[1]! : 0;
    if (Math.abs(step) <= SETTLED) break;
    wind += step;
    rows = rowsAt(wind);
  }
  const columns = columnsOf(rows, estimatesWind, estimatesGrade);
  const apart = estimatesWind || estimatesGrade;
  const kinds = Int32Array.from(runs, ({ direction }) => (apart && direction === 'back' ? 1 : 0));
  const errors = clusteredErrors(columns, fit, rows.run, kinds);
  const [crr, cda] = fit.coefficients as unknown as readonly [number, number];
  const { inverse } = fit;
  return {
    setting,
    crr: estimateAt(0, crr, errors),
    cda: estimateAt(1, cda, errors),
    correlation: inverse[0]![1]! / Math.sqrt(inverse[0]![0]! * inverse[1]![1]!),
    wind: estimatesWind ? estimateAt(2, wind, errors, cda) : null,
    grade: estimatesGrade
      ? estimateAt(columns.length - 1, fit.coefficients[columns.length - 1]!, errors)
      : null,
    threeTerms: threeTermsOf(columns, rows, kinds),
    degrees: errors.degrees[1]!,
    ...residualsOf(runs, rows, fit, calmAir(runs, setting), { crr, cda }),
  };
}

interface Pooled extends CoastRows, AirRows {
  /** Index of the run of each row. */
  readonly run: Int32Array;
}

function pooled(runs: readonly CoastRows[], air: readonly AirRows[]): Pooled {
  const all = (name: keyof CoastRows): Float64Array => joined(runs.map((rows) => rows[name]));
  return {
    lost: all('lost'),
    rolling: all('rolling'),
    rollingGrowth: all('rollingGrowth'),
    slope: all('slope'),
    way: all('way'),
    speed: all('speed'),
    air: joined(air.map((rows) => rows.air)),
    airByWind: joined(air.map((rows) => rows.airByWind)),
    run: Int32Array.from(runs.flatMap(({ way }, i) => Array.from(way, () => i))),
  };
}

function joined(parts: readonly Float64Array[]): Float64Array {
  const whole = new Float64Array(parts.reduce((sum, { length }) => sum + length, 0));
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}

/** What the air would take from a drag area of 1 m2 if there were no wind [J/m2]. */
const calmAir = (runs: readonly CoastRun[], setting: CoastSetting): Float64Array =>
  joined(runs.map((run) => airRows({ ...run, headwind: null }, setting, 0).air));

const columnsOf = (rows: Pooled, wind: boolean, grade: boolean): readonly Float64Array[] => [
  rows.rolling,
  rows.air,
  ...(wind ? [rows.airByWind] : []),
  ...(grade ? [rows.slope] : []),
];

function estimateAt(
  i: number,
  value: number,
  { covariance, degrees }: ClusteredErrors,
  divisor = 1,
): Estimate {
  return estimateOf(value, Math.sqrt(covariance[i]![i]!) / Math.abs(divisor), degrees[i]!);
}

/** The same fit with a rolling coefficient that grows with speed: where its growth is nothing, the model is enough. */
function threeTermsOf(
  columns: readonly Float64Array[],
  rows: Pooled,
  kinds: Int32Array,
): ThreeTermFit | null {
  const more = [...columns, rows.rollingGrowth];
  const fit = leastSquares(more, rows.lost);
  if (fit.status === 'dependent') return null;
  const errors = clusteredErrors(more, fit, rows.run, kinds);
  const at = (i: number): Estimate => estimateAt(i, fit.coefficients[i]!, errors);
  return { crr: at(0), cda: at(1), growth: at(columns.length) };
}

function residualsOf(
  runs: readonly CoastRun[],
  rows: Pooled,
  fit: LeastSquares,
  calmAir: Float64Array,
  { crr, cda }: { readonly crr: number; readonly cda: number },
): Pick<CoastDownFit, 'runs' | 'residuals' | 'rmsForce'> {
  const residual = fit.residuals.map((energy, i) => energy / rows.way[i]!);
  // What the coefficients give in still air on the level.
  const calm = rows.way.map((way, i) => (crr * rows.rolling[i]! + cda * calmAir[i]!) / way);
  return {
    residuals: {
      run: rows.run,
      speed: rows.speed,
      force: calm.map((force, i) => force + residual[i]!),
      residual,
    },
    rmsForce: rootMeanSquare([...residual]),
    runs: runs.map((run, r): FittedRun => {
      const own = [...residual].filter((_, i) => rows.run[i] === r);
      const { time, speed } = run;
      return {
        name: run.name,
        direction: run.direction,
        from: speed.reduce((a, b) => Math.max(a, b)),
        to: speed.reduce((a, b) => Math.min(a, b)),
        duration: time[time.length - 1]! - time[0]!,
        samples: time.length,
        rmsForce: rootMeanSquare(own),
        meanForce: own.reduce((sum, force) => sum + force, 0) / own.length,
      };
    }),
  };
}

const rootMeanSquare = (values: readonly number[]): number =>
  Math.sqrt(values.reduce((sum, x) => sum + x * x, 0) / values.length);
