import { readdirSync, readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { readTrack } from '../../src/track/read-track.ts';
import type { Track } from '../../src/track/track.ts';

const GPX = `<?xml version="1.0" encoding="UTF-8"?>
<gpx version="1.1" creator="test" xmlns="http://www.topografix.com/GPX/1/1"><trk><name>T</name><trkseg>
${Array.from(
  { length: 8 },
  (_, i) =>
    `<trkpt lat="5${i}.00${i}" lon="0.5"><ele>${i}.5</ele><time>2024-05-10T07:20:0${i}Z</time></trkpt>`,
)
  .join('\n')
  .replace(/lat="5\d/g, 'lat="51')}
</trkseg></trk></gpx>`;
const CSV = `distance_m;elevation_m;grade_pct;time_s\n${Array.from({ length: 12 }, (_, i) => `${i * 60};${i},5;-1;${i * 4}`).join('\n')}`;
const JSON_TEXT = JSON.stringify({
  type: 'Feature',
  properties: { name: 'T' },
  geometry: { type: 'LineString', coordinates: Array.from({ length: 8 }, (_, i) => [0.5, 51 + i * 1e-3, i]) },
});

/** Every number of a track is finite, every column as long as it says, distances increase, repairs lie on it. */
function expectSound(track: Track): void {
  const { size, distance, repairs, name, format, ...columns } = track;
  expect([typeof name === 'string' || name === null, ['gpx', 'csv', 'geojson'].includes(format)]).toEqual([
    true,
    true,
  ]);
  // Two rows of a table of distances are a straight road; positions need three.
  expect(size).toBeGreaterThanOrEqual(format === 'csv' ? 2 : 3);
  for (const [key, column] of Object.entries({ distance, ...columns })) {
    if (column === null) continue;
    expect(column.length, key).toBe(size);
    expect(column.every(Number.isFinite), key).toBe(true);
  }
  expect(distance[0]).toBe(0);
  expect(distance.every((d, i) => i === 0 || d > distance[i - 1]!)).toBe(true);
  for (const repair of repairs) {
    expect(repair.from >= 0 && repair.from <= repair.to && repair.to <= distance.at(-1)!).toBe(true);
    expect(repair.message).not.toMatch(/NaN|undefined/);
  }
}

describe('a damaged file', () => {
  it.each([
    ['a.gpx', GPX],
    ['a.csv', CSV],
    ['a.geojson', JSON_TEXT],
  ])('gives a sound track or says what is wrong, never anything else: %s', (name, text) => {
    const sound = new TextEncoder().encode(text);
    expectSound(readTrack({ name, bytes: sound }));
    const place = fc.nat({ max: sound.length - 1 });
    const digits = [...sound.keys()].filter((i) => sound[i]! >= 0x30 && sound[i]! <= 0x39);
    const otherDigit = fc.record({
      kind: fc.constant('change' as const),
      at: fc.constantFrom(...digits),
      byte: fc.integer({ min: 0x30, max: 0x39 }),
    });
    const damage = fc.oneof(
      { arbitrary: otherDigit, weight: 4 },
      fc.record({ kind: fc.constant('cut' as const), at: place, byte: fc.constant(0) }),
      fc.record({ kind: fc.constant('change' as const), at: place, byte: fc.integer({ min: 0, max: 255 }) }),
      fc.record({
        kind: fc.constant('change' as const),
        at: place,
        byte: fc.constantFrom(...'0129.,-;&<>"eN\n[]{}'.split('').map((c) => c.charCodeAt(0))),
      }),
      fc.record({ kind: fc.constant('drop' as const), at: place, byte: fc.integer({ min: 1, max: 12 }) }),
    );
    let refused = 0;
    let read = 0;
    fc.assert(
      fc.property(fc.array(damage, { minLength: 1, maxLength: 2 }), (damages) => {
        let bytes = [...sound];
        for (const { kind, at, byte } of damages) {
          if (kind === 'cut') bytes = bytes.slice(0, at);
          else if (kind === 'drop') bytes.splice(at, byte);
          else if (at < bytes.length) bytes[at] = byte;
        }
        try {
          expectSound(readTrack({ name, bytes: Uint8Array.from(bytes) }));
          read++;
        } catch (error) {
          if (!(error instanceof InputError)) throw error;
          expect(error.message.startsWith(name)).toBe(true);
          expect(error.message).not.toMatch(/\bundefined\b(?! entity)|\[object/);
          refused++;
        }
      }),
      { seed: 20260, numRuns: 1000 },
    );
    // Both ways were walked.
    expect([refused > 100, read > 50], `${refused} refused, ${read} read`).toEqual([true, true]);
  });

  it('that is repaired is sound', () => {
    const folder = new URL('../broken/repaired-tracks/', import.meta.url);
    for (const name of readdirSync(folder))
      expectSound(readTrack({ name, bytes: readFileSync(new URL(name, folder)) }));
  });
});
