import { checkFile } from './check-file.ts';
import { stallRpm } from './combustion-of.ts';
import { type DefaultUsed, listDefaults } from './list-defaults.ts';
import { applyOverrides } from './override.ts';
import { rotatingMassKg } from './vehicle-mass.ts';
import { vehicleRules } from './vehicle-rules.ts';
import { type VehicleFile, vehicleSchema } from './vehicle-schema.ts';
import { type Path, readYaml, type YamlSource } from './yaml-source.ts';

/** A vehicle file that has passed its checks. */
export interface VehicleDocument {
  readonly source: YamlSource;
  /** Where the vehicle stands in the source: in a file of its own, at its root. */
  readonly at: Path;
  readonly file: VehicleFile;
  readonly defaults: readonly DefaultUsed[];
}

/**
 * Reads and checks a vehicle file, alone.
 *
 * @param text YAML or JSON
 * @param file name for messages
 * @param overrides changes given beside the case, as typed there: `vehicle.mass.payload_kg=40`; see CaseDocument.vehicleOverrides
 * @throws InputError with every problem of the file, by line
 */
export function readVehicleFile(
  text: string,
  file: string,
  overrides: readonly string[] = [],
): VehicleDocument {
  const source = applyOverrides(readYaml(text, file), overrides, 'vehicle.');
  const vehicle = checkFile(vehicleSchema, vehicleRules, source);
  return { source, at: [], file: vehicle, defaults: vehicleDefaults(source.value, vehicle) };
}

/** The defaults a vehicle uses: those that hang on other keys with their figures, those that nothing comes of left out. */
export function vehicleDefaults(value: unknown, file: VehicleFile): DefaultUsed[] {
  const { kerb_kg, rider_kg, payload_kg } = file.mass;
  const worked: Record<string, string> = {
    'mass.rotating_kg': String(rotatingMassKg(file)),
    'road_load.test_mass_kg': String(kerb_kg + rider_kg + payload_kg),
  };
  const idle: string[] = file.speed_sensor.noise_sd_kmh === 0 ? ['speed_sensor.noise_seed'] : [];
  const { drive } = file;
  if (drive?.kind === 'engine') worked['drive.gear'] = String(drive.gear_ratios.length);
  if (drive?.kind === 'engine' || drive?.kind === 'variator') {
    worked['drive.stall_rpm'] = String(stallRpm(drive));
    if (drive.rev_limit_rpm === undefined) idle.push('drive.rev_limit_band_rpm');
    if ('map' in drive.torque) idle.push('drive.closed_throttle_drag');
  }
  if (drive?.kind === 'electric' && drive.efficiency_pct !== undefined) idle.push('drive.loss_map');
  if (drive?.kind === 'electric' && drive.loss_map !== undefined) idle.push('drive.efficiency_pct');
  return listDefaults(vehicleSchema, value, 'vehicle')
    .filter(({ key }) => !idle.includes(key))
    .map((used) => ({ ...used, value: worked[used.key] ?? used.value }));
}
