import { describe, expect, test } from 'vitest';
import { gainRegion } from '../../src/control/gain-region.ts';
import { type Gains, sampledLoop } from '../../src/control/sampled-loop.ts';
import { runLoop } from '../../src/loop/run-loop.ts';
import { seededStream } from '../../src/numeric/random.ts';
import { searchOnRoad } from '../../src/study/tune-search.ts';
import { linearise } from '../../src/vehicle/linearise.ts';
import { laggedVehicle, planOver, roadOver, stations } from '../loop/scenes.ts';
import { still } from '../vehicle/vehicles.ts';

const BOUND = 1.7;
const SPEED = 17;
const LENGTH = 1000;
const timing = { sample: 0.02, computingDelay: 0, integration: 'forward' } as const;
const loops = [0, 0.03].map((grade) => {
  const model = linearise(laggedVehicle, { speed: SPEED, surroundings: { ...still, grade } });
  return { loop: sampledLoop(laggedVehicle, model!, timing), sample: timing.sample };
});
const road = roadOver(stations(LENGTH, 10), {
  grade: (s) => 0.025 * Math.sin(s / 140) + 0.01 * Math.sin(s / 45),
  headwind: (s) => 2 * Math.sin(s / 60),
});

interface Ridden {
  /** [m2/s2] */
  readonly meanSquare: number;
  /** Throttle per km. */
  readonly travel: number;
}

function ride({ kp, ki }: Gains): Ridden {
  const plan = planOver(road, laggedVehicle, { scheme: 'fast' });
  if (plan.controller.kind !== 'pi') throw new Error('a PI controller');
  const { bins } = runLoop({ ...plan, controller: { ...plan.controller, kp, ki } });
  const total = (column: Float64Array): number => column.reduce((sum, value) => sum + value, 0);
  return {
    meanSquare: total(bins.errorSquare) / total(bins.time),
    travel: total(bins.throttleTravel) / (LENGTH / 1000),
  };
}

/** L at kp 1 and at ki 1, by plain scanning of 3 decades below the Nyquist frequency. */
const scans = loops.map(({ loop }) =>
  Array.from({ length: 240 }, (_, i) => {
    const frequency = (Math.PI / timing.sample) * 10 ** (-4.5 * (1 - i / 239));
    return [loop.openLoop({ kp: 1, ki: 0 }, frequency), loop.openLoop({ kp: 0, ki: 1 }, frequency)] as const;
  }),
);

/** Greatest |1 / (1 + L)|; Infinity with a pole that does not decay. */
function sensitivity({ kp, ki }: Gains): number {
  const peak = scans
    .flat()
    .reduce(
      (most, [p, q]) => Math.max(most, 1 / Math.hypot(1 + kp * p.re + ki * q.re, kp * p.im + ki * q.im)),
      0,
    );
  if (peak > 2 * BOUND) return peak;
  const decays = loops.every(({ loop }) => loop.poles({ kp, ki }).every(({ re }) => re < 0));
  return decays ? peak : Number.POSITIVE_INFINITY;
}

describe('searchOnRoad', () => {
  const region = gainRegion(loops, BOUND);
  const search = (cost: (gains: Gains) => number, mostReplays = 160) =>
    searchOnRoad({ region, settle: (gains) => gains, costAt: cost, mostReplays });

  test('beats the best of 200 random gains under the same bound, whatever the travel of the throttle weighs', () => {
    const random = seededStream(20);
    const { high } = region.ranges[0]!;
    const tried: Ridden[] = [];
    while (tried.length < 200) {
      // Anywhere in three decades of kp, and in four of ki around it.
      const kp = 1.2 * high * 10 ** (-3 * random.uniform());
      const ki = 2 * high * 10 ** (-4 * random.uniform());
      if (sensitivity({ kp, ki }) <= BOUND) tried.push(ride({ kp, ki }));
    }
    for (const weight of [0, 0.02, 0.2]) {
      const cost = ({ meanSquare, travel }: Ridden): number => meanSquare + weight * travel;
      const trials = search((gains) => cost(ride(gains)));
      const best = trials.reduce((a, b) => (b.cost < a.cost ? b : a));
      expect(trials.length).toBeLessThan(161);
      expect(sensitivity(best)).toBeLessThan(BOUND * 1.001);
      expect(best.cost, `weight ${weight}`).toBeLessThan(Math.min(...tried.map(cost)));
    }
  });

  test('finds the least of a bowl in the logarithms to a few per cent, and goes the same way each time', () => {
    const [kp, ki] = [region.ranges[0]!.high / 9, region.greatestIntegral(region.ranges[0]!.high / 9) / 5];
    const bowl = (gains: Gains): number =>
      1 + Math.log(gains.kp / kp) ** 2 + 0.5 * Math.log((gains.kp * gains.ki) / (kp * ki)) ** 2;
    const trials = search(bowl, 400);
    const best = trials.reduce((a, b) => (b.cost < a.cost ? b : a));
    expect(Math.abs(Math.log(best.kp / kp))).toBeLessThan(0.03);
    expect(Math.abs(Math.log(best.ki / ki))).toBeLessThan(0.05);
    expect(search(bowl, 400)).toEqual(trials);
  });

  test('ends with nothing that costs more than the gains that it begins with', () => {
    const start = {
      kp: region.ranges[0]!.high / 40,
      ki: region.greatestIntegral(region.ranges[0]!.high / 40) / 7,
    };
    // A hole as wide as a hundredth of the gains, far from the hill that the rest of the field slopes to.
    const cost = ({ kp, ki }: Gains): number =>
      Math.abs(Math.log(kp / start.kp)) + Math.abs(Math.log(ki / start.ki)) < 0.01
        ? -5
        : -Math.log(kp / region.ranges[0]!.high) / -10;
    const least = (starts: readonly Gains[]): number =>
      searchOnRoad({ region, settle: (gains) => gains, costAt: cost, mostReplays: 40, starts }).reduce(
        (best, trial) => Math.min(best, trial.cost),
        Number.POSITIVE_INFINITY,
      );
    expect(least([])).toBeGreaterThan(-5);
    expect(least([start])).toBe(-5);
  });

  test('leaves half of few replays to the way down from the grid', () => {
    const seen: Gains[] = [];
    const [kp, ki] = [region.ranges[0]!.high / 30, region.greatestIntegral(region.ranges[0]!.high / 30) / 3];
    searchOnRoad({
      region,
      settle: (gains) => gains,
      costAt: (gains) => {
        seen.push(gains);
        return Math.log(gains.kp / kp) ** 2 + Math.log(gains.ki / ki) ** 2;
      },
      mostReplays: 20,
    });
    expect(seen).toHaveLength(20);
    const away = (gains: Gains): number => Math.log(gains.kp / kp) ** 2 + Math.log(gains.ki / ki) ** 2;
    // The least of the second half, on the way, is well below that of the first.
    expect(Math.min(...seen.slice(10).map(away))).toBeLessThan(
      0.5 * Math.min(...seen.slice(0, 10).map(away)),
    );
  });

  test('the field reaches to the greatest gain that P alone may have', () => {
    const { high } = region.ranges[0]!;
    expect(sensitivity({ kp: high, ki: 1e-7 })).toBeGreaterThan(0.998 * BOUND);
    expect(sensitivity({ kp: high, ki: 1e-7 })).toBeLessThan(1.001 * BOUND);
    expect(sensitivity({ kp: 1.005 * high, ki: 1e-7 })).toBeGreaterThan(BOUND);
  });

  test('keeps to its number of replays, and tells them', () => {
    const told: number[] = [];
    const trials = searchOnRoad({
      region,
      settle: (gains) => gains,
      costAt: ({ kp }) => kp,
      mostReplays: 40,
      onReplay: (done) => told.push(done),
    });
    expect(trials).toHaveLength(40);
    expect(told).toEqual(Array.from({ length: 40 }, (_, i) => i + 1));
  });

  test('has no trials where nothing keeps the bound, and none better than Infinity where no run ends', () => {
    expect(
      searchOnRoad({
        region: { ranges: [], greatestIntegral: () => 0 },
        settle: (gains) => gains,
        costAt: () => 1,
        mostReplays: 40,
      }),
    ).toEqual([]);
    expect(
      search(() => Number.POSITIVE_INFINITY).every(({ cost }) => cost === Number.POSITIVE_INFINITY),
    ).toBe(true);
  });
});
