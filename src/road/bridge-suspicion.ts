import { medianOf } from '../numeric/running-median.ts';
import type { Warning } from '../problems/warning.ts';
import { toKm, toPct } from '../units/convert.ts';

/**
 * Strongest change of grade along the road that is believed [1/m]: three times that of the shortest vertical curves for
 * stopping sight at 80 km/h, crest 26 m/% and sag 30 m/% (AASHTO, metric table, from memory).
 */
const CREST_LIMIT = 3 / 2600;
const SAG_LIMIT = 3 / 3000;
/** Bridges and tunnels are looked for at this smoothing wavelength [m] or the road's own, if that is shorter. */
export const SUSPICION_WAVELENGTH = 200;
/** The swing of the grade must be this many standard deviations of its noise. */
const SIGNIFICANCE = 7;
/** The grade must come back on both sides by this share of the swing, within this distance [m]. */
const RETURN = 1 / 3;
const REACH = 300;

/**
 * Looks for places where the source follows a valley under a bridge or the hill above a tunnel: the grade swings from
 * one side to the other faster than roads do, and comes back before and after, so that the elevation has a dip or a
 * hump on an otherwise steady line. A real valley, down and up again, does not come back and is not named.
 *
 * @param fine grade at uniform knots, smoothed at `SUSPICION_WAVELENGTH` or less
 * @param smooth grade at the same knots as the road has it, and its s.d.
 * @param grid spacing of the knots [m]
 */
export function suspectBridges(
  fine: Float64Array,
  smooth: Float64Array,
  gradeSd: Float64Array,
  grid: number,
): Warning[] {
  const apart = fine.map((g, i) => Math.abs(g - smooth[i]!));
  const noise = Math.max(1.4826 * medianOf(apart), medianOf(gradeSd));
  const dips = swings(fine, grid, SAG_LIMIT, noise);
  const humps = swings(
    fine.map((g) => -g),
    grid,
    CREST_LIMIT,
    noise,
  );
  const all = [
    ...dips.map((swing) => ({ ...swing, dip: true })),
    ...humps.map((swing) => ({ ...swing, dip: false })),
  ].sort((a, b) => b.swing - a.swing);
  // The flanks of a dip look like humps: of places that overlap only the strongest is named.
  const named: typeof all = [];
  for (const place of all)
    if (named.every((other) => place.to <= other.from || place.from >= other.to)) named.push(place);
  return named.sort((a, b) => a.from - b.from).map((place) => warningOf(place, place.dip, grid));
}

function warningOf(place: Swing, dip: boolean, grid: number): Warning {
  const from = place.from * grid;
  const to = place.to * grid;
  const what = dip
    ? 'dip, as where a source follows the valley under a bridge'
    : 'hump, as where a source follows the hill above a tunnel';
  return {
    code: dip ? 'bridge-suspected' : 'tunnel-suspected',
    message: `The elevation has a ${what}, between km ${toKm(from).toFixed(2)} and ${toKm(to).toFixed(2)}: the grade swings by ${toPct(place.swing).toFixed(0)} % within ${(place.within * grid).toFixed(0)} m. If it is not in the road, mask that stretch.`,
    from,
    to,
  };
}

interface Swing {
  readonly from: number;
  readonly to: number;
  readonly swing: number;
  readonly within: number;
}

/** Rises of the grade that are steep, large, and preceded and followed by falls. */
function swings(grade: Float64Array, grid: number, limit: number, noise: number): Swing[] {
  const found: Swing[] = [];
  const last = grade.length - 1;
  const reach = Math.max(1, Math.round(REACH / grid));
  for (let i = 0; i < last; i++) {
    if (grade[i + 1]! - grade[i]! <= limit * grid) continue;
    let low = i;
    while (low > 0 && grade[low - 1]! < grade[low]!) low--;
    let high = i + 1;
    while (high < last && grade[high + 1]! > grade[high]!) high++;
    const swing = grade[high]! - grade[low]!;
    let from = low;
    while (from > 0 && low - from < reach && grade[from - 1]! > grade[from]!) from--;
    let to = high;
    while (to < last && to - high < reach && grade[to + 1]! < grade[to]!) to++;
    const before = grade[from]! - grade[low]!;
    const after = grade[high]! - grade[to]!;
    if (swing > SIGNIFICANCE * noise && before > RETURN * swing && after > RETURN * swing)
      found.push({ from, to, swing, within: high - low });
    i = high - 1;
  }
  return found;
}
