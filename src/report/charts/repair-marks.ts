import type { RepairKind } from '../../track/track.ts';
import { type Html, html } from '../html.ts';
import type { Paint } from '../paint.ts';
import { tenth } from './canvas.ts';

/** Words for each kind of repair, and its mark around (0, 0). */
export const REPAIR_KINDS: Readonly<Record<RepairKind, { readonly words: string; readonly mark: string }>> = {
  elevation_spike: { words: 'elevation spike', mark: 'M-4,4L0,-4L4,4Z' },
  gap: { words: 'gap bridged', mark: 'M-4,-4H-1V4H-4M4,-4H1V4H4' },
  position_jump: { words: 'position jump', mark: 'M0,-5L4,0L0,5L-4,0Z' },
  missing_elevation: { words: 'elevation filled in', mark: 'M-4,-4H4V4H-4Z' },
  doubled_point: { words: 'doubled point', mark: 'M-4,-1.5H4M-4,1.5H4' },
  reversal: { words: 'reversal left out', mark: 'M4,-4L-3,0L4,4M-4,-4V4' },
  segment_joined: { words: 'segments joined', mark: 'M-5,0H5M0,-4V4' },
  non_finite: { words: 'not a number, left out', mark: 'M-4,-4L4,4M-4,4L4,-4' },
};

export const repairMark = (x: number, y: number, kind: RepairKind, paint: Paint): Html =>
  html`<path transform="translate(${tenth(x)},${tenth(y)})" d="${REPAIR_KINDS[kind].mark}" fill="${paint.page}" stroke="${paint.warn}" stroke-width="1.5"/>`;

/** A mark on its own, for a key. */
export const repairKey = (kind: RepairKind, paint: Paint): Html =>
  html`<svg class="key" viewBox="-7 -7 14 14" width="14" height="14" aria-hidden="true">${repairMark(0, 0, kind, paint)}</svg>`;
