// The bench's road and vehicle as the library's plain objects, and the same numbers as bytes for the C reference.

const GRAVITY = 9.80665;

/** A smooth invented road: grade a sum of three waves, 10 m grid, `length` m long. */
export function benchRoad(length) {
  const grid = 10;
  const size = Math.round(length / grid) + 1;
  const array = () => new Float64Array(size);
  const road = { station: array(), distance: array(), elevation: array(), grade: array(), headwind: array() };
  for (let i = 0; i < size; i++) {
    const x = i * grid;
    road.distance[i] = x;
    road.grade[i] =
      0.028 * Math.sin(x / 310) + 0.021 * Math.sin(x / 127 + 1) + 0.012 * Math.sin(x / 1900 + 2);
    road.headwind[i] = 2.5 + 2 * Math.sin(x / 2300);
    if (i === 0) continue;
    const mean = 0.5 * (road.grade[i - 1] + road.grade[i]);
    road.elevation[i] = road.elevation[i - 1] + mean * grid;
    road.station[i] = road.station[i - 1] + grid * Math.sqrt(1 + mean * mean);
  }
  return {
    ...road,
    along: 'distance',
    name: 'bench',
    size,
    rawElevation: null,
    gradeSd: array(),
    heading: null,
    curvature: null,
    crosswind: array(),
    airDensity: array().fill(1.2),
    airTemperature: array().fill(288.15),
    latitudeDeg: null,
    longitudeDeg: null,
    grid,
    smoothing: null,
    masks: [],
    repairs: [],
    warnings: [],
    turnsAt: null,
    points: null,
  };
}

const VEHICLE = { mass: 215, rotating: 9, cda: 0.58, c0: 0.014, fct: 40, fpeak: 320, ppeak: 6000, lag: 0.15 };
const LOOP = { sample: 0.02, kp: 0.15, ki: 0.012, tracking: 4, set: 60 / 3.6, bin: 10 };

/** The plan for the library. `compile` is its forceDrive. */
export function benchPlan(library, road, scheme) {
  const drive = library.forceDrive({
    peakForce: VEHICLE.fpeak,
    peakPower: VEHICLE.ppeak,
    closedThrottleForce: VEHICLE.fct,
    lag: VEHICLE.lag,
    derate: 'none',
  });
  return {
    road,
    vehicle: {
      name: 'bench',
      mass: VEHICLE.mass,
      payload: 0,
      rotatingMass: VEHICLE.rotating,
      roadLoad: { cda: VEHICLE.cda, yawGain: 0, yawTable: null, c0: VEHICLE.c0, c1: 0, c2: 0 },
      drive,
      actuator: { deadTime: 0, resolution: 0, travel: null, slack: 0, lag: 0, rateLimit: null },
      sensor: { pulses: null, noise: null, filter: 0, delay: 0, scaleError: 0 },
    },
    controller: {
      kind: 'pi',
      kp: LOOP.kp,
      ki: LOOP.ki,
      setpointWeight: 1,
      sample: LOOP.sample,
      computingDelay: 0,
      integration: 'forward',
      antiWindup: { kind: 'back_calculation', trackingTime: LOOP.tracking },
      ramp: null,
      design: null,
    },
    hold: { setSpeed: LOOP.set, setSpeedIs: 'true_speed', startSpeed: LOOP.set, changes: [] },
    rider: { brakesAbove: null, shifts: [] },
    scheme,
    bands: [2 / 3.6],
    bin: LOOP.bin,
    timeLimit: 1e7,
    lockedSample: LOOP.sample,
  };
}

/** The same road and loop for reference.c and solver.py: 16 parameters, then station, g sin, g cos, headwind a row. */
export function benchBytes(road) {
  const half = 0.5 * 1.2 * VEHICLE.cda;
  const row = (i) => {
    const cos = 1 / Math.sqrt(1 + road.grade[i] * road.grade[i]);
    return [road.station[i], GRAVITY * road.grade[i] * cos, GRAVITY * cos, road.headwind[i]];
  };
  const [, gs, gc, wind] = row(0);
  const air = LOOP.set + wind;
  const force = half * air * air + VEHICLE.mass * (VEHICLE.c0 * gc + gs);
  const throttle = (force + VEHICLE.fct) / (Math.min(VEHICLE.fpeak, VEHICLE.ppeak / LOOP.set) + VEHICLE.fct);
  const parameters = [
    VEHICLE.mass,
    VEHICLE.mass + VEHICLE.rotating,
    half,
    VEHICLE.c0,
    VEHICLE.fct,
    VEHICLE.fpeak,
    VEHICLE.ppeak,
    LOOP.sample,
    LOOP.kp,
    LOOP.ki,
    1 / LOOP.tracking,
    LOOP.set,
    VEHICLE.lag,
    LOOP.bin,
    LOOP.set,
    throttle,
  ];
  const out = new Float64Array(16 + 4 * road.size);
  out.set(parameters);
  for (let i = 0; i < road.size; i++) out.set(row(i), 16 + 4 * i);
  return out;
}
