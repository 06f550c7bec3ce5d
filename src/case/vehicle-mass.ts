import type { VehicleFile } from './vehicle-schema.ts';

/** Equivalent mass of the turning parts [kg], by default 4 % of the kerb mass. */
export function rotatingMassKg({ mass }: VehicleFile): number {
  return mass.rotating_kg ?? (mass.kerb_kg * 4) / 100;
}
