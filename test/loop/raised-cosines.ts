/** Hills of the reference solutions: grade = peak/2 (1 - cos(2 pi (s - start) / length)) inside each. */
export interface WrittenHill {
  readonly start_m: number;
  readonly length_m: number;
  readonly peak_grade: number;
}

/** Grade of a road of such hills by distance along the slope [m]. */
export function raisedCosines(hills: readonly WrittenHill[]): (station: number) => number {
  return (s) => {
    let grade = 0;
    for (const { start_m, length_m, peak_grade } of hills) {
      if (s <= start_m || s >= start_m + length_m) continue;
      grade += 0.5 * peak_grade * (1 - Math.cos((2 * Math.PI * (s - start_m)) / length_m));
    }
    return grade;
  };
}

/** Feet of the hills, where the curvature of the grade jumps [m]. */
export function feetOf(hills: readonly WrittenHill[]): number[] {
  const feet = hills.flatMap(({ start_m, length_m }) => [start_m, start_m + length_m]);
  return [...new Set(feet)].sort((a, b) => a - b);
}
