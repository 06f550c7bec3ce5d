import type { RoadResult } from '../../run/road-result.ts';
import { warningJson } from './json-parts.ts';
import { jsonText } from './json-text.ts';
import { routeSummary } from './route-summary.ts';

/**
 * road.json: what a road alone is made from and what was found, for programs.
 *
 * @param files names of the other files written beside it
 * @throws NotFiniteError for a number that is not finite
 */
export function roadJson(result: RoadResult, files: readonly string[]): string {
  return jsonText({
    schema_version: result.schemaVersion,
    tool: { name: 'ridgehold', version: result.toolVersion },
    name: result.name,
    inputs: result.inputs.map(({ name, sha256, bytes }) => ({ name, sha256, bytes })),
    overrides: result.overrides,
    route: routeSummary(result.road, null),
    defaults: result.defaults.map(({ key, value, source }) => ({ key, value, source })),
    warnings: result.warnings.map(warningJson),
    files,
  });
}
