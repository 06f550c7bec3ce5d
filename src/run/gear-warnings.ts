import type { RiderPlan } from '../loop/plan.ts';
import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import type { Demand, Replayed } from '../study/findings.ts';
import { fromRpm, toKm, toKmh, toRpm } from '../units/convert.ts';
import { turningRange } from '../vehicle/turning-range.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';

/** A set speed this near to the end of its gear is worth a word. */
const NEAR = 0.1;

const km = (distance: number): string => `km ${toKm(distance).toFixed(2)}`;

/** Gears: set speeds near to an end of their gear, holds that planned shifts cancel, how often a gearbox shifts. */
export function gearWarnings(
  road: Road,
  { drive }: Vehicle,
  rider: RiderPlan,
  demand: Demand,
  replayed: readonly Replayed[],
): readonly Warning[] {
  return [
    ...(drive.gearbox.kind === 'automatic'
      ? []
      : [...nearEnds(road, drive, demand), ...belowIdle(road, drive, demand)]),
    ...rider.shifts.flatMap((_, i) => cancelled(i, replayed)),
    ...automatic(replayed),
  ];
}

/** One warning for each gear and end: where the set speed first comes near to it, and to where. */
function nearEnds(road: Road, drive: Vehicle['drive'], demand: Demand): readonly Warning[] {
  const ranges = drive.gears.map((_, gear) => turningRange(drive, gear));
  const found = new Map<string, { code: string; words: string; from: number; to: number }>();
  for (let i = 0; i < road.size; i++) {
    const gear = demand.gear[i] ?? 0;
    const { least, greatest } = ranges[gear] ?? { least: 0, greatest: Number.POSITIVE_INFINITY };
    const speed = demand.setSpeed[i] ?? 0;
    const high = speed > (1 - NEAR) * greatest;
    if (!high && speed >= (1 + NEAR) * least) continue;
    const key = `${gear} ${high}`;
    const x = road.distance[i] ?? 0;
    const before = found.get(key);
    if (before !== undefined) {
      before.to = x;
      continue;
    }
    const which = drive.gears.length > 1 ? `gear ${gear + 1}` : 'the drive';
    const end = high
      ? `${which} reaches its rev limit at ${toKmh(greatest).toFixed(1)} km/h: beyond it full throttle gives nothing`
      : `${which} cannot turn below ${toKmh(least).toFixed(1)} km/h: a climb that takes the speed there stalls it`;
    found.set(key, {
      code: high ? 'near-rev-limit' : 'near-stall',
      words: `The set speed of ${toKmh(speed).toFixed(1)} km/h from ${km(x)} on is near the end of its gear: ${end}.`,
      from: x,
      to: x,
    });
  }
  return [...found.values()].map(({ code, words, from, to }) => ({ code, message: words, from, to }));
}

/** Where the set speed first turns the engine more slowly than it idles, in which gear, and how fast that gear is. */
function belowIdle(
  road: Road,
  { belt, gears, idleSpeed }: Vehicle['drive'],
  demand: Demand,
): readonly Warning[] {
  if (belt !== null || gears.length < 2) return [];
  for (let i = 0; i < road.size; i++) {
    const gear = demand.gear[i] ?? 0;
    const ratio = gears[gear]?.ratio ?? 0;
    const speed = demand.setSpeed[i] ?? 0;
    const turns = ratio * speed;
    if (turns >= idleSpeed) continue;
    const from = road.distance[i] ?? 0;
    return [
      {
        code: 'below-idle',
        message: `The set speed of ${toKmh(speed).toFixed(1)} km/h from ${km(from)} on turns the engine at ${toRpm(turns).toFixed(0)} rpm in gear ${gear + 1}, below its idle of ${toRpm(idleSpeed).toFixed(0)} rpm: that gear goes ${toKmh(fromRpm(1000) / ratio).toFixed(1)} km/h at 1000 rpm.`,
        from,
        to: from,
      },
    ];
  }
  return [];
}

/** A shift this much further than it was planned waited for the one before [m]. */
const MOVED = 5;

/** What the planned shift of this number did to the holds. */
function cancelled(number: number, replayed: readonly Replayed[]): readonly Warning[] {
  const made = replayed.flatMap(({ name, result }) => {
    const shift = result.shifts.filter(({ resumedAt }) => resumedAt !== null)[number];
    if (shift === undefined) return [];
    const resumedAt = shift.resumedAt ?? 0;
    return [{ name, shift, seconds: resumedAt - shift.time, resumed: resumedAt < result.endTime }];
  });
  const [first] = made;
  if (first === undefined) return [];
  const { shift } = first;
  const planned = replayed[0]?.plan.rider.shifts[number]?.distance ?? shift.distance;
  const moved =
    shift.distance - planned > MOVED
      ? ` It was planned at ${km(planned)}, where the shift before was still being made.`
      : '';
  const resumed = made.filter((hold) => hold.resumed);
  const ended = made.filter((hold) => !hold.resumed).map(({ name }) => name);
  const longest = resumed.reduce((most, { seconds }) => Math.max(most, seconds), 0);
  const exceptions = ended.length === 0 ? '' : `, but the run of ${ended.join(', ')} ends before`;
  const after =
    resumed.length === 0
      ? 'the run ends before hold resumes'
      : `hold resumes ${longest.toFixed(1)} s later${exceptions}`;
  return [
    {
      code: 'hold-cancelled',
      message: `Hold is cancelled at ${km(shift.distance)}: the rider shifts there from gear ${shift.from + 1} to ${shift.to + 1}, and ${after}.${moved}`,
      from: shift.distance,
      to: shift.distance,
    },
  ];
}

function automatic(replayed: readonly Replayed[]): readonly Warning[] {
  const counts = replayed.map(({ name, result }) => ({
    name,
    count: result.shifts.filter(({ resumedAt }) => resumedAt === null).length,
  }));
  if (counts.every(({ count }) => count === 0)) return [];
  const words = counts.map(({ name, count }) => `${name} ${count} ${count === 1 ? 'time' : 'times'}`);
  return [
    {
      code: 'automatic-shifts',
      message: `The gearbox shifts by itself, each time with a gap of torque: ${words.join(', ')}.`,
    },
  ];
}
