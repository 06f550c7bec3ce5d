/** A stretch in which the curve of the road allows no more than a speed. Horizontal distances along the driven road [m]. */
export interface Bend {
  readonly from: number;
  readonly to: number;
  /** Greatest curvature of the plan in it, without its sign [1/m], its sign (positive: to the right), and where. */
  readonly curvature: number;
  readonly side: 'left' | 'right';
  readonly sharpestAt: number;
  /** sqrt(greatest lateral acceleration / curvature), true [m/s]. */
  readonly speed: number;
}
