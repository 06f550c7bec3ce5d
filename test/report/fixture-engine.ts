import type { ShiftEvent } from '../../src/loop/result.ts';
import type { CandidateResult, RunResult } from '../../src/run/run-result.ts';
import type { Cause, Demand, Hill, LimitCycle } from '../../src/study/findings.ts';
import { derateFactor } from '../../src/vehicle/derating.ts';
import type { Drive } from '../../src/vehicle/drive.ts';
import { forceRange } from '../../src/vehicle/drive-law.ts';
import type { FuelTank } from '../../src/vehicle/energy-source.ts';
import { fullThrottleLosses } from '../../src/vehicle/full-throttle-losses.ts';

const rpm = (n: number): number => (n * Math.PI) / 30;
/** Invented full-load curve and drag at closed throttle: [rpm, N m, N m], the limiter at its end. */
const CURVE: readonly (readonly [number, number, number])[] = [
  [1400, 5.6, 0.8],
  [2500, 7.9, 1.0],
  [4000, 9.6, 1.3],
  [5500, 10.4, 1.6],
  [7000, 10.1, 2.0],
  [8800, 8.2, 2.5],
  [9000, -2.6, 2.6],
];
const RATIOS = [93, 67, 51.7, 42.8, 37.2, 33.1];
const TOP = RATIOS.length - 1;
/** Indices of the gear before and after the planned shift of the fixture. */
const [FROM, TO] = [TOP, TOP - 1];

/** An invented engine with six gears: one throttle cell between the points of its curve. */
export function fixtureEngine(): Drive {
  const cells: number[] = [];
  for (let i = 1; i < CURVE.length; i++) {
    const [n0, full0, drag0] = CURVE[i - 1]!;
    const [n1, full1, drag1] = CURVE[i]!;
    const line = (a: number, b: number): readonly [number, number] => {
      const slope = (b - a) / (rpm(n1) - rpm(n0));
      return [a - slope * rpm(n0), slope];
    };
    const [full, fullSlope] = line(full0, full1);
    const [closed, closedSlope] = line(-drag0, -drag1);
    cells.push(closed, closedSlope, full - closed, fullSlope - closedSlope, 0, 0);
  }
  cells.push(-2.6, 0, 0, 0, 0, 0);
  const packed = Float64Array.from(cells);
  return {
    kind: 'engine',
    speedEdges: Float64Array.from(CURVE.slice(1), ([n]) => rpm(n)),
    throttleEdges: new Float64Array(0),
    cells: packed,
    losses: fullThrottleLosses(packed),
    gears: RATIOS.map((ratio) => ({ ratio, inertia: 0.002 * ratio * ratio })),
    gear: TOP,
    gearbox: { kind: 'clutch', open: 0.6, resume: 1.5 },
    belt: null,
    throttleMin: 0,
    throttleMax: 1,
    lag: 0.08,
    derate: 'naturally_aspirated',
    stallSpeed: rpm(1400),
    idleSpeed: rpm(1500),
    source: fixtureTank(),
    withoutFuelCut: null,
    fuelCutBelow: 0.02,
    peakForce: 344,
    peakPower: 7700,
    closedThrottleForce: 51,
    regenerationForce: 0,
  };
}

/** Invented tank of 12 l; the heat of petrol is 32 MJ/l, from memory. */
const fixtureTank = (): FuelTank => ({
  kind: 'fuel',
  map: {
    shaftSpeed: Float64Array.of(0, 1000),
    torque: Float64Array.of(-5, 15),
    power: Float64Array.of(0, 0, -5000, 50_000),
    least: 0,
  },
  heat: 32e9,
  capacity: 12 * 32e6,
});

/** The fixture's result with an engine: gears in demand and hills, a planned shift, limit cycles, fuel, grip. */
export function withEngine(base: RunResult): RunResult {
  const drive = fixtureEngine();
  const shiftAt = base.road.distance[base.road.size - 1]! * 0.35;
  return {
    ...base,
    vehicle: {
      ...base.vehicle,
      name: 'Invented 250',
      drive,
      actuator: {
        deadTime: 0.02,
        resolution: 0.001,
        travel: { least: 0, greatest: 1 },
        lag: 0.06,
        rateLimit: 8,
        slack: 0.02,
      },
      sensor: {
        pulses: { spacing: 0.04, reading: { kind: 'counted', window: 0.1 } },
        scaleError: 0.01,
        noise: { sd: 0.02, seed: 3 },
        filter: 0.05,
        delay: 0.02,
      },
      traction: { friction: 0.6, wheelbase: 1.36, massCentreAhead: 0.68, massCentreHeight: 0.62 },
    },
    rider: { ...base.rider, shifts: [{ distance: shiftAt, gear: TO }] },
    candidates: base.candidates.map((candidate) => shifted(candidate, shiftAt)),
    demand: demandInGears(base, drive, shiftAt),
    hills: base.hills.map((hill, i) => hillInGears(hill, i)),
    cycles: cyclesOf(base),
  };
}

function shifted(candidate: CandidateResult, at: number): CandidateResult {
  const { bins, endDistance, ledger } = candidate.result;
  const gear = new Uint8Array(bins.size);
  const timeShift = new Float64Array(bins.size);
  const drawn = new Float64Array(bins.size);
  let sum = 0;
  for (let i = 0; i < bins.size; i++) {
    gear[i] = bins.edge[i]! >= at ? TO : FROM;
    if (bins.edge[i]! >= at && bins.edge[i]! < at + 40) timeShift[i] = bins.time[i]!;
    drawn[i] = 700 * bins.time[i]! + bins.driveWork[i]! / 0.36;
    sum += drawn[i]!;
  }
  const shift: ShiftEvent = { time: at / 16, distance: at, from: FROM, to: TO, resumedAt: at / 16 + 2.4 };
  return {
    ...candidate,
    result: {
      ...candidate.result,
      bins: { ...bins, gear, timeShift, drawn },
      ledger: { ...ledger, shifts: -210, drawn: sum },
      shifts: endDistance > at ? [shift] : [],
    },
  };
}

function demandInGears({ road, demand }: RunResult, drive: Drive, shiftAt: number): Demand {
  const gears = drive.gears.map(({ ratio }, gear) => {
    const columns = {
      upper: new Float64Array(road.size),
      lower: new Float64Array(road.size),
      share: new Float64Array(road.size),
      shaftSpeed: new Float64Array(road.size),
    };
    for (let i = 0; i < road.size; i++) {
      const factor = derateFactor(drive, road.airDensity[i]!, road.airTemperature[i]!);
      const { least, greatest } = forceRange(drive, gear, demand.setSpeed[i]!, factor);
      const required = demand.required[i]!;
      columns.upper[i] = greatest;
      columns.lower[i] = least;
      columns.share[i] = Math.min(9.99, required > 0 ? required / Math.max(greatest, 1) : -required / least);
      columns.shaftSpeed[i] = ratio * demand.setSpeed[i]!;
    }
    return columns;
  });
  const gear = Uint8Array.from(road.distance, (x) => (x >= shiftAt ? TO : FROM));
  const engaged = (name: 'upper' | 'lower' | 'share'): Float64Array =>
    Float64Array.from(gear, (g, i) => gears[g]![name][i]!);
  return {
    ...demand,
    upper: engaged('upper'),
    lower: engaged('lower'),
    share: engaged('share'),
    grip: new Float64Array(road.size).fill(870),
    gears,
    gear,
    brakePower: Float64Array.from(gear, (g, i) =>
      Math.max(0, (gears[g]!.lower[i]! - demand.required[i]!) * demand.setSpeed[i]!),
    ),
  };
}

/** Every cause of a drive with gears comes up once. */
const CAUSES: readonly Cause[] = ['gear', 'derating', 'slack', 'traction', 'torque'];

function hillInGears(hill: Hill, i: number): Hill {
  const up = hill.share > 0;
  const set = 60 / 3.6;
  const outcomes = hill.outcomes.map((outcome) => ({
    ...outcome,
    ...(up && outcome.affected ? { cause: CAUSES[i % CAUSES.length]! } : {}),
    wouldHold:
      outcome.wouldHold.length === 0
        ? []
        : [
            ...outcome.wouldHold,
            {
              lever: 'gear' as const,
              at: hill.from - 60,
              holds: 4,
              fails: 5,
              words: `The rider changes down at km ${((hill.from - 60) / 1000).toFixed(2)}: gear 4 holds, gear 5 does not.`,
            },
          ],
  }));
  return {
    ...hill,
    outcomes,
    gears: {
      engaged: TOP,
      needed: i % 3 === 2 ? null : TOP - 2,
      sustained: up
        ? RATIOS.map((_, g) => Math.min(set, (0.6 + 0.15 * g) * set - 0.05 * g * g * set))
        : RATIOS.map((_, g) => set * (1 + 0.08 * g)),
    },
    brakePower: up ? 0 : 1450 + 300 * i,
    brakeEnergy: up ? 0 : 96_000 + 30_000 * i,
  };
}

function cyclesOf({ candidates, road }: RunResult): readonly LimitCycle[] {
  const design = candidates.find(({ controller }) => controller.kind === 'pi');
  const length = road.distance[road.size - 1]!;
  if (design === undefined) return [];
  return [
    {
      candidate: design.name,
      from: length * 0.1,
      to: length * 0.19,
      period: 2.84,
      turns: 41,
      speedAmplitude: 0.11,
      throttleAmplitude: 0.034,
      cause: 'slack',
      why: 'Without the slack of the throttle its amplitude falls from 0.40 to 0.02 km/h.',
    },
    {
      candidate: design.name,
      from: length * 0.64,
      to: length * 0.7,
      period: 1.31,
      turns: 77,
      speedAmplitude: 0.24,
      throttleAmplitude: 0.08,
      cause: 'fuel_cut',
      why: 'Without the step of the fuel cut its amplitude falls from 0.86 to 0.05 km/h.',
    },
  ];
}
