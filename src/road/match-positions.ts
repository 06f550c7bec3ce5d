import { distanceBetween } from '../track/geodesic.ts';
import { flatMapOf, type PlanLine } from '../track/plan-geometry.ts';

/** Farther from the road a position is not on it [m]: lanes, verge, and a receiver's usual error. */
export const ON_ROAD = 30;
/** S.d. of a position about the road, and scale of how the way along it differs from the leg of two positions [m]. */
const SIGMA = 5;
const BETA = 5;
/** Squares in which the road's pieces are looked up [m]. */
const SQUARE = 64;
/** A foot this far beyond an end of the road is beyond it [m]. */
const BEYOND = 1;
/** Pieces of the road a position may be near to and be looked at. */
const MOST = 16;

/** A line on the ground with its distances, such as a road. */
export interface Line {
  readonly size: number;
  readonly distance: Float64Array;
  readonly latitudeDeg: Float64Array;
  readonly longitudeDeg: Float64Array;
  /** Where it turns round [m]; null: it does not. */
  readonly turnsAt: number | null;
}

/** Where positions lie along a road. */
export interface Matched {
  /** Horizontal distance along the road [m]; NaN: not on the road. */
  readonly along: Float64Array;
  /** Distance from the road [m]; NaN: not on the road. */
  readonly off: Float64Array;
}

/**
 * Finds where the positions of a ride lie along a road: the most likely sequence of feet on it, by a hidden Markov model
 * over the feet near each position (P. Newson and J. Krumm, "Hidden Markov Map Matching Through Noise and Sparseness",
 * ACM SIGSPATIAL 2009, from memory): a foot costs its offset squared, a step costs how much the way along the road differs
 * from the leg between the positions. So a hairpin, a road that meets itself, and a road driven out and back are told
 * apart, and a ride against the road goes backwards along it.
 *
 * @param line of the road, distances not decreasing
 * @param latitudeDeg @param longitudeDeg positions in order of time [degree]
 * @returns one place a position; none for a position farther than 30 m from the road or beyond its ends
 */
export function matchPositions(line: Line, latitudeDeg: Float64Array, longitudeDeg: Float64Array): Matched {
  const size = latitudeDeg.length;
  const onMap = flatMapOf(line.latitudeDeg, line.longitudeDeg);
  const pieces = new Pieces(line, onMap(line.latitudeDeg, line.longitudeDeg));
  const { x, y } = onMap(latitudeDeg, longitudeDeg);
  const along = new Float64Array(size).fill(Number.NaN);
  const off = new Float64Array(size).fill(Number.NaN);
  // Feet of all positions one after the other; those of position i from first[i] on, and for each the best foot before it.
  const feet: Foot[] = [];
  const [owner, before, cost]: [number[], number[], number[]] = [[], [], []];
  let last = { from: 0, to: 0, position: -1 };
  for (let i = 0; i < size; i++) {
    const near = pieces.feetNear(x[i]!, y[i]!);
    if (near.length === 0) continue;
    const from = feet.length;
    const leg =
      last.position < 0
        ? 0
        : distanceBetween(
            latitudeDeg[last.position]!,
            longitudeDeg[last.position]!,
            latitudeDeg[i]!,
            longitudeDeg[i]!,
          );
    for (const foot of near) {
      let [least, best] = [last.position < 0 ? 0 : Number.POSITIVE_INFINITY, -1];
      for (let k = last.from; k < last.to; k++) {
        const step = cost[k]! + Math.abs(foot.along - feet[k]!.along - leg) / BETA;
        if (step < least) [least, best] = [step, k];
      }
      feet.push(foot);
      before.push(best);
      owner.push(i);
      cost.push(least + (foot.off * foot.off) / (2 * SIGMA * SIGMA));
    }
    last = { from, to: feet.length, position: i };
  }
  let end = -1;
  for (let k = last.from; k < last.to; k++) if (end < 0 || cost[k]! < cost[end]!) end = k;
  for (let k = end; k >= 0; k = before[k]!) {
    along[owner[k]!] = feet[k]!.along;
    off[owner[k]!] = feet[k]!.off;
  }
  return { along, off };
}

/** The nearest place of a part of the road. */
interface Foot {
  readonly along: number;
  readonly off: number;
}
const NOWHERE: Foot = { along: 0, off: Number.POSITIVE_INFINITY };

/** The straight pieces of a road on its map, found by place. */
class Pieces {
  private readonly line: Line;
  private readonly plan: PlanLine;
  /** Pieces near each square, in order along the road. */
  private readonly squares = new Map<number, number[]>();

  constructor(line: Line, plan: PlanLine) {
    this.line = line;
    this.plan = plan;
    const { x, y } = plan;
    const span = (a: number, b: number): readonly [number, number] => [
      squareOf(Math.min(a, b) - ON_ROAD),
      squareOf(Math.max(a, b) + ON_ROAD),
    ];
    for (let k = 0; k + 1 < line.size; k++) {
      const [west, east] = span(x[k]!, x[k + 1]!);
      const [south, north] = span(y[k]!, y[k + 1]!);
      for (let i = west; i <= east; i++)
        for (let j = south; j <= north; j++) {
          const list = this.squares.get(keyOf(i, j));
          if (list === undefined) this.squares.set(keyOf(i, j), [k]);
          else list.push(k);
        }
    }
  }

  /** The nearest place of the road within 30 m, once for each time that the road comes near. */
  feetNear(x: number, y: number): readonly Foot[] {
    const found: Foot[] = [];
    let [piece, best, last, leaving] = [-2, NOWHERE, NOWHERE, false];
    for (const k of this.squares.get(keyOf(squareOf(x), squareOf(y))) ?? []) {
      const foot = this.footOn(k, x, y);
      // After a piece left out, or where the road comes nearer again, it is another time.
      if (k !== piece + 1 || (leaving && foot.off < last.off)) {
        if (best.off <= ON_ROAD) found.push(best);
        [best, leaving] = [foot, false];
      } else if (foot.off < best.off) best = foot;
      else leaving = true;
      [piece, last] = [k, foot];
    }
    if (best.off <= ON_ROAD) found.push(best);
    const there = found.filter((foot) => !Number.isNaN(foot.along));
    return there.length <= MOST ? there : there.sort((a, b) => a.off - b.off).slice(0, MOST);
  }

  /** Nearest place on a piece; NaN along the road where that lies beyond an end, or beyond the turn. */
  private footOn(k: number, px: number, py: number): Foot {
    const { x, y } = this.plan;
    const { distance, size, turnsAt } = this.line;
    const [ax, ay] = [x[k]!, y[k]!];
    const [dx, dy] = [x[k + 1]! - ax, y[k + 1]! - ay];
    const square = dx * dx + dy * dy;
    if (!(square > 0)) return NOWHERE;
    const share = ((px - ax) * dx + (py - ay) * dy) / square;
    const part = Math.min(1, Math.max(0, share));
    const slack = BEYOND / Math.sqrt(square);
    const atStart = k === 0 || distance[k] === turnsAt;
    const atEnd = k === size - 2 || distance[k + 1] === turnsAt;
    const beyond = (atStart && share < -slack) || (atEnd && share > 1 + slack);
    const [ex, ey] = [px - ax - part * dx, py - ay - part * dy];
    return {
      along: beyond ? Number.NaN : distance[k]! + part * (distance[k + 1]! - distance[k]!),
      off: Math.sqrt(ex * ex + ey * ey),
    };
  }
}

const squareOf = (at: number): number => Math.floor(at / SQUARE);
/** One number for a square; squares farther apart than the earth is round may share it. */
const keyOf = (i: number, j: number): number => i * 2_000_003 + j;
