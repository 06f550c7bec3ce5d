import type { Warning } from '../../problems/warning.ts';
import { type Figure, isNone } from '../../study/findings.ts';
import { toKm } from '../../units/convert.ts';
import { decimalsOf } from './decimals-of.ts';
import { rounded } from './fixed.ts';

export type Json = string | number | boolean | null | readonly Json[] | { readonly [key: string]: Json };

/** Numbers and figures, rounded by the unit in their names. */
export function numbers(values: Readonly<Record<string, Figure>>): Record<string, Json> {
  const json: Record<string, Json> = {};
  for (const [name, value] of Object.entries(values)) {
    if (isNone(value)) {
      json[name] = null;
      json[`${name}_reason`] = value.none;
    } else json[name] = rounded(value, decimalsOf(name), name);
  }
  return json;
}

/** A warning, its stretch in km. */
export function warningJson({ code, message, place, from, to }: Warning): Json {
  return {
    code,
    message,
    ...(place === undefined ? {} : { place: { ...place } }),
    ...(from === undefined ? {} : numbers({ from_km: toKm(from) })),
    ...(to === undefined ? {} : numbers({ to_km: toKm(to) })),
  };
}
