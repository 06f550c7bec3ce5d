import type { Html } from '../html.ts';
import type { CurveLook } from '../model/loop-curves.ts';
import { type Box, type Canvas, type LineLook, label } from './canvas.ts';

/** The line of a curve of a loop. */
export const strokeOf = ({ colour, dash, strong }: CurveLook, { paint }: Canvas): LineLook => ({
  stroke: colour === null ? paint.muted : paint.series[colour]!,
  width: strong ? 2.2 : 1.5,
  dash,
});

/** The quantity of a panel with its unit, level above it. */
export const panelName = (box: Box, name: string, { paint }: Canvas): Html =>
  label(box.left - 36, box.top - 9, name, { bold: true, fill: paint.ink });
