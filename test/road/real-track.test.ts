import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { roadOfTrack } from '../../src/road/road-of-track.ts';
import { readTrack } from '../../src/track/read-track.ts';
import { expectClose } from '../compare.ts';
import { roadOptions } from './road-fixtures.ts';

describe('road of a recorded track', () => {
  // npm gpx-parse 0.10.4 (MIT), tests/integration/data/route-1.1.gpx: a recorded round of 21.5 km with a point every
  // second (about 2.8 m), elevations in whole metres, starting and ending at 8 m.
  const path = '../../node_modules/gpx-parse/tests/integration/data/route-1.1.gpx';
  const bytes = readFileSync(fileURLToPath(new URL(path, import.meta.url)));
  const track = readTrack({ name: 'round.gpx', bytes });
  const road = roadOfTrack(track, roadOptions());

  it('smooths whole metres over 300 m and takes none of their flicker for a spike', () => {
    expect(road.smoothing!.wavelength).toBe(300);
    expect(road.repairs.filter((r) => r.kind === 'elevation_spike')).toEqual([]);
    expectClose(road.smoothing!.residualSd, 0.35, 0.1, 'noise of rounding to a metre and drift [m]');
  });

  it('keeps the hills and drops the steps: net climb as recorded, gross climb between the hills above 3 m and all steps', () => {
    const z = track.elevation!;
    let all = 0;
    for (let i = 1; i < z.length; i++) all += Math.max(0, z[i]! - z[i - 1]!);
    // Climb with 3 m of hysteresis, counted on the raw elevations.
    let counted = 0;
    let low = z[0]!;
    let top = z[0]!;
    for (const height of z) {
      if (height > top) top = height;
      if (top - height >= 3 || height < low) {
        if (top - low >= 3) counted += top - low;
        low = height;
        top = height;
      }
    }
    if (top - low >= 3) counted += top - low;
    let climb = 0;
    for (let i = 1; i < road.size; i++) climb += Math.max(0, road.elevation[i]! - road.elevation[i - 1]!);
    expect(climb).toBeLessThan(all);
    expect(climb).toBeGreaterThan(counted * 0.85);
    expectClose(road.elevation[road.size - 1]! - road.elevation[0]!, z[z.length - 1]! - z[0]!, 0.5);
  });

  it('follows the recorded heights within what their rounding allows', () => {
    const apart = road.elevation.map((height, i) => Math.abs(height - road.rawElevation![i]!));
    expect(Math.max(...apart)).toBeLessThan(2);
    const within = apart.filter((a) => a <= 0.75).length / road.size;
    expect(within).toBeGreaterThan(0.95);
    expect(road.warnings.map((w) => w.code)).toEqual(['ends-uncertain']);
  });
});
