import { expect, test } from 'vitest';
import { readSeries } from '../../../src/report/compare/read-series.ts';
import { dataFiles } from '../../../src/report/data/data-files.ts';
import { expectClose } from '../../compare.ts';
import { fixtureResult } from '../fixture.ts';

const BINS =
  'time_s,distance_m,set_speed_kmh,speed_min_kmh,speed_max_kmh,speed_error_kmh,throttle_pct,throttle_min_pct,throttle_max_pct\r\n';

test('by bin: middles of the bins, errors against the set speed of each', () => {
  const text = `${BINS}0,0,72,68.4,75.6,-1.8,30,20,40\r\n1,10,36,36,36,0,50,50,50\r\n2,30,36,32.4,36,-1.8,0,0,0\r\n`;
  const { error, throttle } = readSeries(text, 's.csv');
  expectClose(Array.from(error.at), [5, 20, 40], 1e-12, 'middle [m]');
  expectClose(Array.from(error.low), [-1, 0, -1], 1e-12, 'least [m/s]');
  expectClose(Array.from(error.mean), [-0.5, 0, -0.5], 1e-12, 'mean [m/s]');
  expectClose(Array.from(error.high), [1, 0, 0], 1e-12, 'greatest [m/s]');
  expectClose(Array.from(throttle.mean), [30, 50, 0], 0, 'throttle [%]');
  expectClose(Array.from(throttle.low), [20, 50, 0], 0, 'throttle [%]');
  expectClose(Array.from(throttle.high), [40, 50, 0], 0, 'throttle [%]');
});

test('a run of one bin, or of none, is read', () => {
  expect(readSeries(`${BINS}0,7,72,68.4,75.6,-1.8,30,20,40\r\n`, 's.csv').error).toMatchObject({ size: 1 });
  expect(readSeries(BINS, 's.csv').error.size).toBe(0);
});

test('by sample: every one as it stands', () => {
  const text =
    'time_s,distance_m,set_speed_kmh,speed_kmh,actuator_pct,engine_rpm\r\n0,0,36,36,30,\r\n0.02,0.2,36,39.6,31,\r\n';
  const { error, throttle } = readSeries(text, 's.csv');
  expectClose(Array.from(error.at), [0, 0.2], 0, 'distance [m]');
  expectClose(Array.from(error.mean), [0, 1], 1e-12, 'error [m/s]');
  expectClose(Array.from(throttle.mean), [30, 31], 0, 'throttle [%]');
});

test('while hold is off there is no error, and a bin in which it ends has its mean alone', () => {
  const text = `${BINS.replace('\r\n', ',mode\r\n')}0,0,72,68.4,75.6,-1.8,30,20,40,hold\r\n1,10,72,36,72,-3.6,10,0,30,off\r\n2,20,72,36,36,,9,9,9,off\r\n`;
  const { error, throttle } = readSeries(text, 's.csv');
  for (const values of [error.low, error.mean, error.high]) expect(values[2]).toBeNaN();
  expectClose([error.low[1]!, error.mean[1]!, error.high[1]!], [-1, -1, -1], 1e-12, 'error [m/s]');
  expectClose(Array.from(throttle.mean), [30, 10, 9], 0, 'throttle [%]');
  const samples = readSeries(
    'time_s,distance_m,set_speed_kmh,speed_kmh,actuator_pct,mode\r\n0,0,36,36,30,hold\r\n0.02,0.2,36,18,31,off\r\n',
    's.csv',
  );
  expect(Array.from(samples.error.mean)).toEqual([0, Number.NaN]);
});

test('what the data files write is read', () => {
  const run = fixtureResult({});
  for (const candidate of run.candidates) {
    const file = dataFiles(run).find(({ name }) => name === `series-${candidate.name}.csv`)!;
    const { error } = readSeries(file.text, file.name);
    const { bins } = candidate.result;
    expect(error.size).toBe(bins.size);
    expectClose(error.low, bins.errorMin.subarray(0, bins.size), 3e-4, 'least error [m/s]');
  }
});
