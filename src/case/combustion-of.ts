import {
  fromGPerHour,
  fromGPerKwh,
  fromKgPerLitre,
  fromLitre,
  fromMjPerKg,
  fromPct,
  fromRpm,
} from '../units/convert.ts';
import type { Gearbox } from '../vehicle/drive.ts';
import type {
  CombustionSpec,
  EngineDriveSpec,
  FuelSpec,
  TorqueSpec,
  VariatorDriveSpec,
} from '../vehicle/engine-spec.ts';
import { PLATE_SHAPE } from './combustion-schema.ts';
import type { DriveFileOf } from './drive-schemas.ts';

type EngineFile = DriveFileOf<'engine'>;
type VariatorFile = DriveFileOf<'variator'>;
type CombustionFile = EngineFile | VariatorFile;
type FuelFile = NonNullable<CombustionFile['fuel']>;

const column = <Row>(rows: readonly Row[], of: (row: Row) => number): Float64Array =>
  Float64Array.from(rows, of);

/**
 * An engine with gears, in SI.
 *
 * @param gear engaged, from 1; null: that of the file
 */
export function engineSpecOf(file: EngineFile, gear: number | null): EngineDriveSpec {
  return {
    ...combustionOf(file),
    ratios: file.gear_ratios.map((ratio) => ratio * file.primary_ratio * file.final_ratio),
    gear: (gear ?? file.gear ?? file.gear_ratios.length) - 1,
    wheelRadius: file.wheel_radius_m,
    gearbox: gearboxOf(file.gearbox),
  };
}

/** An engine with a belt, in SI. */
export function variatorSpecOf(file: VariatorFile): VariatorDriveSpec {
  const { belt, clutch } = file;
  return {
    ...combustionOf(file),
    leastRatio: belt.high_ratio * belt.final_ratio,
    greatestRatio: belt.low_ratio * belt.final_ratio,
    wheelRadius: file.wheel_radius_m,
    line: {
      throttle: column(belt.line, ({ throttle_pct }) => fromPct(throttle_pct)),
      shaftSpeed: column(belt.line, ({ rpm }) => fromRpm(rpm)),
    },
    ratioLag: belt.lag_s,
    clutch: { begins: fromRpm(clutch.begins_rpm), locked: fromRpm(clutch.locked_rpm) },
  };
}

/** Engine speed below which the engine dies [rpm]; by default half of the idle speed. */
export const stallRpm = (file: { readonly idle_rpm: number; readonly stall_rpm?: number }): number =>
  file.stall_rpm ?? file.idle_rpm / 2;

function combustionOf(file: CombustionFile): CombustionSpec {
  const { closed_throttle_drag: drag, fuel_cut: cut } = file;
  return {
    torque: torqueOf(file.torque),
    drag:
      drag === undefined
        ? null
        : { shaftSpeed: column(drag, ({ rpm }) => fromRpm(rpm)), torque: column(drag, ({ nm }) => nm) },
    fuelCut:
      cut === undefined
        ? null
        : {
            above: fromRpm(cut.above_rpm),
            blend: fromRpm(cut.blend_rpm),
            throttle: fromPct(cut.below_throttle_pct),
            torque: cut.extra_drag_nm,
          },
    idle: fromRpm(file.idle_rpm),
    stall: fromRpm(stallRpm(file)),
    revLimit: file.rev_limit_rpm === undefined ? null : fromRpm(file.rev_limit_rpm),
    limitBand: fromRpm(file.rev_limit_band_rpm),
    inertia: file.engine_inertia_kg_m2,
    efficiency: fromPct(file.driveline_efficiency_pct),
    lag: file.lag_s,
    derate: file.altitude_derate,
    fuel: file.fuel === undefined ? null : fuelOf(file.fuel),
  };
}

function torqueOf(file: CombustionFile['torque']): TorqueSpec {
  if ('map' in file)
    return {
      kind: 'map',
      shaftSpeed: Float64Array.from(file.map.rpm, fromRpm),
      throttle: Float64Array.from(file.map.throttle_pct, fromPct),
      torque: Float64Array.from(file.map.nm.flat()),
    };
  if ('full_load' in file)
    return {
      kind: 'full_load',
      shaftSpeed: column(file.full_load, ({ rpm }) => fromRpm(rpm)),
      torque: column(file.full_load, ({ nm }) => nm),
      ...shapeOf(file.full_load, file.part_throttle),
    };
  return {
    kind: 'parabola',
    peak: file.peak_nm,
    peakSpeed: fromRpm(file.peak_rpm),
    falloff: file.falloff,
  };
}

type FullLoadFile = Extract<CombustionFile['torque'], { full_load: unknown }>;

/** Without a word about it, part throttle is that of a throttle plate at the engine speed of the greatest torque. */
function shapeOf(
  rows: FullLoadFile['full_load'],
  file: FullLoadFile['part_throttle'],
): { readonly shape: number; readonly shapeSpeed: number | null } {
  if (file !== undefined)
    return { shape: file.shape, shapeSpeed: file.at_rpm === undefined ? null : fromRpm(file.at_rpm) };
  const best = rows.reduce((most, one) => (one.nm > most.nm ? one : most));
  return { shape: PLATE_SHAPE, shapeSpeed: fromRpm(best.rpm) };
}

function fuelOf(file: FuelFile): FuelSpec {
  const heat = fromMjPerKg(file.heating_value_mj_per_kg);
  return {
    use:
      'willans' in file
        ? { kind: 'willans', friction: file.willans.friction_nm, slope: fromPct(file.willans.slope_pct) }
        : {
            kind: 'bsfc',
            shaftSpeed: Float64Array.from(file.bsfc.rpm, fromRpm),
            torque: Float64Array.from(file.bsfc.nm),
            consumption: Float64Array.from(file.bsfc.g_per_kwh.flat(), fromGPerKwh),
            idlePower: fromGPerHour(file.bsfc.idle_g_per_h) * heat,
          },
    heat,
    density: fromKgPerLitre(file.density_kg_per_l),
    tank: file.tank_l === undefined ? null : fromLitre(file.tank_l),
  };
}

function gearboxOf(file: EngineFile['gearbox']): Gearbox {
  if (file.kind === 'fixed') return { kind: 'fixed' };
  if (file.kind === 'clutch') return { kind: 'clutch', open: file.open_s, resume: file.resume_s };
  const lines = file.shift_lines;
  return {
    kind: 'automatic',
    throttle: column(lines, ({ throttle_pct }) => fromPct(throttle_pct)),
    upSpeed: column(lines, ({ up_rpm }) => fromRpm(up_rpm)),
    downSpeed: column(lines, ({ down_rpm }) => fromRpm(down_rpm)),
    gap: file.gap_s,
    dwell: file.dwell_s,
  };
}
