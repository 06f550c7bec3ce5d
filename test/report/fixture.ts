import type { Candidate, PiSetup } from '../../src/control/setup.ts';
import type { RunStatus } from '../../src/loop/plan.ts';
import type { Road } from '../../src/road/road.ts';
import type { CandidateResult, RunResult } from '../../src/run/run-result.ts';
import type {
  Demand,
  Figure,
  Hill,
  HillOutcome,
  RequirementFinding,
  Segment,
} from '../../src/study/findings.ts';
import { forceDrive } from '../../src/vehicle/force-drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../../src/vehicle/ideal.ts';
import { withEngine } from './fixture-engine.ts';
import { fixtureRoad } from './fixture-road.ts';
import { cutSeries, type FixtureRun, fixtureRun, forcesAt, PLANT } from './fixture-run.ts';

export interface FixtureWish {
  /** An engine with six gears in the place of a plain force. */
  readonly engine?: boolean;
  readonly lengthKm?: number;
  readonly withPositions?: boolean;
  readonly title?: string;
  readonly designs?: readonly string[];
  readonly locked?: boolean;
  /** Ends the run of a candidate there [km]. */
  readonly ends?: Readonly<Record<string, { readonly km: number; readonly status: RunStatus }>>;
  readonly requirements?: 'none' | 'met' | 'close' | 'missed';
}

const SET = 60 / 3.6;
const BAND = 2 / 3.6;
const GAINS: readonly (readonly [kp: number, ti: number])[] = [
  [0.4, 9],
  [0.06, 25],
  [0.9, 3],
  [0.2, 6],
];

const pi = (kp: number, ti: number): PiSetup => ({
  kind: 'pi',
  kp,
  ki: kp / ti,
  setpointWeight: 0,
  sample: 0.02,
  computingDelay: 0,
  integration: 'forward',
  antiWindup: { kind: 'conditional' },
  ramp: null,
  design: null,
});

/** A whole, plausible and wholly invented result, the same for the same wish. */
export const fixtureResult = (wish: FixtureWish = {}): RunResult =>
  wish.engine === true ? withEngine(plainResult(wish)) : plainResult(wish);

function plainResult(wish: FixtureWish): RunResult {
  const { lengthKm = 28, withPositions = true, designs = ['pi-firm', 'pi-soft'], locked = true } = wish;
  const road = fixtureRoad(lengthKm, withPositions);
  const setups: Candidate[] = [
    ...designs.map((name, i): Candidate => ({ name, controller: pi(...GAINS[i % GAINS.length]!) })),
    ...(locked ? [{ name: 'locked', controller: { kind: 'locked', throttle: 'level' } } as Candidate] : []),
  ];
  const runs = setups.map((setup) => {
    const end = wish.ends?.[setup.name];
    return fixtureRun(road, SET, setup.controller, BAND, end === undefined ? undefined : end.km * 1000);
  });
  const demand = demandOf(road);
  const candidates = setups.map((setup, i): CandidateResult => {
    const run = runs[i]!;
    return {
      ...setup,
      result: {
        status: wish.ends?.[setup.name]?.status ?? 'completed',
        endDistance: run.endDistance,
        endTime: run.endTime,
        bins: run.bins,
        ledger: run.ledger,
        checkpoints: [],
        shifts: [],
        bites: [],
      },
      figures: figuresOf(run),
      loop:
        setup.controller.kind === 'pi'
          ? { speed: SET, gear: 0, stable: true, gainMargin: 4 + i, phaseMargin: 1.05 - 0.1 * i }
          : null,
      full: null,
    };
  });
  const hills = hillsOf(road, demand, setups, runs);
  const early = candidates.some((candidate) => candidate.result.status !== 'completed');
  return {
    schemaVersion: '1',
    toolVersion: '0.1.0',
    title: wish.title ?? 'Night post over the invented pass',
    caseName: 'invented-pass',
    inputs: [
      { name: 'invented-pass.yaml', sha256: '0123456789abcdef'.repeat(4), bytes: 1844 },
      { name: 'invented-pass.gpx', sha256: 'fedcba9876543210'.repeat(4), bytes: 412_345 },
    ],
    overrides: ['hold.set_speed_kmh=60'],
    road,
    vehicle: {
      name: 'Invented 125',
      mass: PLANT.mass,
      payload: 15,
      rotatingMass: 9,
      roadLoad: { cda: PLANT.cda, yawGain: 1, yawTable: null, c0: PLANT.crr, c1: 0, c2: 0 },
      drive: forceDrive({
        peakForce: PLANT.peak,
        peakPower: PLANT.power,
        closedThrottleForce: PLANT.drag,
        lag: 0.15,
        derate: 'naturally_aspirated',
      }),
      actuator: { ...IDEAL_ACTUATOR, lag: 0.06, rateLimit: 8 },
      sensor: { ...IDEAL_SENSOR, filter: 0.05, delay: 0.02, scaleError: 0 },
      traction: null,
    },
    hold: { setSpeed: SET, setSpeedIs: 'true_speed', startSpeed: SET, changes: [] },
    rider: { brakesAbove: PLANT.brakeAbove, shifts: [] },
    supervisor: null,
    faults: [],
    bends: null,
    scheme: 'exact',
    band: BAND,
    candidates,
    demand,
    hills,
    cycles: [],
    loggedRides: [],
    transients: { shown: [], measures: [], leftOut: [] },
    segmentsBy: 'length',
    segments: segmentsOf(road, setups, runs),
    requirements: requirementsOf(wish.requirements ?? 'missed', designs),
    spread: { roads: 8, seed: 7, words: 'The spread is that over 8 invented roads (seed 7).' },
    given: [{ key: 'hold.set_speed_kmh', value: '60', of: 'case' }],
    defaults: [
      {
        key: 'mass.rotating_kg',
        value: '9',
        of: 'vehicle',
        source: '4 % of the kerb mass, as motorcycle regulations allow',
      },
      { key: 'road.grid_m', value: '10', of: 'case', source: 'the grid that most tracks support' },
    ],
    warnings: [
      {
        code: 'bridge-suspected',
        message: 'The elevation dips by 14 m over 180 m and comes back: a bridge or a cutting, perhaps.',
        from: 9120,
        to: 9300,
      },
    ],
    loops: { points: [], notHeld: [], loops: [] },
    matrix: null,
    status: early
      ? 'incomplete'
      : wish.requirements === 'missed' || wish.requirements === undefined
        ? 'requirement_not_met'
        : 'ok',
  };
}

function demandOf(road: Road): Demand {
  const column = () => new Float64Array(road.size);
  const [required, upper, lower, share] = [column(), column(), column(), column()];
  const holdable = new Uint8Array(road.size);
  for (let i = 0; i < road.size; i++) {
    const at = forcesAt(road, i, SET);
    required[i] = at.required;
    upper[i] = at.upper;
    lower[i] = at.lower;
    share[i] = at.required > 0 ? at.required / at.upper : -at.required / at.lower;
    holdable[i] = Math.abs(share[i]!) <= 1 ? 1 : 0;
  }
  const set = column().fill(SET);
  return {
    setSpeed: set,
    required,
    upper,
    lower,
    grip: null,
    gears: [{ upper, lower, share, shaftSpeed: column() }],
    gear: new Uint8Array(road.size),
    share,
    sustained: set,
    runaway: set,
    brakePower: column(),
    ideal: set,
    holdable,
    holdableShare: holdable.reduce((sum, one) => sum + one, 0) / road.size,
    settling: [],
  };
}

const total = (values: Float64Array) => values.reduce((sum, value) => sum + value, 0);

function figuresOf({ bins, endDistance }: FixtureRun): Readonly<Record<string, Figure>> {
  const time = total(bins.time);
  const km = endDistance / 1000;
  return {
    within_band_pct: (100 * total(bins.timeInBand)) / time,
    rms_error_kmh: 3.6 * Math.sqrt(total(bins.errorSquare) / time),
    mean_error_kmh: (3.6 * total(bins.errorMean)) / time,
    worst_low_kmh: 3.6 * bins.errorMin.reduce((a, b) => Math.min(a, b), 0),
    worst_high_kmh: 3.6 * bins.errorMax.reduce((a, b) => Math.max(a, b), 0),
    recovery_s: { none: 'it did not come back before the end' },
    time_s: time,
    time_lost_s: -total(bins.errorMean) / SET,
    wheel_energy_wh: total(bins.driveWork) / 3600,
    wheel_energy_wh_per_km: total(bins.driveWork) / 3600 / km,
    battery_energy_wh: { none: 'the drive has no efficiency' },
    throttle_travel_pct_per_km: (100 * total(bins.throttleTravel)) / km,
    at_upper_limit_s: total(bins.timeUpper),
    at_lower_limit_s: total(bins.timeLower),
    at_rate_limit_s: 0,
    brake_energy_wh: total(bins.brakeWork) / 3600,
    brake_distance_m: total(bins.timeBrake) * SET,
  };
}

/** Stretches longer than 100 m with demand out of range; a shorter road has none. */
function hillsOf(
  road: Road,
  demand: Demand,
  setups: readonly Candidate[],
  runs: readonly FixtureRun[],
): Hill[] {
  const found: Hill[] = [];
  let start = -1;
  for (let i = 0; i <= road.size; i++) {
    const out = i < road.size && Math.abs(demand.share[i]!) > 1;
    if (out && start < 0) start = i;
    if (out || start < 0) continue;
    const [first, last] = [start, i - 1];
    start = -1;
    if (last - first < 10) continue;
    let worst = first;
    for (let k = first; k <= last; k++)
      if (Math.abs(demand.share[k]!) > Math.abs(demand.share[worst]!)) worst = k;
    const up = demand.share[worst]! > 0;
    found.push({
      number: found.length + 1,
      kind: up ? 'climb' : 'descent',
      from: road.distance[first]!,
      to: road.distance[last]!,
      until: road.distance[last]! + 200,
      meanGrade:
        (road.elevation[last]! - road.elevation[first]!) / (road.distance[last]! - road.distance[first]!),
      meanGradeSd: 0.003,
      maxGrade: road.grade[worst]!,
      share: demand.share[worst]!,
      shareAt: road.distance[worst]!,
      requiredForce: demand.required[worst]!,
      availableForce: up ? demand.upper[worst]! : demand.lower[worst]!,
      sustainedSpeed: up ? SET * 0.7 : SET * 1.4,
      gears: null,
      brakePower: 0,
      brakeEnergy: 0,
      unresolved: last - first < 29,
      outcomes: setups.flatMap((setup, k) =>
        outcomeOf(setup, runs[k]!, road.distance[first]!, road.distance[last]!, up),
      ),
    });
  }
  return found;
}

function outcomeOf(setup: Candidate, run: FixtureRun, from: number, to: number, up: boolean): HillOutcome[] {
  const { series } = run;
  let [a, b] = [-1, -1];
  for (let i = 0; i < series.size; i++) {
    if (a < 0 && series.distance[i]! >= from) a = i;
    if (series.distance[i]! <= to) b = i;
  }
  if (a < 0 || b <= a) return [];
  const end = Math.min(series.size - 1, b + 300);
  let change = 0;
  for (let i = a; i <= end; i++) {
    const e = series.speed[i]! - SET;
    if (Math.abs(e) > Math.abs(change)) change = e;
  }
  return [
    {
      candidate: setup.name,
      affected: Math.abs(change) > BAND,
      speedChange: change,
      predictedChange:
        setup.controller.kind === 'locked'
          ? { none: 'no hand formula for a locked throttle' }
          : change * 1.08,
      predictionDiffers: false,
      timeLost: (-change / SET) * 20,
      timeAtLimit: up ? 22.4 : 31.2,
      recovery: setup.controller.kind === 'locked' ? { none: 'it did not come back' } : 12.3,
      cause: up ? 'torque' : 'closed_throttle',
      why: up
        ? 'Full throttle gives less force than the climb asks, for longer than the momentum lasts.'
        : 'Closed throttle holds back less than the descent asks.',
      wouldHold:
        setup.controller.kind === 'locked'
          ? []
          : [
              {
                lever: 'set_speed',
                holds: 14,
                fails: 14.3,
                words: 'A set speed of 50 km/h holds, 51 km/h does not.',
              },
            ],
      picture: cutSeries(series, series.time[a]! - 10, series.time[end]!, 400),
    },
  ];
}

function segmentsOf(road: Road, setups: readonly Candidate[], runs: readonly FixtureRun[]): Segment[] {
  const length = road.distance[road.size - 1]!;
  const step = 500;
  return Array.from({ length: Math.ceil(length / step) }, (_, k): Segment => {
    const [from, to] = [k * step, Math.min(length, (k + 1) * step)];
    return {
      number: k + 1,
      from,
      to,
      meanGrade: (road.elevation[Math.round(to / 10)]! - road.elevation[from / 10]!) / (to - from),
      meanHeadwind: road.headwind[from / 10]!,
      runs: setups.map((setup, i) => {
        const { bins } = runs[i]!;
        const inside = Array.from({ length: bins.size }, (_, b) => b).filter(
          (b) => bins.edge[b]! >= from && bins.edge[b]! < to && bins.time[b]! > 0,
        );
        if (inside.length === 0) {
          const none = { none: 'the run ended before' };
          return {
            candidate: setup.name,
            meanError: none,
            rmsError: none,
            worstError: none,
            meanThrottle: none,
            atLimit: none,
            wheelEnergy: none,
            time: none,
          };
        }
        const sum = (column: Float64Array) => inside.reduce((s, b) => s + column[b]!, 0);
        const time = sum(bins.time);
        const low = Math.min(...inside.map((b) => bins.errorMin[b]!));
        const high = Math.max(...inside.map((b) => bins.errorMax[b]!));
        return {
          candidate: setup.name,
          meanError: sum(bins.errorMean) / time,
          rmsError: Math.sqrt(sum(bins.errorSquare) / time),
          worstError: Math.abs(low) > Math.abs(high) ? low : high,
          meanThrottle: sum(bins.throttleMean) / inside.length,
          atLimit: (sum(bins.timeUpper) + sum(bins.timeLower)) / time,
          wheelEnergy: sum(bins.driveWork),
          time,
        };
      }),
    };
  });
}

function requirementsOf(
  wish: NonNullable<FixtureWish['requirements']>,
  designs: readonly string[],
): RequirementFinding[] {
  if (wish === 'none') return [];
  return designs.flatMap((candidate, i): RequirementFinding[] => [
    {
      requirement: {
        id: 'SH-01',
        figure: 'within_band_pct',
        band: BAND,
        atLeast: 95,
        atMost: null,
        where: 'holdable',
        candidates: null,
      },
      candidate,
      measured: wish === 'missed' && i > 0 ? 71.84 : wish === 'close' ? 95.1 : 99.31,
      margin: wish === 'missed' && i > 0 ? -23.16 : wish === 'close' ? 0.1 : 4.31,
      spread: 0.4,
      worstAt: 12_340,
      verdict: wish === 'missed' && i > 0 ? 'not met' : wish === 'close' ? 'too close to call' : 'met',
      words: 'Share of the time within the band where the drive can hold it.',
    },
    {
      requirement: {
        id: 'SH-02',
        figure: 'worst_high_kmh',
        band: null,
        atLeast: null,
        atMost: 4,
        where: { from: 2000, to: 9000 },
        candidates: null,
      },
      candidate,
      measured: wish === 'missed' ? 8.21 : 2.2,
      margin: wish === 'missed' ? -4.21 : 1.8,
      spread: 0.2,
      worstAt: 7310,
      verdict: wish === 'missed' ? 'not met' : 'met',
      words: 'Furthest above the set speed.',
    },
  ]);
}
