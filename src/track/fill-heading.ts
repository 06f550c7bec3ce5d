import { fromDeg } from '../units/convert.ts';
import { fillColumn } from './fill-column.ts';
import type { RawTrack } from './raw-track.ts';
import type { RepairLog } from './repair-log.ts';

const FULL_TURN = fromDeg(360);

/** As fillColumn, for angles: a hole is filled the short way round. In [0, 2 pi) [rad]. */
export function fillHeading(
  raw: RawTrack,
  heading: Float64Array,
  kept: Int32Array,
  distance: Float64Array,
  log: RepairLog,
): Float64Array {
  const unwound = heading.slice();
  let before = Number.NaN;
  for (const i of kept) {
    const angle = heading[i]!;
    if (!Number.isFinite(angle)) continue;
    unwound[i] = Number.isNaN(before) ? angle : angle - FULL_TURN * Math.round((angle - before) / FULL_TURN);
    before = unwound[i]!;
  }
  const column = { name: 'heading', values: unwound, usable: Number.isFinite };
  return fillColumn(raw, column, kept, distance, log).map((angle) => {
    const turned = angle - FULL_TURN * Math.floor(angle / FULL_TURN);
    return turned < FULL_TURN ? turned : 0;
  });
}
