import type { Road } from '../../road/road.ts';
import type { Demand } from '../../study/findings.ts';

/** Looks up the share of demand along a road at growing places: distance [m], or time [s] for a road along time. */
export class ShareAlong {
  private readonly knots: Float64Array;
  private readonly share: Float64Array;
  private readonly size: number;
  private cursor = 0;

  constructor(road: Road, demand: Demand) {
    this.knots = road.along === 'time' ? road.station : road.distance;
    this.share = demand.share;
    this.size = road.size;
  }

  /** Linear between knots, the ends held; at a step, what comes after it. Places must not decrease from call to call. */
  at(place: number): number {
    const { knots, share, size } = this;
    while (this.cursor < size - 2 && knots[this.cursor + 1]! <= place) this.cursor++;
    const i = this.cursor;
    if (size < 2) return share[0] ?? 0;
    const width = knots[i + 1]! - knots[i]!;
    if (!(width > 0)) return share[i + 1]!;
    const t = Math.min(1, Math.max(0, (place - knots[i]!) / width));
    return share[i]! + t * (share[i + 1]! - share[i]!);
  }

  /** The share of greatest magnitude over [from, to]; the stretches of successive calls must not go back. */
  extreme(from: number, to: number): number {
    let worst = this.at(from);
    const { knots, share, size } = this;
    for (let k = this.cursor + 1; k < size && knots[k]! <= to; k++)
      if (Math.abs(share[k]!) > Math.abs(worst)) worst = share[k]!;
    const end = this.at(to);
    return Math.abs(end) > Math.abs(worst) ? end : worst;
  }
}
