import { exp } from '../numeric/elementary.ts';
import type { Warning } from '../problems/warning.ts';
import { batteryPlaces } from '../study/battery-places.ts';
import type { Replayed } from '../study/findings.ts';
import { toKm, toPct } from '../units/convert.ts';
import type { Battery, Heating } from '../vehicle/energy-source.ts';
import { heatShare } from '../vehicle/heat-share.ts';

const km = (distance: number): string => `km ${toKm(distance).toFixed(2)}`;
/** Derating below this is no news. */
const NOTICED = 0.01;

/** Where a battery comes down to its reserve or runs empty, takes no regeneration, and where heat takes force away, run by run. */
export function batteryWarnings(replayed: readonly Replayed[]): readonly Warning[] {
  return replayed.flatMap(({ name, plan, result: { bins, ledger } }) => {
    const { source } = plan.vehicle.drive;
    if (source?.kind !== 'battery' || ledger.drawn === null) return [];
    return [
      ...chargeWarnings(name, source, bins),
      ...fullWarnings(name, bins),
      ...(source.heating === null ? [] : heatWarnings(name, source.heating, bins)),
    ];
  });
}

type Bins = Replayed['result']['bins'];

function chargeWarnings(name: string, source: Battery, bins: Bins): Warning[] {
  const { reserve, empty } = batteryPlaces(source, bins);
  const warnings: Warning[] = [];
  if (reserve !== null)
    warnings.push({
      code: 'battery-reserve',
      message: `${name} comes down to the reserve of ${toPct(source.reserve).toFixed(0)} % of its battery at ${km(reserve)}.`,
      from: reserve,
      to: reserve,
    });
  if (empty !== null)
    warnings.push({
      code: 'battery-empty',
      message: `${name} runs its battery empty at ${km(empty)}: from there on it has no force.`,
      from: empty,
      to: empty,
    });
  return warnings;
}

/** Where a run asks for all of the regeneration, and the battery takes less. */
function fullWarnings(name: string, bins: Bins): Warning[] {
  let [lost, from, to] = [NOTICED, -1, 0];
  for (let i = 0; i < bins.size; i++) {
    const here = bins.regenerationLost[i] ?? 0;
    if (here <= NOTICED || !((bins.timeLower[i] ?? 0) > 0)) continue;
    if (from < 0) from = bins.edge[i] ?? 0;
    to = bins.edge[i + 1] ?? 0;
    lost = Math.max(lost, here);
  }
  if (from < 0) return [];
  return [
    {
      code: 'regeneration-refused',
      message: `Between ${km(from)} and ${toKm(to).toFixed(2)} ${name} asks for full regeneration and has as little as ${toPct(1 - lost).toFixed(0)} % of it: what is missing is left to the rider's brake.`,
      from,
      to,
    },
  ];
}

/** Heat by the mean wheel power of each bin: near enough for a place. */
function heatWarnings(name: string, { continuousPower, time, onset, least }: Heating, bins: Bins): Warning[] {
  let [heat, share, worstAt, from, to] = [0, 1, 0, -1, 0];
  for (let i = 0; i < bins.size; i++) {
    const load = (bins.wheelPower[i] ?? 0) / continuousPower;
    const steady = load * load;
    heat = steady + (heat - steady) * exp(-(bins.time[i] ?? 0) / time);
    const here = heatShare(heat, onset, least);
    if (here > 1 - NOTICED) continue;
    if (from < 0) from = bins.edge[i] ?? 0;
    to = bins.edge[i + 1] ?? 0;
    if (here < share) [share, worstAt] = [here, bins.edge[i] ?? 0];
  }
  if (from < 0) return [];
  return [
    {
      code: 'derated-by-heat',
      message: `Heat takes force from ${name} between ${km(from)} and ${toKm(to).toFixed(2)}: down to ${toPct(share).toFixed(0)} % of it near ${km(worstAt)}.`,
      from,
      to,
    },
  ];
}
