import { BUS_TARGET } from '../control/bus.ts';
import { stallSpeed } from './engage-gear.ts';
import { journey } from './journey.ts';
import * as at from './layout.ts';
import { distanceAt, stationAt } from './places.ts';
import type { LoopPlan } from './plan.ts';
import { machineAt, type ReplayStart } from './replay.ts';
import { statusOf } from './status.ts';

/** Time [s], horizontal distance [m], set speed and speed (both true, [m/s]) of every sample; the columns are longer than `size`. */
export interface SpeedTrace {
  readonly size: number;
  readonly time: Float64Array;
  readonly distance: Float64Array;
  readonly setSpeed: Float64Array;
  readonly speed: Float64Array;
}

/**
 * The speeds of a replay and nothing else, for a fraction of its time and memory: the kernel runs in chunks, not sample
 * by sample. Speeds and times are those of `replay` bit for bit; a distance within a chunk is shared out by the speeds,
 * which is right to a centimetre.
 *
 * @param to horizontal distance [m] at which the window ends
 * @param from horizontal distance [m] from which samples are kept
 */
export function traceSpeeds(plan: LoopPlan, start: ReplayStart, to: number, from: number): SpeedTrace {
  const { road } = plan;
  const machine = machineAt(plan, start);
  const { s, p, log, chunk } = machine;
  const end = road.distance[road.size - 1];
  const until = to >= end ? Number.POSITIVE_INFINITY : stationAt(road, to);
  let columns = emptyTrace(4096);
  let size = 0;
  let keeping = false;
  let tick = 0;
  let distance = 0;
  const keep = (): void => {
    const ticks = chunk[at.C_TICKS];
    if (ticks === 0) return;
    const behind = distanceAt(road, s[at.STATION]);
    if (keeping) {
      while (size + ticks > columns.time.length) columns = grown(columns);
      // Samples are whole but for the last one of a run.
      const cut = ticks - chunk[at.C_TIME] / p[at.P_SAMPLE];
      let sum = -cut * log[(ticks - 1) * at.L_STRIDE + at.L_SPEED];
      for (let i = 0; i < ticks; i++) sum += log[i * at.L_STRIDE + at.L_SPEED];
      let passed = 0;
      for (let i = 0; i < ticks; i++) {
        const speed = log[i * at.L_STRIDE + at.L_SPEED];
        columns.time[size] = (tick + i) * p[at.P_SAMPLE];
        columns.distance[size] = distance + (sum > 0 ? passed / sum : 0) * (behind - distance);
        columns.setSpeed[size] = s[BUS_TARGET] * p[at.P_TO_TRUE];
        columns.speed[size++] = speed;
        passed += speed;
      }
    }
    tick += ticks;
    distance = behind;
  };
  const run = journey(machine, plan, keep);
  if (s[at.SPEED] < stallSpeed(machine)) return { ...columns, size };
  const status = statusOf(run.advance(Math.min(until, stationAt(road, from)), Number.POSITIVE_INFINITY));
  keeping = true;
  tick = s[at.TICK];
  distance = distanceAt(road, s[at.STATION]);
  if (status === null) run.advance(until, Number.POSITIVE_INFINITY);
  return { ...columns, size };
}

type Columns = Omit<SpeedTrace, 'size'>;

function emptyTrace(length: number): Columns {
  const column = (): Float64Array => new Float64Array(length);
  return { time: column(), distance: column(), setSpeed: column(), speed: column() };
}

function grown(old: Columns): Columns {
  const more = emptyTrace(2 * old.time.length);
  more.time.set(old.time);
  more.distance.set(old.distance);
  more.setSpeed.set(old.setSpeed);
  more.speed.set(old.speed);
  return more;
}
