import { version } from '../../package.json' with { type: 'json' };

/** Version of the tool, as results and reports carry it. */
export const TOOL_VERSION: string = version;
/**
 * Version of the shape of summary.json: the first number changes when a key is renamed or removed, the second when
 * one is added. 1.1 has `given`, 1.2 what became of hold, figures of detail,
 * logged rides, and the worst operating point of each loop.
 */
export const SCHEMA_VERSION = '1.2';
