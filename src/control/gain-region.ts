import { exp, log } from '../numeric/elementary.ts';
import type { SampledLoop } from './sampled-loop.ts';

/** A loop in which gains shall do. */
export interface RegionLoop {
  readonly loop: SampledLoop;
  /** Sample time [s]. */
  readonly sample: number;
  /** What a schedule makes of the gains at this loop's place; left out: nothing. */
  readonly factors?: { readonly proportional: number; readonly integral: number };
}

/** Gains with which every loop is stable and none exceeds a sensitivity. */
export interface GainRegion {
  /** Ranges of kp that have an integral gain, in order [1/(m/s)]. */
  readonly ranges: readonly { readonly low: number; readonly high: number }[];
  /** Greatest integral gain at a kp, up from 0 without a gap [1/(m/s)/s]; 0: none. */
  readonly greatestIntegral: (kp: number) => number;
}

/** Response of one loop to kp 1 alone and to ki 1 alone, by frequency. */
interface Path {
  readonly size: number;
  readonly proportional: Float64Array;
  readonly integral: Float64Array;
}

/** Slowest frequency that is looked at [rad/s]. */
const SLOWEST = 1e-4;
const POINTS_A_DECADE = 60;
const KP_A_DECADE = 40;
/** Of the gain at which the loop's own lags would set in. */
const LEAST_KP = 1e-5;
const DECADES_OF_KP = 7;
/** Bring the end of a range of kp to 1e-5. */
const HALVINGS = 13;

/**
 * The region of (kp, ki) in which |1 / (1 + L)| <= bound for every loop and frequency. With G = P at kp 1 and Q at ki 1,
 *
 *     |1 + kp P + ki Q|^2 >= 1 / bound^2
 *
 * is for a given kp a quadratic in ki, which forbids what lies between its roots: the greatest ki is the least of the
 * lower roots over all frequencies and loops, in closed form (after H. Panagopoulos, K. J. Astrom, T. Hagglund, Design of PID controllers based on
 * constrained optimisation, IEE Proc. Control Theory Appl. 149 (2002) 32-40, from memory). As the curve L does not pass
 * through -1 on the way from ki 0, a loop that is stable under P alone stays so; that it is, its poles tell once for
 * each range of kp.
 *
 * Good to the fineness of its grid of frequencies, about 1e-4 of the sensitivity.
 *
 * @param loops at least one
 * @param bound greatest sensitivity, > 1
 */
export function gainRegion(loops: readonly RegionLoop[], bound: number): GainRegion {
  const paths = loops.map(pathOf);
  const reach = 1 / (bound * bound);
  const greatestIntegral = (kp: number): number => {
    let greatest = Number.POSITIVE_INFINITY;
    for (const path of paths) {
      const { size, proportional, integral } = path;
      for (let i = 0; i < 2 * size; i += 2) {
        const re = 1 + kp * proportional[i]!;
        const im = kp * proportional[i + 1]!;
        const left = re * re + im * im - reach;
        if (left < 0) return 0;
        const qRe = integral[i]!;
        const qIm = integral[i + 1]!;
        const along = re * qRe + im * qIm;
        if (along >= 0) continue;
        const square = qRe * qRe + qIm * qIm;
        const rest = along * along - square * left;
        if (rest > 0) greatest = Math.min(greatest, left / (-along + Math.sqrt(rest)));
      }
    }
    return Number.isFinite(greatest) ? greatest : 0;
  };
  const ranges = rangesOf(loops, paths, greatestIntegral);
  return {
    ranges,
    greatestIntegral: (kp) =>
      ranges.some(({ low, high }) => kp >= low && kp <= high) ? greatestIntegral(kp) : 0,
  };
}

function pathOf({ loop, sample, factors }: RegionLoop): Path {
  const fastest = Math.PI / sample;
  const start = log(SLOWEST);
  const width = log(fastest) - start;
  const size = Math.max(2, Math.ceil((POINTS_A_DECADE * width) / log(10)) + 1);
  const path = { size, proportional: new Float64Array(2 * size), integral: new Float64Array(2 * size) };
  for (let i = 0; i < size; i++) {
    const frequency = i === size - 1 ? fastest : exp(start + (width * i) / (size - 1));
    const p = loop.openLoop({ kp: factors?.proportional ?? 1, ki: 0 }, frequency);
    const q = loop.openLoop({ kp: 0, ki: factors?.integral ?? 1 }, frequency);
    path.proportional[2 * i] = p.re;
    path.proportional[2 * i + 1] = p.im;
    path.integral[2 * i] = q.re;
    path.integral[2 * i + 1] = q.im;
  }
  return path;
}

/** Runs of a grid of kp with an integral gain, whose loops are all stable. */
function rangesOf(
  loops: readonly RegionLoop[],
  paths: readonly Path[],
  greatestIntegral: (kp: number) => number,
): GainRegion['ranges'] {
  const unit = paths.reduce((least, path) => Math.min(least, unitGain(path)), Number.POSITIVE_INFINITY);
  if (!Number.isFinite(unit)) return [];
  const ranges: { low: number; high: number }[] = [];
  let open = false;
  for (let i = 0; i <= DECADES_OF_KP * KP_A_DECADE; i++) {
    const kp = unit * LEAST_KP * exp((i / KP_A_DECADE) * log(10));
    const free = greatestIntegral(kp) > 0;
    if (free && open) ranges.at(-1)!.high = kp;
    else if (open) ranges.at(-1)!.high = lastFree(greatestIntegral, ranges.at(-1)!.high, kp);
    else if (free) ranges.push({ low: kp, high: kp });
    open = free;
  }
  return ranges.filter(({ low, high }) => {
    const kp = Math.sqrt(low * high);
    const ki = greatestIntegral(kp) / 2;
    return loops.every(({ loop, factors }) =>
      loop
        .poles({ kp: kp * (factors?.proportional ?? 1), ki: ki * (factors?.integral ?? 1) })
        .every((pole) => pole.re < 0),
    );
  });
}

/** The greatest kp that still has an integral gain, between one that has and one that has not. */
function lastFree(greatestIntegral: (kp: number) => number, free: number, beyond: number): number {
  let [low, high] = [free, beyond];
  for (let i = 0; i < HALVINGS; i++) {
    const middle = (low + high) / 2;
    if (greatestIntegral(middle) > 0) low = middle;
    else high = middle;
  }
  return low;
}

/** Factor that brings the loop of P alone to a gain of 1 where its phase passes -180 deg, or at the Nyquist frequency. */
function unitGain({ size, proportional }: Path): number {
  let greatest = 0;
  for (let i = 0; i < 2 * size; i += 2) {
    const passes = i > 0 && proportional[i + 1]! >= 0 !== proportional[i - 1]! >= 0;
    if ((passes || i === 2 * size - 2) && proportional[i]! < 0)
      greatest = Math.max(greatest, -proportional[i]!);
  }
  return greatest > 0 ? 1 / greatest : Number.POSITIVE_INFINITY;
}
