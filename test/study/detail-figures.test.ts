import { describe, expect, it } from 'vitest';
import type { BinDetail, BinRecord, Distribution } from '../../src/loop/result.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { classTimes, quantileOf } from '../../src/study/class-times.ts';
import type { FigureRecord } from '../../src/study/figure-measures.ts';
import { askDetail, figureRow } from '../../src/study/figure-table.ts';
import { gathered, histogramOf } from '../../src/study/histogram.ts';
import { recordOf as figureRecordOf } from '../../src/study/measure-figure.ts';
import { qualityOfRun } from '../../src/study/run-quality.ts';
import { hillEnds } from '../../src/study/steady-grades.ts';
import { expectClose } from '../compare.ts';
import { figureRecord, recordOf } from './record-of.ts';
import { roadOf } from './road-of.ts';
import { oneHill, STIFF, study } from './scene.ts';
import { planOf, vehicleOf } from './vehicle-of.ts';

/** Samples of each bin brought to classes. */
function distributionOf(width: number, sample: number, bins: readonly (readonly number[])[]): Distribution {
  const start = [0];
  const index: number[] = [];
  const samples: number[] = [];
  for (const values of bins) {
    const met = new Map<number, number>();
    for (const value of values) {
      const k = Math.floor(value / width);
      met.set(k, (met.get(k) ?? 0) + 1);
    }
    for (const [k, count] of met) {
      index.push(k);
      samples.push(count);
    }
    start.push(index.length);
  }
  return {
    width,
    sample,
    start: Uint32Array.from(start),
    index: Int16Array.from(index),
    samples: Float32Array.from(samples),
  };
}

/** 60 s at 10 Hz in bins of one second; the error and the command of every sample. */
const SAMPLE = 0.1;
const BINS = 60;
const SET = 25;
function sampled(error: (t: number) => number, command: (t: number) => number = () => 0.4) {
  const at = (i: number): number[] => Array.from({ length: 10 }, (_, k) => (10 * i + k) * SAMPLE);
  const bins = Array.from({ length: BINS }, (_, i) => at(i));
  const over = (of: (t: number) => number): number[][] => bins.map((times) => times.map(of));
  const total = (of: (t: number, k: number) => number): Float64Array =>
    Float64Array.from(bins, (times) => SAMPLE * times.reduce((sum, t, k) => sum + of(t, k), 0));
  const rows = bins.map((times) => {
    const errors = times.map(error);
    return {
      time: 1,
      setSpeed: SET,
      speedMean: SET,
      errorMean: SAMPLE * errors.reduce((a, b) => a + b, 0),
      errorSquare: SAMPLE * errors.reduce((a, b) => a + b * b, 0),
      errorMin: Math.min(...errors),
      errorMax: Math.max(...errors),
    };
  });
  const empty = (): Float64Array => new Float64Array(BINS);
  const none = distributionOf(
    0.01,
    SAMPLE,
    over(() => 0),
  );
  const detail: BinDetail = {
    errorAbsolute: total((t) => Math.abs(error(t))),
    errorMoment: total((t, k) => Math.abs(error(t)) * (k + 0.5) * SAMPLE),
    accelerationSquare: empty(),
    accelerationAbsolute: empty(),
    inertialWork: empty(),
    commandRate: empty(),
    reversals: new Uint32Array(BINS),
    error: distributionOf(0.01 / 3.6, SAMPLE, over(error)),
    command: distributionOf(0.001, SAMPLE, over(command)),
    acceleration: none,
    jerk: none,
  };
  return { ...recordOf(25, rows), detail };
}

const ROAD = roadOf([{ length: 25 * BINS, grade: 0 }]);
const figures = (bins: BinRecord, more: Partial<FigureRecord> = {}): FigureRecord =>
  figureRecord(bins, { road: ROAD, bands: [0.5], ...more });
const value = (name: string, of: FigureRecord): number => {
  const { value: found } = figureRow(name)!.measure(of);
  if (typeof found !== 'number') throw new Error(`${name}: ${found.none}`);
  return found;
};

describe('figures of a sine, 0.5 m/s at 10 s, sampled at 10 Hz', () => {
  const sine = figures(sampled((t) => 0.5 * Math.sin((2 * Math.PI * t) / 10)));

  it('are its closed forms', () => {
    // |sin| stays within sin(0.95 pi / 2) for 95 % of the time; 600 samples tell it to half a per cent of the time.
    expectClose(value('p95_abs_error_kmh', sine), 1.8 * Math.sin((0.95 * Math.PI) / 2), 0.02);
    expectClose(value('iae_kmh_s', sine), (1.8 * 60 * 2) / Math.PI, 0.1);
    expectClose(value('ise_kmh2_s', sine), (1.8 * 1.8 * 60) / 2, 1e-6);
    // 1.272 km/h is the figure of the worked example of drive quality; it counts the sample at 60 s too.
    expectClose(value('rms_error_kmh', sine), 1.272, 1e-3);
    // t |e| over whole half periods of 5 s from 0: mean |e| times 60^2 / 2, but for how |e| lies within a half period (none: it is symmetric).
    expectClose(value('itae_kmh_s2', sine), (1.8 * 2 * 1800) / Math.PI, 5);
  });

  it('add up over pieces of the way', () => {
    const piece = (from: number, to: number): FigureRecord => ({
      ...sine,
      chosen: Uint8Array.from({ length: BINS }, (_, i) => (i >= from && i < to ? 1 : 0)),
    });
    for (const name of ['iae_kmh_s', 'ise_kmh2_s', 'itae_kmh_s2'])
      expectClose(
        value(name, piece(0, 7)) + value(name, piece(7, 44)) + value(name, piece(44, 60)),
        value(name, sine),
        1e-9 * value(name, sine),
        name,
      );
  });

  it('have their place where the error was greatest', () => {
    // Crests at 2.5 s, 7.5 s, ...: the first bins of one second that hold one.
    for (const name of ['p95_abs_error_kmh', 'iae_kmh_s', 'itae_kmh_s2'])
      expect(figureRow(name)!.measure(sine).at, name).toBe(62.5);
  });
});

describe('the clock of the time-weighted error', () => {
  // e = 1 m/s = 3.6 km/h all the time.
  const even = (events: number[]) =>
    figures(
      sampled(() => 1),
      { events },
    );
  it('begins anew at every event, at the start of its bin', () => {
    expectClose(value('itae_kmh_s2', even([])), (3.6 * 60 * 60) / 2, 1e-6);
    // 500 m are 20 s.
    expectClose(value('itae_kmh_s2', even([500])), (3.6 * (20 * 20 + 40 * 40)) / 2, 1e-6);
    expectClose(
      value('itae_kmh_s2', even([500, 513, 1000])),
      (3.6 * (20 * 20 + 20 * 20 + 20 * 20)) / 2,
      1e-6,
    );
  });
});

describe('time with hold off', () => {
  it('is in no figure of the error', () => {
    const rows = [
      {
        time: 10,
        timeOff: 0,
        errorMean: 10,
        errorSquare: 10,
        errorMin: 1,
        errorMax: 1,
        timeUpper: 5,
        setSpeed: 20,
      },
      { time: 10, timeOff: 6, errorMean: 8, errorSquare: 16, errorMin: 2, errorMax: 2, setSpeed: 20 },
      { time: 10, timeOff: 10, setSpeed: 20 },
    ].map((row) => ({ ...row, speedMean: 20, timeInBand: [row.errorMax === 1 ? 10 : 0] }));
    const bins = recordOf(200, rows, 1);
    const road = roadOf([{ length: 600, grade: 0 }]);
    const of = (chosen: number[]) =>
      figures(bins, { road, chosen: Uint8Array.from(chosen), bands: [1], band: 1 });
    const all = of([1, 1, 1]);
    expectClose(value('mean_error_kmh', all), (3.6 * 18) / 14, 1e-12);
    expectClose(value('rms_error_kmh', all), 3.6 * Math.sqrt(26 / 14), 1e-12);
    expectClose(value('within_band_pct', all), (100 * 10) / 14, 1e-12);
    expectClose(value('at_limit_pct', all), (100 * 5) / 14, 1e-12);
    expectClose(value('time_lost_s', all), -18 / 20, 1e-12);
    for (const name of ['mean_error_kmh', 'rms_error_kmh', 'within_band_pct', 'worst_low_kmh', 'iae_kmh_s'])
      expect(figureRow(name)!.measure(of([0, 0, 1])).value, name).toEqual({
        none: 'hold was on nowhere there',
      });
    // Elsewhere there is no detail.
    expect(figureRow('iae_kmh_s')!.measure(all).value).toEqual({ none: 'the run kept no detail' });
  });
});

describe('figures of the throttle', () => {
  it('tell what headroom is left 95 % of the time', () => {
    // Evenly from 0.2 to 0.8: 95 % of the time at or below 0.77.
    const ramp = figures(
      sampled(
        () => 0,
        (t) => 0.2 + 0.6 * (t / 60),
      ),
    );
    expectClose(value('headroom_p5_pct', ramp), 23, 0.2);
    expect(
      value(
        'headroom_p5_pct',
        figures(
          sampled(
            () => 0,
            () => 1,
          ),
        ),
      ),
    ).toBe(0);
  });

  it('are asked of the record only where a requirement needs them', () => {
    expect(askDetail(['within_band_pct', 'rms_error_kmh', 'no_such_figure'])).toBe(false);
    expect(askDetail(['within_band_pct', 'p95_jerk_m_s3'])).toBe(true);
  });
});

describe('quantiles and histograms', () => {
  const values = Array.from({ length: 1000 }, (_, i) => -1 + i / 400);
  const even = distributionOf(0.01, 0.02, [values.slice(0, 300), values.slice(300)]);

  it('are those of an even spread, to the width of a class', () => {
    const times = classTimes(even);
    for (const share of [0.05, 0.25, 0.5, 0.95, 1])
      expectClose(quantileOf(times, share)!, -1 + 2.5 * share, 0.011);
    expectClose(quantileOf(classTimes(even, null, true), 0.8)!, 1, 0.02);
    expect(quantileOf(classTimes(even, Uint8Array.of(0, 0)), 0.5)).toBeNull();
  });

  it('sum to the time, whatever the classes, and however much is gathered', () => {
    const sum = (xs: Float64Array) => xs.reduce((a, b) => a + b, 0);
    for (const width of [0.02, 0.1, 0.3, 1, 7]) {
      const one = histogramOf(even, (v) => v, width);
      expectClose(sum(one.times), 20, 1e-9);
      expectClose(sum(gathered(one, -1, 1).times), 20, 1e-9);
    }
    // Classes of 1 around whole numbers: [-1, -0.5), [-0.5, 0.5), [0.5, 1.5).
    expectClose(histogramOf(even, (v) => v, 1).times, [4, 8, 8], 0.3);
  });
});

describe('the steady error of a hill', () => {
  it('is that of a controller without integral: what the slope takes over the gain', () => {
    const road = oneHill(0.05, 1200);
    expect(hillEnds(road)).toEqual([{ from: 2340, to: 2700 }]);
    const vehicle = vehicleOf();
    const kp = 0.8;
    const { replayed, demand, hills } = study({
      p: planOf(road, vehicle, { ...STIFF, kp, ki: 0 }, { detail: true }),
    });
    const record = figureRecordOf(
      replayed[0]!,
      { road, demand, hills },
      new Uint8Array(replayed[0]!.result.bins.size).fill(1),
      [],
    );
    const { value: found, at } = figureRow('steady_hill_error_kmh')!.measure({ ...record, band: null });
    expect(at).toBe(2520);
    // Extra force of the slope over 300 N of drive (260 N and 40 N of drag) is throttle; over the gain it is speed. The
    // air takes some 0.9 N less for each km/h lost.
    const slope = 215 * 9.80665 * (0.05 / Math.sqrt(1 + 0.05 ** 2));
    const air = 0.58 * 1.2 * (60 / 3.6);
    expectClose(found as number, (3.6 * slope) / (300 * kp + air), 0.03);
  });

  it('does not exist on the level', () => {
    const road = roadOf([{ length: 500, grade: 0.01 }]);
    expect(hillEnds(road)).toEqual([]);
  });
});

describe('drive quality of a run', () => {
  it('is that of the set speed, driven as it is, for a stiff hold on the level, and of none for a change of speed', () => {
    const road = roadOf([{ length: 2000, grade: 0 }]);
    const plan = planOf(road, vehicleOf(), STIFF, { detail: true });
    const { bins } = runLoop(plan);
    const all = new Uint8Array(bins.size).fill(1);
    const quality = qualityOfRun(road, plan.vehicle, bins, all);
    expectClose(quality.energy as number, 0, 1e-3);
    expectClose(quality.distance as number, 0, 1e-3);
    expect(quality.speedChange).toHaveProperty('none');
    const up = runLoop({
      ...plan,
      hold: { ...plan.hold, changes: [{ at: { distance: 1000 }, setSpeed: 65 / 3.6, ramp: null }] },
    });
    const risen = qualityOfRun(road, plan.vehicle, up.bins, new Uint8Array(up.bins.size).fill(1));
    // 5 km/h up and no more, but for some overshoot; the work into speed is that of 220 kg.
    expect(risen.speedChange as number).toBeGreaterThan(-2);
    expect(risen.speedChange as number).toBeLessThan(40);
    expectClose(risen.inertialWork as number, risen.speedChange as number, 15);
  });
});
