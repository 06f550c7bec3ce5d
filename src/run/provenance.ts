import type { Estimate } from '../identify/estimate.ts';
import type { IdentifyRequest } from './identify-request.ts';

/** Names of the logs without their folders: nobody's paths go into a result. */
export const logNames = ({ logs }: IdentifyRequest): readonly string[] =>
  logs.map((name) => name.split(/[\\/]/).at(-1) ?? name);

/** A measured number with its error, in plain characters: a comment of a file. */
export function numberWords({ value, standardError, low, high }: Estimate, unit: string): string {
  const digits = (x: number): string => String(Number(x.toPrecision(4)));
  const end = unit === '' ? '' : ` ${unit}`;
  return `${digits(value)}${end}: standard error ${digits(standardError)}, 95 % interval ${digits(low)} to ${digits(high)}`;
}

export const counted = (count: number, what: string): string => `${count} ${what}${count === 1 ? '' : 's'}`;
