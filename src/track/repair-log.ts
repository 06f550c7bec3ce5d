import { toKm } from '../units/convert.ts';
import type { RawTrack } from './raw-track.ts';
import type { Repair, RepairKind } from './track.ts';

interface Entry {
  readonly kind: RepairKind;
  readonly first: number;
  readonly last: number;
  readonly points: number;
  readonly message: string;
  readonly at: number | null;
}

/** Collects repairs by index of raw point while distances are not known yet, and places them when they are. */
export class RepairLog {
  readonly #raw: RawTrack;
  readonly #entries: Entry[] = [];

  constructor(raw: RawTrack) {
    this.#raw = raw;
  }

  /**
   * @param first first and
   * @param last last raw point of the stretch
   * @param points how many points of the file were touched
   * @param message a sentence without its place in front and without full stop
   * @param at the kept raw point that the whole stretch was merged into; null: from `first` to `last`
   */
  add(
    kind: RepairKind,
    first: number,
    last: number,
    points: number,
    message: string,
    at: number | null = null,
  ): void {
    this.#entries.push({ kind, first, last, points, message, at });
  }

  /**
   * @param kept raw indices of the points that stayed, ascending
   * @param distance their distances [m]
   * @returns the repairs along the way; a point that was left out stands where the last kept one before it is
   */
  place(kept: Int32Array, distance: Float64Array): Repair[] {
    const way = new Float64Array(this.#raw.size);
    for (let k = 0; k < kept.length; k++) {
      const end = k + 1 < kept.length ? kept[k + 1]! : this.#raw.size;
      way.fill(distance[k]!, kept[k]!, end);
    }
    return this.#entries
      .map(({ kind, first, last, points, message, at }): Repair => {
        const [from, to] = [way[at ?? first]!, way[at ?? last]!];
        const line = this.#raw.line?.[first] ?? null;
        const km = from === to ? `At km ${km3(from)}` : `From km ${km3(from)} to km ${km3(to)}`;
        const where = line === null ? km : `${km} (line ${line})`;
        return { kind, from, to, points, line, message: `${where}: ${message}.` };
      })
      .sort((a, b) => a.from - b.from);
  }
}

const km3 = (distance: number): string => toKm(distance).toFixed(3);

/** `1 point`, `2 points` */
export const countPoints = (n: number): string => (n === 1 ? '1 point' : `${n} points`);
