/**
 * Share of the force that heat leaves (see Heating): all of it up to `onset`, `least` from a heat of 1 on, in between on
 * a straight line.
 */
export function heatShare(heat: number, onset: number, least: number): number {
  if (heat <= onset) return 1;
  return heat >= 1 ? least : 1 - ((1 - least) * (heat - onset)) / (1 - onset);
}
