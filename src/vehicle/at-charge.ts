import type { Battery, EnergySource, ShareOverCharge } from './energy-source.ts';
import { piecewiseLinear } from './piecewise-linear.ts';
import { scaledDrive } from './scaled-drive.ts';
import type { Vehicle } from './vehicle.ts';

/** Shares of the full-throttle force and of full regeneration that are left. */
export interface SharesLeft {
  readonly force: number;
  readonly regeneration: number;
}

const ALL: SharesLeft = { force: 1, regeneration: 1 };

/** What voltage and charge of a battery leave of the drive while it is cold; all of it for any other source. */
export function sharesAtCharge(source: EnergySource | null): SharesLeft {
  if (source?.kind !== 'battery') return ALL;
  const { capacity, charge, sag, acceptance } = source;
  const empty = capacity !== null && charge <= 0;
  return { force: empty ? 0 : shareAt(sag, charge), regeneration: shareAt(acceptance, charge) };
}

const shareAt = (line: ShareOverCharge | null, charge: number): number =>
  line === null ? 1 : piecewiseLinear(line.charge, line.share, charge);

/**
 * The vehicle with the force and the regeneration that its battery leaves at its charge, cold, for ever: the same
 * vehicle where that is all of them.
 */
export function atCharge<V extends Pick<Vehicle, 'drive'>>(vehicle: V): V {
  const { source } = vehicle.drive;
  const left = sharesAtCharge(source);
  if (left.force === 1 && left.regeneration === 1) return vehicle;
  const steady: Battery = { ...(source as Battery), sag: null, acceptance: null };
  return { ...vehicle, drive: { ...scaledDrive(vehicle.drive, left), source: steady } };
}
