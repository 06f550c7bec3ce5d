import { batteryPlaces, NEARLY_EMPTY } from '../../study/battery-places.ts';
import { toPct } from '../../units/convert.ts';
import { sharesAtCharge } from '../../vehicle/at-charge.ts';
import type { Battery } from '../../vehicle/energy-source.ts';
import { fixed, placeText, withUnit } from '../quantity.ts';
import type { CandidateView, View } from './view.ts';

/** Before how a run ended: `ran its battery empty at km 1.70 and `; nothing where its battery was not empty by then. */
export function emptyWords({ result: { bins, ledger } }: CandidateView): string {
  const first = bins.driveLost.subarray(0, bins.size).indexOf(1);
  const { chargeAtEnd } = ledger;
  if (first < 0 || chargeAtEnd === null || chargeAtEnd > NEARLY_EMPTY) return '';
  return `ran its battery empty at ${placeText(bins.edge[first + 1]!)} and `;
}

/** Where a design came down to its reserve or emptied its battery on the way; null where it did neither, or its end tells it. */
export function batteryClause({ result }: View, design: CandidateView): string | null {
  const { reserve, empty } = batteryPlaces(result.vehicle.drive.source, design.result.bins);
  if (empty !== null)
    return design.result.status === 'completed' ? `its battery is empty at ${placeText(empty)}` : null;
  return reserve === null ? null : `its battery is down to its reserve at ${placeText(reserve)}`;
}

const percent = (share: number): string => withUnit(fixed(toPct(share)), '%');

/**
 * What the forces on the page take of a battery: `cold, at the start's charge of 22 %`, and what of force and
 * regeneration that leaves, where it is not all; null without a battery.
 */
export function startingCharge({ result: { vehicle } }: View): { state: string; left: string } | null {
  const { source } = vehicle.drive;
  if (!isBattery(source)) return null;
  const { force, regeneration } = sharesAtCharge(source);
  const left = [
    ...(force < 1 ? [`${percent(force)} of the force`] : []),
    ...(regeneration < 1 ? [`${percent(regeneration)} of the regeneration`] : []),
  ];
  return {
    state: `cold, at the start's charge of ${percent(source.charge)}`,
    left: left.length === 0 ? '' : `, which leaves ${left.join(' and ')}`,
  };
}

const isBattery = (source: View['result']['vehicle']['drive']['source']): source is Battery =>
  source?.kind === 'battery' && source.capacity !== null;
