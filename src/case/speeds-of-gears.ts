import type { Problem } from '../problems/input-error.ts';
import { fromPct, fromRpm, toKmh } from '../units/convert.ts';
import { stallRpm } from './combustion-of.ts';
import type { DriveFileOf } from './drive-schemas.ts';
import type { CaseDocument } from './read-case-file.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { type Path, placeOf } from './yaml-source.ts';

/** Speeds that an engine can turn, as the case writes them [km/h]. */
interface Range {
  readonly least: number;
  readonly greatest: number;
  readonly words: string;
}

/** A speed that the case asks for, and the gears that may be engaged then. */
interface Asked {
  readonly path: Path;
  readonly speedKmh: number;
  readonly gears: readonly number[];
}

/**
 * Set speeds at which the engaged gear would stall or run beyond the rev limit. With an automatic gearbox any gear
 * may be engaged; a change at a time may fall in any gear of the rider's plan. A belt's clutch slips before it stalls.
 */
export function speedsOfGears(document: CaseDocument, vehicle: VehicleDocument): Problem[] {
  const { drive } = vehicle.file;
  const { hold } = document.file;
  const shown =
    hold.set_speed_is === 'indicated' ? 1 + fromPct(vehicle.file.speed_sensor.scale_error_pct) : 1;
  if (drive?.kind === 'variator') {
    const { high_ratio, final_ratio } = drive.belt;
    const greatest = kmhAt(drive.rev_limit_rpm, high_ratio * final_ratio, drive.wheel_radius_m);
    const range = { least: 0, greatest: greatest * shown, words: 'high gear of the belt' };
    return speedsOf(document).flatMap(({ path, speedKmh }) => beyond(document, path, speedKmh, [range]));
  }
  if (drive?.kind !== 'engine') return [];
  return askedOf(document, drive).flatMap(({ path, speedKmh, gears }) =>
    beyond(
      document,
      path,
      speedKmh,
      gears.map((gear) => rangeOf(drive, gear, shown)),
    ),
  );
}

/** Speed at an engine speed; without a limit of the engine speed there is none of the speed [km/h]. */
const kmhAt = (rpm: number | undefined, ratio: number, radius: number): number =>
  rpm === undefined ? Number.POSITIVE_INFINITY : toKmh((fromRpm(rpm) * radius) / ratio);

function rangeOf(drive: DriveFileOf<'engine'>, gear: number, shown: number): Range {
  const ratio = (drive.gear_ratios[gear - 1] ?? 1) * drive.primary_ratio * drive.final_ratio;
  return {
    least: kmhAt(stallRpm(drive), ratio, drive.wheel_radius_m) * shown,
    greatest: kmhAt(drive.rev_limit_rpm, ratio, drive.wheel_radius_m) * shown,
    words: `gear ${gear}`,
  };
}

const speedsOf = ({ file: { hold } }: CaseDocument): { path: Path; speedKmh: number }[] => [
  { path: ['hold', 'set_speed_kmh'], speedKmh: hold.set_speed_kmh },
  ...(hold.start_speed_kmh === undefined
    ? []
    : [{ path: ['hold', 'start_speed_kmh'], speedKmh: hold.start_speed_kmh }]),
  ...hold.changes.map(({ set_speed_kmh }, i) => ({
    path: ['hold', 'changes', i, 'set_speed_kmh'],
    speedKmh: set_speed_kmh,
  })),
];

/** Every set speed with the gears that may be engaged, and every shift with the set speed that is in force there. */
function askedOf(document: CaseDocument, drive: DriveFileOf<'engine'>): Asked[] {
  const { gear_ratios: ratios, gearbox } = drive;
  const { hold } = document.file;
  const start = hold.gear ?? drive.gear ?? ratios.length;
  if (gearbox.kind === 'automatic') {
    const all = ratios.map((_, i) => i + 1);
    return speedsOf(document).map((asked) => ({ ...asked, gears: all }));
  }
  const planned = [start, ...hold.shifts.map(({ gear }) => gear)];
  const gearAt = (km: number): number => hold.shifts.findLast(({ at_km }) => at_km <= km)?.gear ?? start;
  const speeds = speedsOf(document).map(({ path, speedKmh }): Asked => {
    const change = path[1] === 'changes' ? hold.changes[Number(path[2])] : undefined;
    if (change === undefined) return { path, speedKmh, gears: [start] };
    return { path, speedKmh, gears: 'at_km' in change ? [gearAt(change.at_km)] : planned };
  });
  // Which set speed is in force at a shift is not known where it changes at a time.
  if (hold.changes.some((change) => 'at_s' in change)) return speeds;
  const shifts = hold.shifts.map(({ at_km, gear }, i): Asked => {
    const change = hold.changes.findLast((one) => 'at_km' in one && one.at_km <= at_km);
    const speedKmh = change?.set_speed_kmh ?? hold.set_speed_kmh;
    return { path: ['hold', 'shifts', i, 'gear'], speedKmh, gears: [gear] };
  });
  return [...speeds, ...shifts];
}

function beyond({ source }: CaseDocument, path: Path, speedKmh: number, ranges: readonly Range[]): Problem[] {
  if (ranges.some(({ least, greatest }) => speedKmh >= least && speedKmh <= greatest)) return [];
  const stalls = ranges.every(({ least }) => speedKmh < least);
  const words = [...new Set(ranges.map((range) => range.words))].join(', ');
  const allowed = ranges.map(({ least, greatest, words: gear }) => {
    // Rounded inwards: what is written here is allowed.
    const from = (Math.ceil(least * 10) / 10).toFixed(1);
    const range =
      greatest === Number.POSITIVE_INFINITY
        ? `at least ${from} km/h`
        : `${from} to ${(Math.floor(greatest * 10) / 10).toFixed(1)} km/h`;
    return `${range} in ${gear}`;
  });
  return [
    {
      code: 'beyond-the-gear',
      place: placeOf(source, path),
      message: stalls
        ? `the engine would stall at this set speed in ${words}`
        : `the engine would turn beyond its limit at this set speed in ${words}`,
      found: `${speedKmh} km/h`,
      allowed: [...new Set(allowed)].slice(0, 8).join(', or '),
    },
  ];
}
