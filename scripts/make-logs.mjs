// Makes the demo logs of routes/logs/: an invented light motorcycle on invented roads, as a data logger would have it.
// Nothing in them was measured. Seeded: the same files each time.
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { normal, stream } from './random.mjs';
import { root } from './run.mjs';

const GRAVITY = 9.80665;
const STEP_S = 0.02;
/** Truth behind the logs: what a fit should find, in air of 12 deg C and 1004 hPa. */
const MACHINE = {
  mass_kg: 215,
  rotating_kg: 9,
  cda_m2: 0.61,
  crr: 0.0152,
  density_kg_m3: 100400 / (287.05 * 285.15),
};

/** First-order Gauss-Markov noise in time: a gust, a drift. */
function wandering(random, sd, time_s) {
  const keep = Math.exp(-STEP_S / time_s);
  let value = sd * normal(random);
  return () => {
    value = keep * value + sd * Math.sqrt(1 - keep * keep) * normal(random);
    return value;
  };
}

const resistance = (speed, headwind, grade) => {
  const { mass_kg, cda_m2, crr, density_kg_m3 } = MACHINE;
  const ahead = speed + headwind;
  return (density_kg_m3 / 2) * cda_m2 * ahead * Math.abs(ahead) + mass_kg * GRAVITY * (crr + grade);
};

/** Ten runs, five each way, out of gear from about 95 km/h to 25, in a light wind on a slope of 0.15 %. */
function coastDown() {
  const random = stream(3);
  const rows = ['run,direction,time_s,speed_kmh'];
  for (let run = 1; run <= 10; run++) {
    const forth = run % 2 === 1 ? 1 : -1;
    const wind = 1.1 + 0.3 * normal(random);
    const gust = wandering(random, 0.4, 3);
    let speed = (93 + 4 * random()) / 3.6;
    for (let i = 0; speed > 25 / 3.6; i++) {
      if (i % 10 === 0)
        rows.push(
          `${run},${forth > 0 ? 'there' : 'back'},${(i * STEP_S).toFixed(1)},${(3.6 * speed + 0.12 * normal(random)).toFixed(2)}`,
        );
      const force = resistance(speed, forth * (wind + gust()), forth * 0.0015);
      speed -= (force / (MACHINE.mass_kg + MACHINE.rotating_kg)) * STEP_S;
    }
  }
  return rows;
}

/** Throttle steps up and down about 60 km/h: 1.35 km/h per %, 8 s, 0.4 s. */
function steps() {
  const random = stream(815);
  const drift = wandering(random, 0.15, 4);
  const levels = [30, 36, 30, 25, 30, 38, 30];
  const rows = ['time_s,throttle_pct,speed_kmh'];
  let speed = 60;
  const delayed = Array(Math.round(0.4 / STEP_S)).fill(levels[0]);
  const each = 42 / STEP_S;
  for (let i = 0; i < levels.length * each; i++) {
    const throttle = levels[Math.floor(i / each)];
    if (i % 10 === 0)
      rows.push(
        `${(i * STEP_S).toFixed(1)},${throttle},${(speed + drift() + 0.1 * normal(random)).toFixed(2)}`,
      );
    delayed.push(throttle);
    speed += ((60 + 1.35 * (delayed.shift() - 30) - speed) / 8) * STEP_S;
  }
  return rows;
}

/** A ride over invented hills at about 50 and then 80 km/h, with a power meter in the wheel. */
function ride() {
  const random = stream(2202);
  const gust = wandering(random, 0.5, 6);
  const wish = wandering(random, 0.8, 40);
  const height = (x) => 120 + 18 * Math.sin(x / 620) + 7 * Math.sin(x / 210 + 1) + 0.006 * x;
  const slope = (x) => (height(x + 1) - height(x - 1)) / 2;
  const drift = wandering(random, 0.2, 120);
  const rows = ['time_s,distance_m,speed_kmh,elevation_m,wheel_power_kw'];
  let [speed, distance, held] = [50 / 3.6, 0, 100];
  for (let i = 0; distance < 14000; i++) {
    const error = (distance < 6000 ? 50 : 80) / 3.6 + wish() - speed;
    held += 12 * error * STEP_S;
    const power = Math.max(-1500, Math.min(9800, (held + 90 * error) * speed));
    const baro = drift();
    if (i % 50 === 0)
      rows.push(
        [
          (i * STEP_S).toFixed(0),
          distance.toFixed(1),
          (3.6 * speed + 0.1 * normal(random)).toFixed(2),
          (height(distance) + baro).toFixed(1),
          ((power * (1 + 0.01 * normal(random))) / 1000).toFixed(3),
        ].join(','),
      );
    const force = power / speed - resistance(speed, gust(), slope(distance));
    speed += (force / (MACHINE.mass_kg + MACHINE.rotating_kg)) * STEP_S;
    distance += speed * STEP_S;
  }
  return rows;
}

const logs = {
  'gallop-field-coast-down.csv': coastDown(),
  'gallop-field-steps.csv': steps(),
  'gallop-field-ride.csv': ride(),
};
mkdirSync(join(root, 'routes/logs'), { recursive: true });
for (const [name, rows] of Object.entries(logs)) {
  writeFileSync(join(root, 'routes/logs', name), `${rows.join('\n')}\n`);
  console.log(`routes/logs/${name}: ${rows.length - 1} rows`);
}
