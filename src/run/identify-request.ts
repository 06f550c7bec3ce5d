import type { LogKind } from '../identify/log-kind.ts';
import type { RideUnknown } from '../identify/ride.ts';
import type { Reader } from './input-log.ts';

/** What is asked of logs. */
export interface IdentifyRequest {
  /** Names of the logs, one or more. */
  readonly logs: readonly string[];
  readonly read: Reader;
  /** What the logs are of; left out, it is told from their columns. */
  readonly kind?: LogKind | undefined;
  /** Name of a vehicle file: gives what is not measured, and takes what is. */
  readonly vehicle?: string | undefined;
  /** Case whose road, air and vehicle a ride is held against; its files are read by `read` of its own. */
  readonly case?: { readonly file: string; readonly read: Reader } | undefined;
  /** Numbers to fit to a ride; left out, drag area and rolling coefficient. */
  readonly fit?: readonly RideUnknown[] | undefined;
  /** Loaded mass, and that of what turns with the wheels; they go before those of the vehicle file. */
  readonly massKg?: number | undefined;
  readonly rotatingKg?: number | undefined;
  /** Air where and when the logs were made: temperature and pressure there, or the density alone. */
  readonly airTemperatureC?: number | undefined;
  readonly airPressureHpa?: number | undefined;
  readonly airDensityKgM3?: number | undefined;
}
