import { piecewiseLinear } from '../vehicle/piecewise-linear.ts';
import type { RuleFault } from './check-file.ts';
import { stallRpm } from './combustion-of.ts';
import type { DriveFileOf } from './drive-schemas.ts';
import { above, below, increasing, tableFaults } from './order-rules.ts';

type CombustionFile = DriveFileOf<'engine'> | DriveFileOf<'variator'>;

/** What no single field of an engine can say. Paths start at the drive. */
export function combustionFaults(file: CombustionFile): RuleFault[] {
  return [...torqueFaults(file), ...speedFaults(file), ...fuelFaults(file)];
}

function torqueFaults({ torque, closed_throttle_drag: drag, idle_rpm: idle }: CombustionFile): RuleFault[] {
  const faults = increasing(
    (drag ?? []).map(({ rpm }) => rpm),
    (i) => ['closed_throttle_drag', i, 'rpm'],
    'rpm',
  );
  if ('full_load' in torque) {
    faults.push(
      ...increasing(
        torque.full_load.map(({ rpm }) => rpm),
        (i) => ['torque', 'full_load', i, 'rpm'],
        'rpm',
      ),
    );
    if (torque.full_load.every(({ nm }) => nm === 0))
      faults.push({
        path: ['torque', 'full_load'],
        code: 'no-torque',
        message: 'gives no torque at any engine speed',
        found: '0 N m in every row',
        allowed: 'a torque above 0 in some row',
      });
  }
  if ('map' in torque) {
    if (drag !== undefined)
      faults.push({
        path: ['closed_throttle_drag'],
        code: 'keys-exclude',
        message: 'cannot stand beside torque.map, whose first column is the closed throttle',
        allowed: 'one of them',
      });
    const found = mapFaults(torque.map);
    faults.push(...found, ...(found.length > 0 ? [] : idlingFaults(torque.map, idle)));
  }
  return faults;
}

type TorqueMapFile = Extract<CombustionFile['torque'], { map: unknown }>['map'];

function mapFaults({ rpm, throttle_pct: throttle, nm }: TorqueMapFile): RuleFault[] {
  const path = ['torque', 'map'];
  const faults = tableFaults({
    path,
    rows: { key: 'rpm', values: rpm, unit: 'rpm' },
    columns: { key: 'throttle_pct', values: throttle, unit: '%' },
    body: { key: 'nm', values: nm },
  });
  const last = throttle.length - 1;
  for (const [i, wanted, words] of [
    [0, 0, 'the map does not begin with the closed throttle'],
    [last, 100, 'the map does not end with full throttle'],
  ] as const)
    if (throttle[i] !== wanted)
      faults.push({
        path: [...path, 'throttle_pct', i],
        code: 'not-in-order',
        message: words,
        found: `${throttle[i]} %`,
        allowed: `${wanted} %`,
      });
  nm.forEach((row, i) => {
    const falls = row.findIndex((torque, j) => torque < (row[j - 1] ?? torque));
    if (falls >= 0)
      faults.push({
        path: [...path, 'nm', i, falls],
        code: 'not-in-order',
        message: `torque falls as the throttle opens at ${rpm[i]} rpm`,
        found: `${row[falls]} N m after ${row[falls - 1]} N m`,
        allowed: `at least ${row[falls - 1]} N m`,
      });
  });
  return faults;
}

/** Down to the idle speed full throttle must not hold back: the engine would die under its own governor. */
function idlingFaults({ rpm, nm }: TorqueMapFile, idle: number): RuleFault[] {
  const full = Float64Array.from(nm, (row) => row.at(-1) ?? 0);
  const atIdle = piecewiseLinear(Float64Array.from(rpm), full, idle);
  const weak = rpm.findIndex((at, i) => full[i]! < 0 && (at <= idle || atIdle < 0));
  if (weak < 0) return [];
  return [
    {
      path: ['torque', 'map', 'nm', weak],
      code: 'not-in-order',
      message: `full throttle does not keep the engine turning at idle, ${idle} rpm`,
      found: `${full[weak]} N m at ${rpm[weak]} rpm`,
      allowed: 'at least 0 N m at and below idle',
    },
  ];
}

function speedFaults(file: CombustionFile): RuleFault[] {
  const { idle_rpm: idle, rev_limit_rpm: limit, fuel_cut: cut } = file;
  const aboveIdle = { value: idle, words: `the idle speed, ${idle} rpm` };
  return [
    ...below(['stall_rpm'], stallRpm(file), aboveIdle, 'rpm'),
    ...(limit === undefined ? [] : above(['rev_limit_rpm'], limit, aboveIdle, 'rpm')),
    ...(cut === undefined ? [] : above(['fuel_cut', 'above_rpm'], cut.above_rpm, aboveIdle, 'rpm')),
  ];
}

function fuelFaults({ fuel }: CombustionFile): RuleFault[] {
  if (fuel === undefined || !('bsfc' in fuel)) return [];
  const { rpm, nm, g_per_kwh } = fuel.bsfc;
  return tableFaults({
    path: ['fuel', 'bsfc'],
    rows: { key: 'rpm', values: rpm, unit: 'rpm' },
    columns: { key: 'nm', values: nm, unit: 'N m' },
    body: { key: 'g_per_kwh', values: g_per_kwh },
  });
}
