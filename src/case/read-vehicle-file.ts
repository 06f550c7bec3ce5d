import { checkFile } from './check-file.ts';
import { type DefaultUsed, listDefaults } from './list-defaults.ts';
import { applyOverrides } from './override.ts';
import { rotatingMassKg } from './vehicle-mass.ts';
import { vehicleRules } from './vehicle-rules.ts';
import { type VehicleFile, vehicleSchema } from './vehicle-schema.ts';
import { readYaml, type YamlSource } from './yaml-source.ts';

/** A vehicle file that has passed its checks. */
export interface VehicleDocument {
  readonly source: YamlSource;
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
  return { source, file: vehicle, defaults: vehicleDefaults(source.value, vehicle) };
}

/** The defaults a vehicle uses, those that hang on other keys with their figures. */
export function vehicleDefaults(value: unknown, file: VehicleFile): DefaultUsed[] {
  const { kerb_kg, rider_kg, payload_kg } = file.mass;
  const worked: Readonly<Record<string, string>> = {
    'mass.rotating_kg': String(rotatingMassKg(file)),
    'road_load.test_mass_kg': String(kerb_kg + rider_kg + payload_kg),
  };
  return listDefaults(vehicleSchema, value, 'vehicle').map((used) => ({
    ...used,
    value: worked[used.key] ?? used.value,
  }));
}
