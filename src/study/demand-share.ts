/** Beyond this a share says no more [1]. */
const GREATEST_SHARE = 9.99;

/** Share of the range in use (Demand.share). */
export function demandShare(required: number, lower: number, upper: number): number {
  if (required >= 0) {
    // A drive whose least force pushes (a high idle) is asked for too little of it.
    if (required < lower) return -GREATEST_SHARE;
    return upper > 0 ? Math.min(GREATEST_SHARE, required / upper) : required > 0 ? GREATEST_SHARE : 0;
  }
  if (lower >= 0) return -GREATEST_SHARE;
  // An engine beyond its greatest speed: even full throttle holds back more than is asked for.
  if (required > upper) return GREATEST_SHARE;
  return Math.max(-GREATEST_SHARE, -required / lower);
}
