import { controllerFor } from '../control/controller-for.ts';
import { dragArea } from '../vehicle/road-load.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { dragTangent } from './crosswind.ts';
import { lagFactors } from './lags.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { LoopPlan } from './plan.ts';
import { roadTable } from './road-table.ts';

/** Longest step of either scheme [s]: a controller slower than 40 Hz is stepped several times a sample. */
const LONGEST_STEP = 0.025;
/** RK4 must see a lag as something smooth: no step above this share of the shortest lag, and none below a time [s]. */
const SHARE_OF_LAG = 0.4;
const SHORTEST_STEP = 0.001;
/** Lags closer to each other than this, relatively, are taken as equal. */
const EQUAL_LAGS = 1e-7;

/** Compiles a plan to flat arrays. The state is empty: see `settle`. */
export function buildMachine(plan: LoopPlan): Machine {
  const { vehicle } = plan;
  const { drive } = vehicle;
  const table = roadTable(plan.road, drive.derate);
  const controller = controllerFor(plan.controller, drive.throttleMin, drive.throttleMax);
  const p = new Float64Array(at.P_SIZE);
  const sample = controller.sample ?? plan.lockedSample;
  const gear = drive.gears[drive.gear]!;

  p[at.P_SAMPLE] = sample;
  p[at.P_STEPS] = Math.ceil(sample / longestStep(plan) - 1e-9);
  p[at.P_STEP] = sample / p[at.P_STEPS];
  p[at.P_TIMED] = plan.road.along === 'time' ? 1 : 0;
  p[at.P_MASS] = vehicle.mass;
  p[at.P_EFFECTIVE_MASS] = vehicle.mass + vehicle.rotatingMass + gear.inertia;
  p[at.P_CDA] = dragArea(vehicle.roadLoad, 0);
  p[at.P_CDA_BEHIND] = dragArea(vehicle.roadLoad, Math.PI);
  p[at.P_C0] = vehicle.roadLoad.c0;
  p[at.P_C1] = vehicle.roadLoad.c1;
  p[at.P_C2] = vehicle.roadLoad.c2;
  p[at.P_STALL_SPEED] = drive.stallSpeed;
  p[at.P_LOW] = drive.throttleMin;
  p[at.P_HIGH] = drive.throttleMax;
  p[at.P_CROSSWIND] = table.crosswind ? 1 : 0;
  p.set(plan.bands, at.P_BANDS);
  p[at.P_BAND_COUNT] = plan.bands.length;
  const { scaleError } = vehicle.sensor;
  p[at.P_TO_TRUE] = plan.hold.setSpeedIs === 'indicated' ? 1 / (1 + scaleError) : 1;
  p[at.P_BRAKES_ABOVE] = plan.rider.brakesAbove ?? Number.POSITIVE_INFINITY;
  writeLags(p, vehicle, controller.computingDelay);

  return {
    s: new Float64Array(at.HISTORY + at.HISTORY_STRIDE * p[at.P_HISTORY]),
    p,
    rows: table.rows,
    cells: cellsOverSpeed(drive.cells, gear.ratio),
    speedEdges: drive.speedEdges.map((edge) => edge / gear.ratio),
    throttleEdges: drive.throttleEdges,
    controller,
    tangent: dragTangent(vehicle.roadLoad),
    lags: decays(p),
    here: new Float64Array(at.H_SIZE),
    log: new Float64Array(at.LOG_ROWS * at.L_STRIDE),
    chunk: new Float64Array(at.C_SIZE),
  };
}

function longestStep({ scheme, vehicle }: LoopPlan): number {
  if (scheme === 'fast') return LONGEST_STEP;
  const lags = [vehicle.actuator.lag, vehicle.drive.lag].filter((lag) => lag > 0);
  return Math.min(LONGEST_STEP, ...lags.map((lag) => Math.max(SHARE_OF_LAG * lag, SHORTEST_STEP)));
}

function writeLags(p: Float64Array, vehicle: Vehicle, computingDelay: number): void {
  const { rateLimit } = vehicle.actuator;
  const ta = vehicle.actuator.lag;
  const given = vehicle.drive.lag;
  const equal = ta > 0 && Math.abs(ta - given) <= EQUAL_LAGS * ta;
  const td = equal ? ta : given;
  p[at.P_ACTUATOR_LAG] = ta;
  p[at.P_DRIVE_LAG] = td;
  p[at.P_RATE] = rateLimit ?? Number.POSITIVE_INFINITY;
  p[at.P_RATE_GAP] = rateLimit === null ? Number.POSITIVE_INFINITY : rateLimit * ta;
  p[at.P_LAG_WEIGHT] = equal || ta === 0 ? 0 : ta / (ta - td);
  p[at.P_LAG_EQUAL] = equal ? 1 / td : 0;
  const { filter, delay, scaleError } = vehicle.sensor;
  p[at.P_FILTER] = filter;
  p[at.P_SCALE] = 1 + scaleError;
  // A command that is late by the computing delay is the command of a measurement that is older by it.
  p[at.P_DELAY] = (delay + computingDelay) / p[at.P_SAMPLE];
  p[at.P_HISTORY] = p[at.P_DELAY] > 0 ? Math.ceil(p[at.P_DELAY]) + 1 : 0;
}

/** Decays over a whole step, and their means over it. */
function decays(p: Float64Array): Float64Array {
  const lags = new Float64Array(at.G_SIZE);
  const step = p[at.P_STEP];
  lagFactors(p, lags, 0, step);
  const ta = p[at.P_ACTUATOR_LAG];
  const td = p[at.P_DRIVE_LAG];
  const actuator = (ta * (1 - lags[at.G_ACTUATOR])) / step;
  const drive = (td * (1 - lags[at.G_DRIVE])) / step;
  p[at.P_DRIVE_MEAN] = drive;
  p[at.P_PULL_MEAN] =
    p[at.P_LAG_WEIGHT] * (actuator - drive) + p[at.P_LAG_EQUAL] * td * (drive - lags[at.G_DRIVE]);
  return lags;
}

/** Cells in terms of wheel force and vehicle speed: w = ratio v, F = ratio T. */
function cellsOverSpeed(cells: Float64Array, ratio: number): Float64Array {
  const square = ratio * ratio;
  const factors = [ratio, square, ratio, square, square * ratio, 1];
  return cells.map((value, i) => value * factors[i % 6]!);
}
