import { controllerFor } from '../control/controller-for.ts';
import { dragArea } from '../vehicle/road-load.ts';
import { throttleRange } from '../vehicle/throttle-range.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { dragTangent } from './crosswind.ts';
import { fittingsOf } from './fittings.ts';
import { decay } from './lags.ts';
import * as at from './layout.ts';
import type { Machine } from './machine.ts';
import type { LoopPlan } from './plan.ts';
import { WATCHFUL_BRAKE } from './rider-brake.ts';
import { roadTable } from './road-table.ts';
import { writeSlope } from './sense-slope.ts';

/** Longest step of either scheme [s]: a controller slower than 40 Hz is stepped several times a sample. */
const LONGEST_STEP = 0.025;
/** RK4 must see a lag, or a steep law, as something smooth: no step above this share of the shortest, and for a lag none below a time [s]. */
const SHARE_OF_LAG = 0.4;
const SHORTEST_STEP = 0.001;
/** Lags closer to each other than this, relatively, are taken as equal. */
const EQUAL_LAGS = 1e-7;

/** Compiles a plan to flat arrays. The state is empty: see `settle`. */
export function buildMachine(plan: LoopPlan): Machine {
  const { vehicle } = plan;
  const { drive, actuator } = vehicle;
  const table = roadTable(plan.road, drive.derate);
  const { least, greatest } = throttleRange(vehicle);
  // The controller's range is that of what it moves, so that it does not wind up behind an end stop.
  const controller = controllerFor(plan.controller, least, greatest, vehicle);
  const fittings = fittingsOf(plan);
  const p = new Float64Array(at.P_SIZE);
  const sample = controller.sample ?? plan.lockedSample;

  p[at.P_SAMPLE] = sample;
  p[at.P_TIMED] = plan.road.along === 'time' ? 1 : 0;
  p[at.P_MASS] = vehicle.mass;
  p[at.P_BASE_MASS] = vehicle.mass + vehicle.rotatingMass;
  p[at.P_CDA] = dragArea(vehicle.roadLoad, 0);
  p[at.P_CDA_BEHIND] = dragArea(vehicle.roadLoad, Math.PI);
  p[at.P_C0] = vehicle.roadLoad.c0;
  p[at.P_C1] = vehicle.roadLoad.c1;
  p[at.P_C2] = vehicle.roadLoad.c2;
  p[at.P_STALL_SPEED] = drive.stallSpeed;
  p[at.P_LEAST] = least;
  p[at.P_GREATEST] = greatest;
  p[at.P_RESOLUTION] = actuator.resolution;
  p[at.P_PLAY] = 0.5 * actuator.slack;
  p[at.P_CROSSWIND] = table.crosswind ? 1 : 0;
  p.set(plan.bands, at.P_BANDS);
  p[at.P_BAND_COUNT] = plan.bands.length;
  const { scaleError } = vehicle.sensor;
  p[at.P_TO_TRUE] = plan.hold.setSpeedIs === 'indicated' ? 1 / (1 + scaleError) : 1;
  p[at.P_BRAKES_ABOVE] = plan.rider.brakesAbove ?? Number.POSITIVE_INFINITY;
  p[at.P_STRONGEST_BRAKE] = WATCHFUL_BRAKE;
  writeLags(p, vehicle, controller.computingDelay);
  writeKinds(p, vehicle);
  writeSlope(p, plan.controller, controller.computingDelay + actuator.deadTime);
  if (fittings.history > 0) {
    // Such a sensor has its own filter and delay, and the history to itself.
    p[at.P_FILTER] = 0;
    p[at.P_DELAY] = 0;
    p[at.P_HISTORY] = fittings.history;
  }

  return {
    s: new Float64Array(at.HISTORY + at.HISTORY_STRIDE * p[at.P_HISTORY]),
    p,
    rows: table.rows,
    cells: drive.cells,
    losses: drive.losses,
    speedEdges: drive.speedEdges,
    throttleEdges: drive.throttleEdges,
    gears: Float64Array.from(drive.gears.flatMap(({ ratio, inertia }) => [ratio, inertia])),
    belt: drive.belt,
    fittings,
    controller,
    tangent: dragTangent(vehicle.roadLoad),
    stepsInGear: stepsInGear(plan, sample),
    lags: new Float64Array(at.G_SIZE),
    here: new Float64Array(at.H_SIZE),
    log: new Float64Array(at.LOG_ROWS * at.L_STRIDE),
    chunk: new Float64Array(at.C_SIZE),
  };
}

/** Steps a sample: with the clutch open, where nothing but the lags can be too quick for a long step, then in every gear. */
function stepsInGear({ scheme, vehicle }: LoopPlan, sample: number): Float64Array {
  const { drive, actuator } = vehicle;
  const lags = scheme === 'fast' ? [] : [actuator.lag, drive.lag].filter((lag) => lag > 0);
  const longest = Math.min(LONGEST_STEP, ...lags.map((lag) => Math.max(SHARE_OF_LAG * lag, SHORTEST_STEP)));
  const stepsAt = (rate: number): number => Math.ceil(sample / Math.min(longest, SHARE_OF_LAG / rate) - 1e-9);
  return Float64Array.of(0, ...quickest(vehicle)).map(stepsAt);
}

/**
 * The greatest rate in every gear at which the drive's law alone takes a deviation of speed away [1/s]: a rev limiter's
 * band is steep. At the corners of the cells.
 */
function quickest({ mass, rotatingMass, drive }: Vehicle): number[] {
  const { speedEdges, throttleEdges, cells, throttleMin, throttleMax } = drive;
  const across = throttleEdges.length + 1;
  let steepest = 0;
  for (let i = 0; i <= speedEdges.length; i++)
    for (let j = 0; j < across; j++) {
      const cell = 6 * (i * across + j);
      for (const w of [speedEdges[i - 1], speedEdges[i]])
        for (const edge of [throttleEdges[j - 1] ?? throttleMin, throttleEdges[j] ?? throttleMax]) {
          if (w === undefined) continue;
          const x = Math.min(Math.max(edge, throttleMin), throttleMax);
          const slope =
            cells[cell + 1] + x * (cells[cell + 3] + 2 * w * cells[cell + 4] - cells[cell + 5] / (w * w));
          steepest = Math.max(steepest, Math.abs(slope));
        }
    }
  return drive.gears.map(
    ({ ratio, inertia }) => steepest * ((ratio * ratio) / (mass + rotatingMass + inertia)),
  );
}

/** Which of the sample's devices this vehicle has. */
function writeKinds(p: Float64Array, { drive, sensor }: Vehicle): void {
  const { source } = drive;
  const tiring =
    source?.kind === 'battery' &&
    (source.capacity !== null ||
      source.sag !== null ||
      source.acceptance !== null ||
      source.heating !== null);
  p[at.P_DERATED] = drive.derate !== 'none' || tiring ? 1 : 0;
  if (source !== null) p[at.P_SOURCE] = source.kind === 'battery' ? at.DRAWN_BY_SAMPLE : at.DRAWN_BY_CHUNK;
  p[at.P_SENSED] = sensor.pulses === null && sensor.noise === null ? 0 : 1;
  p[at.P_AUTOMATIC] = drive.gearbox.kind === 'automatic' ? 1 : 0;
  p[at.P_LAW_STEP] = drive.fuelCutBelow;
  p[at.P_BELT] = drive.belt === null ? 0 : 1;
  p[at.P_BELT_KEPT] = drive.belt === null ? 0 : decay(drive.belt.lag, p[at.P_SAMPLE]);
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
  // A command that is late by computing delay and dead time is the command of a measurement that is older by them.
  p[at.P_DELAY] = (delay + computingDelay + vehicle.actuator.deadTime) / p[at.P_SAMPLE];
  p[at.P_HISTORY] = p[at.P_DELAY] > 0 ? Math.ceil(p[at.P_DELAY]) + 1 : 0;
}
