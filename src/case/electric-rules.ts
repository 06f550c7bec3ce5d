import type { RuleFault } from './check-file.ts';
import type { DriveFileOf } from './drive-schemas.ts';
import { below, increasing, tableFaults } from './order-rules.ts';

type ElectricFile = DriveFileOf<'electric'>;

/** What no single field of an electric drive can say. Paths start at the drive. */
export function electricFaults(file: ElectricFile): RuleFault[] {
  return [...lossFaults(file), ...batteryFaults(file), ...heatingFaults(file)];
}

const missing = (path: (string | number)[], why: string, allowed: string): RuleFault => ({
  path,
  code: 'missing-key',
  message: `is missing: ${why}`,
  allowed,
});

function lossFaults({ efficiency_pct: efficiency, loss_map: map }: ElectricFile): RuleFault[] {
  if (map === undefined) return [];
  const faults = tableFaults({
    path: ['loss_map'],
    rows: { key: 'speed_kmh', values: map.speed_kmh, unit: 'km/h' },
    columns: { key: 'force_n', values: map.force_n, unit: 'N' },
    body: { key: 'loss_w', values: map.loss_w },
  });
  if (efficiency !== undefined)
    faults.push({
      path: ['loss_map'],
      code: 'keys-exclude',
      message: 'cannot stand beside efficiency_pct',
      allowed: 'one of them',
    });
  return faults;
}

function batteryFaults(file: ElectricFile): RuleFault[] {
  const { battery } = file;
  if (battery === undefined) return [];
  const path = ['battery'];
  const faults: RuleFault[] = [];
  if (file.efficiency_pct === undefined && file.loss_map === undefined)
    faults.push(
      missing(['efficiency_pct'], 'a battery needs to know what the drive draws', 'it, or loss_map'),
    );
  if (battery.reserve_pct >= battery.charge_pct)
    faults.push(
      ...below(
        [...path, 'reserve_pct'],
        battery.reserve_pct,
        { value: battery.charge_pct, words: 'the charge at the start' },
        '%',
      ),
    );
  const sag = ['open_voltage', 'resistance_ohm', 'nominal_v'] as const;
  const given = sag.filter((key) => battery[key] !== undefined);
  if (given.length > 0)
    for (const key of sag)
      if (battery[key] === undefined)
        faults.push(
          missing([...path, key], `the sag of the voltage needs it beside ${given.join(' and ')}`, key),
        );
  if (battery.open_voltage !== undefined && file.peak_power_kw === undefined)
    faults.push(missing(['peak_power_kw'], 'the sag of the voltage is about it', 'the power at nominal_v'));
  for (const key of ['open_voltage', 'full_fade'] as const)
    faults.push(
      ...increasing(
        (battery[key] ?? []).map(({ charge_pct }) => charge_pct),
        (i) => [...path, key, i, 'charge_pct'],
        '%',
      ),
    );
  if (battery.full_fade !== undefined && file.regeneration_force_n === 0)
    faults.push(missing(['regeneration_force_n'], 'full_fade is about regeneration', 'a force above 0 N'));
  return faults;
}

function heatingFaults({ heating, peak_power_kw: peak }: ElectricFile): RuleFault[] {
  if (heating === undefined) return [];
  if (peak === undefined)
    return [missing(['peak_power_kw'], 'heating is about it', 'the power that heats the drive up')];
  return below(
    ['heating', 'continuous_power_kw'],
    heating.continuous_power_kw,
    { value: peak, words: 'the peak power' },
    'kW',
  );
}
