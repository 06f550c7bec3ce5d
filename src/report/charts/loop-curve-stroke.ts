import type { CurveLook } from '../model/loop-curves.ts';
import type { Canvas, LineLook } from './canvas.ts';

/** The line of a curve of a loop. */
export const strokeOf = ({ colour, dash, strong }: CurveLook, { paint }: Canvas): LineLook => ({
  stroke: colour === null ? paint.muted : paint.series[colour]!,
  width: strong ? 2.2 : 1.5,
  dash,
});
