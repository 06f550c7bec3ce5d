// Makes the demo tracks of routes/: invented roads in an invented county. The coordinates lie in the open
// Atlantic on purpose, so that nobody takes them for a real road. Seeded: the same files each time.
import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { normal, stream } from './random.mjs';
import { root } from './run.mjs';

const EARTH_RADIUS_M = 6371000; // good enough to lay out an invented road
const STEP_M = 2;

/** Pieces [length_m, value] laid end to end each STEP_M, then averaged over `window_m`: straight pieces and smooth joints. */
function lay(pieces, window_m) {
  const raw = pieces.flatMap(([length, value]) => Array(Math.round(length / STEP_M)).fill(value));
  const half = Math.round(window_m / STEP_M / 2);
  const sums = [0];
  for (const value of raw) sums.push(sums.at(-1) + value);
  return raw.map((_, i) => {
    const from = Math.max(0, i - half);
    const to = Math.min(raw.length, i + half + 1);
    return (sums[to] - sums[from]) / (to - from);
  });
}

/** Running sum of value * step, starting at `start`. */
function integrate(values, start) {
  const out = [start];
  for (const value of values) out.push(out.at(-1) + value * STEP_M);
  return out;
}

/** First-order Gauss-Markov noise along the way. */
function coloured(random, count, step_m, sd, length_m) {
  const keep = Math.exp(-step_m / length_m);
  const out = [sd * normal(random)];
  while (out.length < count) out.push(keep * out.at(-1) + sd * Math.sqrt(1 - keep * keep) * normal(random));
  return out;
}

/** Positions each STEP_M from heading pieces [length_m, heading_deg]. */
function plan(pieces, window_m, start) {
  const heading = lay(pieces, window_m);
  const east = integrate(
    heading.map((deg) => Math.sin((deg * Math.PI) / 180)),
    0,
  );
  const north = integrate(
    heading.map((deg) => Math.cos((deg * Math.PI) / 180)),
    0,
  );
  const metresPerDeg = (EARTH_RADIUS_M * Math.PI) / 180;
  return {
    heading,
    lat: north.map((n) => start.lat + n / metresPerDeg),
    lon: east.map((e) => start.lon + e / (metresPerDeg * Math.cos((start.lat * Math.PI) / 180))),
  };
}

// Harrow Gap: out of Harrow Cross, over the rolling Lows, across the Siller viaduct, up the pass, down to Nether Tarrow.
const HARROW_GRADES = [
  [700, 0.2],
  [500, 1.8],
  [600, -1.2],
  [450, 3.4],
  [350, -2.6],
  [600, 0.6],
  [500, 4.6],
  [420, -4.2],
  [380, 5.4],
  [300, -5.8],
  [520, 2.2],
  [640, -1.6],
  [400, 5.9],
  [360, -5.2],
  [700, 1.1],
  [480, -3.1],
  [900, 0.9],
  [400, -0.6],
  [700, 0.4],
  [450, 3.2],
  [600, 6.2],
  [420, 8.1],
  [260, 4.0],
  [520, 9.4],
  [180, 11.6],
  [400, 6.6],
  [460, 10.4],
  [240, 3.1],
  [360, 7.4],
  [200, 12.0],
  [300, 8.2],
  [500, 5.1],
  [420, 2.0],
  [500, 0.1],
  [380, -3.0],
  [520, -6.4],
  [640, -8.2],
  [300, -4.4],
  [760, -10.6],
  [260, -5.0],
  [420, -9.2],
  [560, -6.1],
  [480, -3.4],
  [700, -1.0],
  [520, 2.6],
  [460, -2.9],
  [400, 4.4],
  [380, -4.0],
  [900, 0.3],
  [440, 6.0],
  [420, -5.6],
  [800, -0.4],
  [520, 3.0],
  [500, -2.2],
  [900, 0.1],
];
const HARROW_HEADINGS = [
  [1400, 62],
  [700, 88],
  [900, 54],
  [1100, 31],
  [800, 76],
  [1300, 48],
  [600, 20],
  [1500, 57],
  [700, 95],
  [2200, 70],
  [700, 40],
  [380, 110],
  [420, 20],
  [360, 125],
  [460, 35],
  [520, 75],
  [400, 5],
  [380, 90],
  [520, 30],
  [900, 55],
  [700, 85],
  [420, 20],
  [380, 120],
  [500, 40],
  [440, 100],
  [900, 60],
  [1200, 82],
  [1500, 108],
  [1100, 86],
  [900, 128],
  [1400, 95],
  [1000, 70],
  [1500, 100],
];

/** The road itself, without the errors of a planner: grade, elevation and positions each STEP_M. */
function harrowRoad() {
  const grade = lay(
    HARROW_GRADES.map(([length, pct]) => [length, pct / 100]),
    110,
  );
  const elevation = integrate(grade, 96);
  const headings = [...HARROW_HEADINGS, [4000, 92]];
  const way = plan(headings, 90, { lat: 51.9, lon: -14.6 });
  return { grade, elevation, way, total_m: grade.length * STEP_M };
}

function harrowGap({ elevation, way, total_m }) {
  const random = stream(20417);
  const viaduct = { from: 9300, to: 9560, depth: 31 };
  const gap = { from: 23150, to: 23830 };

  // points as a planner drops them: denser in bends, none in the gap
  const points = [];
  for (let at = 0; at < total_m; at += 9 + 13 * random()) {
    if (at > gap.from && at < gap.to) continue;
    points.push(Math.round(at / STEP_M));
  }
  const east = coloured(random, points.length, 15, 1.1, 250);
  const north = coloured(random, points.length, 15, 1.1, 250);
  const surface = coloured(random, points.length, 15, 0.15, 100);
  const rows = points.map((index, i) => {
    const at = index * STEP_M;
    // the terrain model has the river valley where the road runs on the viaduct
    const inside = at > viaduct.from && at < viaduct.to;
    const share = (at - viaduct.from) / (viaduct.to - viaduct.from);
    const dip = inside ? viaduct.depth * Math.sin(Math.PI * share) : 0;
    const spike = Math.abs(at - 6420) < 11 ? 24 : 0;
    return {
      lat: way.lat[index] + north[i] / 111195,
      lon: way.lon[index] + east[i] / (111195 * Math.cos((51.9 * Math.PI) / 180)),
      ele: elevation[index] - dip + spike + surface[i] + 0.05 * normal(random),
    };
  });
  rows.splice(410, 0, { ...rows[409] }); // a doubled point, as when two pieces of a plan meet
  return rows;
}

function gpx(name, description, rows, split) {
  const points = (part) =>
    part
      .map(
        (p) =>
          `      <trkpt lat="${p.lat.toFixed(6)}" lon="${p.lon.toFixed(6)}"><ele>${p.ele.toFixed(2)}</ele></trkpt>`,
      )
      .join('\n');
  const segment = (part) => `    <trkseg>\n${points(part)}\n    </trkseg>`;
  return `<?xml version="1.0" encoding="UTF-8"?>
<gpx version="1.1" creator="scripts/make-routes.mjs" xmlns="http://www.topografix.com/GPX/1/1">
  <metadata>
    <desc>${description}</desc>
  </metadata>
  <trk>
    <name>${name}</name>
${segment(rows.slice(0, split))}
${segment(rows.slice(split))}
  </trk>
</gpx>
`;
}

/** The invented machine of routes/vehicles/proving-125.yaml in fourth, as far as a ride by hand needs it. */
const RIDDEN = {
  mass_kg: 215,
  rotating_kg: 9 + 0.006 * (10.44 / 0.3) ** 2, // wheels, and the crankshaft through the gears
  cda_m2: 0.58,
  crr: 0.014,
  ratio: 1.09 * 3.35 * 2.86,
  wheel_m: 0.3,
  efficiency: 0.94,
  clutch_rpm: 1900, // slower the clutch slips
  fullLoad: [
    [1500, 8.6],
    [2500, 9.6],
    [3500, 10.0],
    [4500, 10.1],
    [5500, 10.1],
    [6500, 10.3],
    [7500, 10.4],
    [8500, 10.2],
    [9500, 8.9],
  ],
  drag: [
    [1500, 0.9],
    [5000, 1.4],
    [10000, 2.6],
  ],
  plate: { shape: 3, at_rpm: 5500 },
  fuelCut: { above_rpm: 2500, throttle: 0.01, nm: 0.2 },
};

function interpolated(points, x) {
  const inner = points.slice(1, -1).filter(([at]) => at < x).length;
  const [[x0, y0], [x1, y1]] = [points[inner], points[inner + 1]];
  return y0 + Math.min(1, Math.max(0, (x - x0) / (x1 - x0))) * (y1 - y0);
}

/** Force at the wheel. */
function riddenForce(speed, throttle) {
  const { ratio, wheel_m, efficiency, clutch_rpm, fullLoad, drag, plate, fuelCut } = RIDDEN;
  const rpm = Math.max(clutch_rpm, ((speed / wheel_m) * ratio * 30) / Math.PI);
  const bend = (plate.shape * plate.at_rpm) / rpm;
  const share = (1 - Math.exp(-bend * throttle)) / (1 - Math.exp(-bend));
  const closed = -interpolated(drag, rpm);
  const cut = throttle < fuelCut.throttle && rpm > fuelCut.above_rpm ? fuelCut.nm : 0;
  const torque = closed + share * (interpolated(fullLoad, rpm) - closed) - cut;
  return ((torque * ratio) / wheel_m) * (torque > 0 ? efficiency : 1 / efficiency);
}

/** Of dry air at 8 deg C, with 1008 hPa at sea level. */
const airDensity = (height) => (100800 / (287.05 * 281.15)) * Math.exp(-height / 8230);

/**
 * The same road ridden by hand, and logged once a second: an invented rider on an invented 125, who looks at the speedometer now
 * and then, runs out of power on the pass, waits at the crossing of Nether Tarrow, and whose receiver sees nothing in the wood.
 */
function harrowRidden({ grade, elevation, way, total_m }) {
  const random = stream(5113);
  const [step_s, gravity] = [0.1, 9.81];
  const { mass_kg, rotating_kg, cda_m2, crr } = RIDDEN;
  const wood = { from: 10900, to: 11420 };
  const crossing = { at: 20860, wait_s: 25 };
  const gust = coloured(random, 40000, step_s, 0.55, 18); // what the rider feels like, m/s
  const east = coloured(random, 4000, 1, 1.1, 45);
  const north = coloured(random, 4000, 1, 1.1, 45);
  const metresPerDeg = (EARTH_RADIUS_M * Math.PI) / 180;
  const rows = ['time_s,lat_deg,lon_deg,throttle_pct'];
  let [at, speed, throttle, wanted, change, waited, time] = [30, 9, 0.3, 0.3, 0, 0, 0];
  for (let tick = 0; at < total_m - 60; tick++) {
    const index = Math.min(Math.floor(at / STEP_M), grade.length - 1);
    const turn_deg =
      way.heading[Math.min(index + 15, grade.length - 1)] - way.heading[Math.max(index - 5, 0)];
    const radius = (20 * STEP_M) / Math.max(1e-6, Math.abs((turn_deg * Math.PI) / 180));
    const posted = at > 25360 ? 50 / 3.6 : 60 / 3.6;
    const fast = Math.min(posted + gust[tick % gust.length], Math.sqrt(2.6 * radius));
    const ahead = crossing.at - at;
    const stopping = waited < crossing.wait_s && ahead > -9 && speed * speed >= 2 * 1.4 * Math.max(0, ahead);
    // a hand moves each 0.7 s, for where the speed is going, and not at all for a small error
    if (tick % 7 === 0) {
      const error = fast - (speed + 1.8 * change);
      if (Math.abs(error) > 0.3) wanted = Math.min(1, Math.max(0, wanted + 0.03 * error));
      if (speed > fast + 2) wanted = 0;
    }
    if (stopping) wanted = 0;
    throttle += (wanted - throttle) * 0.25;
    const slope = Math.atan(grade[index]);
    const drag =
      0.5 * airDensity(elevation[index]) * cda_m2 * speed * speed +
      mass_kg * gravity * (crr * Math.cos(slope) + Math.sin(slope));
    // nobody brakes with the throttle open
    const tooFast = throttle < 0.01 && speed > fast + 1.5;
    const brake = stopping ? 1.4 : tooFast ? Math.min(2.5, 0.8 * (speed - fast - 1.5)) : 0;
    change = (riddenForce(speed, throttle) - drag) / (mass_kg + rotating_kg);
    if (brake > 0) change = Math.min(change, 0) - brake;
    speed = Math.max(0, speed + change * step_s);
    if (stopping && speed < 0.3) {
      speed = 0;
      waited += step_s;
      change = 0;
      if (waited >= crossing.wait_s) [wanted, throttle, speed] = [0.35, 0.3, 0.5];
    }
    if (tick % 10 === 0 && !(at > wood.from && at < wood.to)) {
      const share = at / STEP_M - index;
      const place = (values) => values[index] + share * (values[index + 1] - values[index]);
      const k = tick / 10;
      const lat = place(way.lat) + (north[k] + 0.35 * normal(random)) / metresPerDeg;
      const lon =
        place(way.lon) +
        (east[k] + 0.35 * normal(random)) / (metresPerDeg * Math.cos((51.9 * Math.PI) / 180));
      rows.push(`${time},${lat.toFixed(6)},${lon.toFixed(6)},${(100 * throttle).toFixed(1)}`);
    }
    if (tick % 10 === 9) time++;
    at += speed * step_s;
  }
  rows.splice(700, 0, rows[700]); // a doubled row, as when a logger stutters
  return rows;
}

// Tarrow Saltings: a causeway road round the marsh, flat, in the wind from the sea.
function tarrowSaltings() {
  const random = stream(7731);
  // past north the headings count on, so that a bend is taken the short way
  const headings = [
    [2600, 268],
    [900, 300],
    [1800, 352],
    [1400, 20 + 360],
    [2200, 88 + 360],
    [700, 130 + 360],
    [1900, 178 + 360],
    [800, 150 + 360],
    [1500, 92 + 360],
    [1200, 200 + 360],
    [1700, 265 + 360],
  ];
  const grades = [
    [2400, 0.02],
    [180, 1.6],
    [180, -1.6],
    [3600, -0.02],
    [240, 2.4],
    [240, -2.4],
    [3900, 0.03],
    [300, 1.2],
    [300, -1.2],
    [5360, -0.01],
  ];
  const grade = lay(
    grades.map(([length, pct]) => [length, pct / 100]),
    80,
  );
  const elevation = integrate(grade, 2.4);
  const heading = lay(headings, 120);
  const every = 20 / STEP_M;
  const count = Math.floor((grade.length - 1) / every);
  const noise = coloured(random, count + 1, 20, 0.5, 800);
  const rows = ['distance_m,elevation_m,heading_deg'];
  for (let i = 0; i <= count; i++) {
    const quantised = Math.round((elevation[i * every] + noise[i]) / 0.2) * 0.2;
    rows.push(
      `${i * 20},${quantised.toFixed(1)},${(heading[Math.min(i * every, heading.length - 1)] % 360).toFixed(1)}`,
    );
  }
  return `${rows.join('\n')}\n`;
}

const invented =
  'Invented road in the made-up county of Tarrow; the coordinates lie in the open sea. Not a real place.';
const harrowAsBuilt = harrowRoad();
const harrow = harrowGap(harrowAsBuilt);
const ridden = harrowRidden(harrowAsBuilt);
writeFileSync(join(root, 'routes/harrow-gap.gpx'), gpx('Harrow Gap', invented, harrow, 1180));
writeFileSync(join(root, 'routes/tarrow-saltings.csv'), tarrowSaltings());
writeFileSync(join(root, 'routes/harrow-gap-ridden.csv'), `${ridden.join('\n')}\n`);
console.log(
  `routes/harrow-gap.gpx: ${harrow.length} points; routes/harrow-gap-ridden.csv: ${ridden.length - 1}; routes/tarrow-saltings.csv`,
);
