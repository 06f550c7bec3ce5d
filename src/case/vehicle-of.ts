import { fromDeg, fromKmh, fromKw, fromNPerKmh, fromNPerKmh2, fromPct } from '../units/convert.ts';
import type { Drive } from '../vehicle/drive.ts';
import { electricDrive } from '../vehicle/electric-drive.ts';
import { forceDrive } from '../vehicle/force-drive.ts';
import { IDEAL_ACTUATOR, IDEAL_SENSOR } from '../vehicle/ideal.ts';
import { roadLoadOfCoefficients, roadLoadOfRegulation } from '../vehicle/road-load.ts';
import type { RoadLoad, Vehicle } from '../vehicle/vehicle.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { rotatingMassKg } from './vehicle-mass.ts';
import type { VehicleFile } from './vehicle-schema.ts';

type DriveFile = NonNullable<VehicleFile['drive']>;

/** A vehicle without a drive coasts. The drive law needs a force above 0: this one moves nothing [N]. */
const NO_FORCE = 0.001;

const driveOf: { readonly [K in DriveFile['kind']]: (file: Extract<DriveFile, { kind: K }>) => Drive } = {
  force: (file) =>
    forceDrive({
      peakForce: file.peak_force_n,
      peakPower: file.peak_power_kw === undefined ? null : fromKw(file.peak_power_kw),
      closedThrottleForce: file.closed_throttle_force_n,
      lag: file.lag_s,
      derate: file.altitude_derate,
    }),
  electric: (file) =>
    electricDrive({
      peakForce: file.peak_force_n,
      peakPower: file.peak_power_kw === undefined ? null : fromKw(file.peak_power_kw),
      closedThrottleForce: file.closed_throttle_force_n,
      regenerationForce: file.regeneration_force_n,
      regenerationPower: file.regeneration_power_kw === undefined ? null : fromKw(file.regeneration_power_kw),
      fadeSpeed: fromKmh(file.regeneration_fade_kmh),
      throttleMin: file.regeneration_force_n > 0 ? -1 : 0,
      lag: file.lag_s,
      efficiency:
        file.efficiency_pct === undefined
          ? null
          : {
              drive: fromPct(file.efficiency_pct.drive),
              regeneration: fromPct(file.efficiency_pct.regeneration),
            },
    }),
};

/** The vehicle of a file in SI, its drive compiled to the one drive law. */
export function vehicleOf({ file }: VehicleDocument): Vehicle {
  const { kerb_kg, rider_kg, payload_kg } = file.mass;
  const mass = kerb_kg + rider_kg + payload_kg;
  const { actuator, speed_sensor: sensor } = file;
  return {
    name: file.name ?? 'vehicle',
    mass,
    payload: payload_kg,
    rotatingMass: rotatingMassKg(file),
    roadLoad: roadLoadOf(file.road_load, mass),
    drive: compile(file.drive),
    actuator: {
      ...IDEAL_ACTUATOR,
      lag: actuator.lag_s,
      rateLimit: actuator.rate_limit_pct_per_s === undefined ? null : fromPct(actuator.rate_limit_pct_per_s),
    },
    sensor: {
      ...IDEAL_SENSOR,
      filter: sensor.filter_s,
      delay: sensor.delay_s,
      scaleError: fromPct(sensor.scale_error_pct),
    },
    traction: null,
  };
}

function compile(file: VehicleFile['drive']): Drive {
  if (file === undefined)
    return forceDrive({
      peakForce: NO_FORCE,
      peakPower: null,
      closedThrottleForce: 0,
      lag: 0,
      derate: 'none',
    });
  return file.kind === 'force' ? driveOf.force(file) : driveOf.electric(file);
}

/** True where the file has no drive: such a vehicle can only coast. */
export const onlyCoasts = ({ drive }: Vehicle): boolean => drive.peakForce <= NO_FORCE;

function roadLoadOf(file: VehicleFile['road_load'], mass: number): RoadLoad {
  if ('f0_n' in file)
    return roadLoadOfRegulation({
      f0: file.f0_n,
      f1: fromNPerKmh(file.f1_n_per_kmh),
      f2: fromNPerKmh2(file.f2_n_per_kmh2),
      testMass: file.test_mass_kg ?? mass,
      airDensity: file.air_density_kg_m3,
      yawGain: file.cda_yaw_per_rad2,
    });
  const rolling = { c0: file.crr, c1: file.crr_v_s_per_m, c2: file.crr_v2_s2_per_m2 };
  if ('cda_m2' in file)
    return roadLoadOfCoefficients({ cda: file.cda_m2, yawGain: file.cda_yaw_per_rad2, ...rolling });
  const rows = file.cda_table;
  return roadLoadOfCoefficients({
    cda: rows[0]!.cda_m2,
    yawTable: {
      yaw: Float64Array.from(rows, ({ yaw_deg }) => fromDeg(yaw_deg)),
      cda: Float64Array.from(rows, ({ cda_m2 }) => cda_m2),
    },
    ...rolling,
  });
}
