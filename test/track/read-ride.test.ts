import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { InputError } from '../../src/problems/input-error.ts';
import { type RideLog, readRide } from '../../src/track/read-ride.ts';
import { expectClose } from '../compare.ts';

const read = (text: string, name = 'ride.csv'): RideLog =>
  readRide({ name, bytes: new TextEncoder().encode(text) });
/** Rows one second and 20 m apart, with changes. */
const csv = (change: (rows: string[]) => void = () => {}, count = 12): string => {
  const rows = Array.from({ length: count }, (_, i) => `${100 + i},${i * 20}`);
  change(rows);
  return `time_s,distance_m\n${rows.join('\n')}\n`;
};

describe('a logged ride', () => {
  it('comes in SI, time from its first point, without any height', () => {
    const rows = Array.from(
      { length: 10 },
      (_, i) => `${5 + i},51.9,${-14.6 + i / 5000},${36 + i},${10 * i}`,
    );
    const ride = read(`time_s,lat_deg,lon_deg,speed_kmh,throttle_pct\n${rows.join('\n')}\n`);
    expectClose(ride.time, [0, 1, 2, 3, 4, 5, 6, 7, 8, 9], 0);
    expectClose(ride.speed!.subarray(0, 2), [10, 37 / 3.6], 1e-12);
    expectClose(ride.throttle!, [0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9], 1e-12);
    expect([ride.distance, ride.leftOut, ride.format]).toEqual([null, 0, 'csv']);
  });

  it('may have empty cells of speed and throttle, which stay unknown', () => {
    const rows = Array.from(
      { length: 10 },
      (_, i) => `${i},${20 * i},${i === 4 ? '' : 40},${i === 5 ? '' : 30}`,
    );
    const ride = read(`time_s,distance_m,speed_kmh,throttle_pct\n${rows.join('\n')}\n`);
    expect([ride.speed![4], ride.throttle![5]]).toEqual([Number.NaN, Number.NaN]);
    expectClose(ride.speed![5]!, 40 / 3.6, 1e-12);
  });

  it('has no speed or throttle where the column is empty throughout', () => {
    const rows = Array.from({ length: 10 }, (_, i) => `${i},${20 * i},,nan`);
    const ride = read(`time_s,distance_m,speed_kmh,throttle_pct\n${rows.join('\n')}\n`);
    expect([ride.speed, ride.throttle]).toEqual([null, null]);
  });

  it('is read from GPX with times', () => {
    const points = Array.from(
      { length: 10 },
      (_, i) =>
        `<trkpt lat="51.9" lon="${-14.6 + i / 5000}"><time>2024-05-04T10:00:${10 + i}Z</time></trkpt>`,
    );
    const gpx = `<gpx version="1.1" xmlns="http://www.topografix.com/GPX/1/1"><trk><trkseg>${points.join('')}</trkseg></trk></gpx>`;
    const ride = read(gpx, 'ride.gpx');
    expectClose(ride.time, [0, 1, 2, 3, 4, 5, 6, 7, 8, 9], 1e-9);
    expect([ride.speed, ride.throttle]).toEqual([null, null]);
  });

  it('loses the second of two points at one time, and counts it', () => {
    const ride = read(csv((rows) => rows.splice(4, 0, '104,80', '104,85')));
    expect([ride.size, ride.leftOut]).toEqual([12, 2]);
    expect(ride.time.every((t, i) => i === 0 || t > ride.time[i - 1]!)).toBe(true);
  });

  it('loses points at which the clock ran backwards for a short way', () => {
    const ride = read(
      csv((rows) => {
        rows[5] = '98,100';
      }),
    );
    expect([ride.size, ride.leftOut]).toEqual([11, 1]);
    expectClose(ride.distance!.subarray(3, 6), [60, 80, 120], 0);
  });

  it('loses a single position far off the line', () => {
    const rows = Array.from({ length: 40 }, (_, i) => `${i},${i === 20 ? 51.95 : 51.9},${-14.6 + i / 5000}`);
    expect(read(`time_s,lat_deg,lon_deg\n${rows.join('\n')}\n`).leftOut).toBe(1);
  });
});

interface Row {
  readonly file: string;
  readonly code: string;
  readonly says: readonly string[];
}
const folder = new URL('../broken/rides/', import.meta.url);
const table: readonly Row[] = JSON.parse(readFileSync(new URL('table.json', folder), 'utf8'));

describe('a broken ride', () => {
  it.each(table)('is refused: $file', ({ file, code, says }) => {
    let error: unknown;
    try {
      readRide({ name: file, bytes: readFileSync(new URL(file, folder)) });
    } catch (thrown) {
      error = thrown;
    }
    expect(error).toBeInstanceOf(InputError);
    const { code: found, message } = error as InputError;
    expect([found, message]).toEqual([code, expect.stringContaining(file)]);
    for (const words of says) expect(message).toContain(words);
  });

  it('stands in the table, and every row has a file', () => {
    const files = readdirSync(folder).filter((file) => file !== 'table.json');
    expect(table.map(({ file }) => file).sort()).toEqual(files.sort());
  });
});
