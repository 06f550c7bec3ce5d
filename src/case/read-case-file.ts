import * as z from 'zod';
import { caseNameRules, caseRules } from './case-rules.ts';
import { type CaseFile, caseSchema } from './case-schema.ts';
import { checkFile, type Rule } from './check-file.ts';
import { type DefaultUsed, listDefaults } from './list-defaults.ts';
import { applyOverrides, readOverride } from './override.ts';
import { type VehicleDocument, vehicleDefaults } from './read-vehicle-file.ts';
import { isMapping } from './schema-walk.ts';
import { vehicleRules } from './vehicle-rules.ts';
import { readYaml, type YamlSource } from './yaml-source.ts';

/** A case that has passed its checks; its track and vehicle files are not yet looked at. */
export interface CaseDocument {
  /** The parsed text, overrides put in, with the place of every key and value. */
  readonly source: YamlSource;
  /** The file's own types, defaults filled in, units in the keys. */
  readonly file: CaseFile;
  /** Changes given beside the case, as typed: all of them. */
  readonly overrides: readonly string[];
  /** Those of them that reach into the vehicle's own file, as typed: for readVehicleFile. */
  readonly vehicleOverrides: readonly string[];
  readonly defaults: readonly DefaultUsed[];
  /** Files named in the case, as written, relative to its folder; null: written in the case itself. */
  readonly trackFile: string | null;
  readonly vehicleFile: string | null;
  /** The vehicle written in the case itself. */
  readonly vehicle: VehicleDocument | null;
}

/**
 * Reads a case file: parses it, puts in the overrides, checks it alone, fills in and lists the defaults.
 *
 * @param text YAML or JSON
 * @param file name for messages
 * @param overrides `key=value` with a dotted path into the case: list items by number from 0, by name or by id, the
 *   value as YAML. `vehicle.` reaches into the vehicle, in its own file too
 * @throws InputError with every problem of the file, by line
 */
export function readCaseFile(text: string, file: string, overrides: readonly string[] = []): CaseDocument {
  const written = readYaml(text, file);
  const ofVehicleFile = vehicleIsFile(written, overrides);
  const source = applyOverrides(
    written,
    overrides.filter((text) => !ofVehicleFile(text)),
  );
  const checked = checkFile(
    caseSchema,
    [...caseRules, ...caseNameRules, ...inlineVehicleRules] as Rule<z.input<typeof caseSchema>>[],
    source,
  );
  return {
    source,
    file: checked,
    overrides,
    vehicleOverrides: overrides.filter(ofVehicleFile),
    defaults: caseDefaults(source.value, checked),
    trackFile: 'file' in checked.track ? checked.track.file : null,
    vehicleFile: typeof checked.vehicle === 'string' ? checked.vehicle : null,
    vehicle: typeof checked.vehicle === 'string' ? null : inlineVehicle(source, checked.vehicle),
  };
}

/** Tells the overrides that reach into a vehicle which stands in a file of its own. */
function vehicleIsFile(source: YamlSource, overrides: readonly string[]): (override: string) => boolean {
  const replaced = overrides.map(readOverride).filter(({ path }) => path === 'vehicle');
  const given = replaced.at(-1)?.value ?? (isMapping(source.value) ? source.value.vehicle : undefined);
  return (override) => typeof given === 'string' && override.startsWith('vehicle.');
}

const inlineVehicleRules: readonly Rule<z.input<typeof caseSchema>>[] = vehicleRules.map(
  ({ about, check }) => ({
    about: ['vehicle', ...about],
    check: ({ vehicle }) =>
      typeof vehicle === 'string'
        ? []
        : check(vehicle).map((fault) => ({ ...fault, path: ['vehicle', ...fault.path] })),
  }),
);

function inlineVehicle(source: YamlSource, file: Exclude<CaseFile['vehicle'], string>): VehicleDocument {
  const value = (source.value as { vehicle: unknown }).vehicle;
  return { source, at: ['vehicle'], file, defaults: vehicleDefaults(value, file) };
}

/** The defaults of the case alone, without those of a vehicle written in it and of `tune`, and with figures where they are worked out. */
function caseDefaults(value: unknown, file: CaseFile): DefaultUsed[] {
  const setSpeed = String(file.hold.set_speed_kmh);
  // A design is made at a true speed, which takes the sensor of a vehicle that may stand in another file.
  const designSpeed = file.hold.set_speed_is === 'indicated' ? `${setSpeed} as indicated` : setSpeed;
  const written = 'profile' in file.track;
  return listDefaults(
    caseSchema.omit({ vehicle: true, tune: true }).extend({ vehicle: z.unknown() }),
    value,
    'case',
  )
    .filter(
      ({ key }) => !(written && (key === 'road.elevation_source' || key === 'road.smoothing_wavelength_m')),
    )
    .map((used) => {
      if (used.key === 'hold.start_speed_kmh') return { ...used, value: setSpeed };
      return used.key.endsWith('.design.at_kmh') ? { ...used, value: designSpeed } : used;
    });
}
