/** Fixes of a ride that lie on the road, in order of time. Equal lengths, SI. */
export interface Fixes {
  readonly time: Float64Array;
  /** Distance along the road [m]. */
  readonly along: Float64Array;
  /** As the log has them; NaN: it says none. */
  readonly speed: Float64Array;
  readonly throttle: Float64Array;
  /** Fixes off the road between the one before and this one. */
  readonly missed: Float64Array;
}

/** A ride that goes back farther than this has turned for good [m]; one that goes back less comes again. */
const TURNED = 200;

/** Fixes first to end - 1. */
export const part = (fixes: Fixes, first: number, end: number): Fixes => ({
  time: fixes.time.subarray(first, end),
  along: fixes.along.subarray(first, end),
  speed: fixes.speed.subarray(first, end),
  throttle: fixes.throttle.subarray(first, end),
  missed: fixes.missed.subarray(first, end),
});

/**
 * The longest passage forward over the road: from its lowest place to its highest, never more than 200 m back. A ride that
 * comes over the road several times, or goes out and back where only one way is driven, has several; of equal ones the first.
 *
 * @returns fixes first to end - 1; empty where there are none
 */
export function longestPassage(along: Float64Array): { readonly first: number; readonly end: number } {
  let best = { first: 0, end: 0, length: -1 };
  let [first, highest, at] = [0, along[0] ?? 0, 0];
  const close = (): void => {
    const length = highest - along[first]!;
    if (length > best.length) best = { first, end: at + 1, length };
  };
  for (let i = 1; i < along.length; i++) {
    const x = along[i]!;
    if (x < highest - TURNED || x < along[first]!) {
      close();
      [first, highest, at] = [i, x, i];
    } else if (x >= highest) [highest, at] = [x, i];
  }
  if (along.length > 0) close();
  return { first: best.first, end: best.end };
}

/** Ways forth and back along the road [m]. */
export function backwards(along: Float64Array): { readonly forth: number; readonly back: number } {
  let [forth, back] = [0, 0];
  for (let i = 1; i < along.length; i++) {
    const step = along[i]! - along[i - 1]!;
    if (step > 0) forth += step;
    else back -= step;
  }
  return { forth, back };
}
