import type { BinRecord } from '../loop/result.ts';
import { toKmh, toPct, toWh } from '../units/convert.ts';
import { COMFORT_ROWS, THROTTLE_ROWS } from './comfort-rows.ts';
import { DRIVE_QUALITY_ROWS } from './drive-quality-rows.ts';
import { ERROR_ROWS } from './error-rows.ts';
import {
  batteryEnergy,
  brakeDistance,
  brakePowerNeeded,
  drawnPerKm,
  driven,
  fuelPer100Km,
  held,
  perKm,
  placeless,
  range,
  shiftCount,
  sum,
  timeBeyondGrip,
  withinBand,
  worstRecovery,
  worstSide,
} from './figure-measures.ts';
import { DEFINED_HERE, type FigureRow } from './figure-row.ts';
import { HOLD_ROWS } from './hold-rows.ts';

export type { FigureRow } from './figure-row.ts';

const timed = (
  name: string,
  label: string,
  definition: string,
  of: (bins: BinRecord) => Float64Array,
  better: FigureRow['better'] = 'lower',
): FigureRow => ({
  name,
  label,
  unit: 's',
  weight: 'time',
  takesBand: false,
  better,
  definition,
  source: DEFINED_HERE,
  measure: (record) => driven(record, () => sum(record, (i) => of(record.bins)[i])),
});

/**
 * The one table of figures: requirement names, columns, the method section and the docs are made from it.
 * Error e = speed - set speed: negative is too slow. Figures are taken over the bins that `where` chooses.
 */
export const FIGURES: readonly FigureRow[] = [
  {
    name: 'within_band_pct',
    label: 'Time within the band',
    unit: '%',
    weight: 'time',
    takesBand: true,
    better: 'higher',
    definition:
      'Share of the time with hold on, controller sample by sample, with |e| inside the band. Its place is where |e| was greatest outside of it.',
    source: DEFINED_HERE,
    measure: withinBand,
  },
  {
    name: 'rms_error_kmh',
    label: 'Rms error',
    unit: 'km/h',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition: 'Root of the time mean of e squared, over the time with hold on.',
    source: 'RMSSE, the root mean squared speed error of SAE J2951, formula from memory',
    measure: (record) =>
      held(record, (time) =>
        toKmh(Math.sqrt(Math.max(0, sum(record, (i) => record.bins.errorSquare[i]) / time))),
      ),
  },
  {
    name: 'mean_error_kmh',
    label: 'Mean error',
    unit: 'km/h',
    weight: 'time',
    takesBand: false,
    better: null,
    definition: 'Time mean of e, with its sign, over the time with hold on.',
    source: DEFINED_HERE,
    measure: (record) => held(record, (time) => toKmh(sum(record, (i) => record.bins.errorMean[i]) / time)),
  },
  {
    name: 'worst_low_kmh',
    label: 'Furthest below',
    unit: 'km/h',
    weight: 'event',
    takesBand: false,
    better: 'higher',
    definition: 'Least e, 0 or negative: -7.3 is 7.3 km/h below the set speed. A requirement says at_least.',
    source: DEFINED_HERE,
    measure: (record) => worstSide(record, -1),
  },
  {
    name: 'worst_high_kmh',
    label: 'Furthest above',
    unit: 'km/h',
    weight: 'event',
    takesBand: false,
    better: 'lower',
    definition: 'Greatest e, 0 or positive. A requirement says at_most.',
    source: DEFINED_HERE,
    measure: (record) => worstSide(record, 1),
  },
  ...ERROR_ROWS,
  {
    name: 'recovery_s',
    label: 'Longest recovery',
    unit: 's',
    weight: 'event',
    takesBand: false,
    better: 'lower',
    definition:
      'Longest, over the hills that count, of the time to the start of 3 s within 1 km/h: from where the demand comes back into range, or, where it stays in range, from leaving the band; time at a limit counts. Up to where the demand leaves the range again or the set speed changes, if that comes first. 0 where no hill needed one.',
    source: DEFINED_HERE,
    measure: worstRecovery,
  },
  timed('time_s', 'Time', 'Driving time.', (bins) => bins.time, null),
  {
    name: 'time_lost_s',
    label: 'Time lost',
    unit: 's',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition:
      'Driving time with hold on less the time at the set speed over the same distance: the time integral of -e / set speed. Negative where time is gained.',
    source: DEFINED_HERE,
    measure: (record) =>
      held(record, () => sum(record, (i) => -record.bins.errorMean[i] / record.bins.setSpeed[i])),
  },
  {
    name: 'wheel_energy_wh',
    label: 'Wheel energy',
    unit: 'Wh',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition: 'Work of the drive at the wheel while it pushes; what it holds back is counted apart.',
    source: DEFINED_HERE,
    measure: (record) => driven(record, () => toWh(sum(record, (i) => record.bins.driveWork[i]))),
  },
  {
    name: 'wheel_energy_wh_per_km',
    label: 'Wheel energy per km',
    unit: 'Wh/km',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      'Wheel energy over the horizontal distance driven; on a road along time, over the distance travelled.',
    source: DEFINED_HERE,
    measure: (record) => placeless(perKm(record, toWh(sum(record, (i) => record.bins.driveWork[i])))),
  },
  {
    name: 'regeneration_wh',
    label: 'Held back by the drive',
    unit: 'Wh',
    weight: 'distance',
    takesBand: false,
    better: null,
    definition: 'Work that the drive takes from the wheel while it holds back: engine drag or regeneration.',
    source: DEFINED_HERE,
    measure: (record) =>
      driven(record, () => toWh(sum(record, (i) => Math.abs(record.bins.regenerationWork[i])))),
  },
  {
    name: 'battery_energy_wh',
    label: 'Battery energy',
    unit: 'Wh',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      'Drawn from the battery: what the drive takes with its losses, less what regeneration returns; only for a drive that has losses or efficiencies.',
    source: DEFINED_HERE,
    measure: batteryEnergy,
  },
  {
    name: 'drawn_wh_per_km',
    label: 'Energy drawn per km',
    unit: 'Wh/km',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      'Drawn from fuel (its lower heating value) or battery over the horizontal distance driven; on a road along time, over the distance travelled.',
    source: DEFINED_HERE,
    measure: drawnPerKm,
  },
  {
    name: 'fuel_l_per_100km',
    label: 'Fuel',
    unit: 'l/100 km',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      'Volume of fuel burnt, with a warm engine and the fuel shut off where the fuel map says so, over the horizontal distance driven; on a road along time, over the distance travelled.',
    source: DEFINED_HERE,
    measure: fuelPer100Km,
  },
  {
    name: 'range_km',
    label: 'Range',
    unit: 'km',
    weight: 'distance',
    takesBand: false,
    better: 'higher',
    definition:
      'Way on a full tank, or on the battery from its charge at the start down to its reserve, at the energy drawn per km of the stretches that count.',
    source: DEFINED_HERE,
    measure: range,
  },
  {
    name: 'throttle_mean_pct',
    label: 'Mean throttle',
    unit: '%',
    weight: 'time',
    takesBand: false,
    better: null,
    definition: 'Time mean of the throttle at the actuator.',
    source: DEFINED_HERE,
    measure: (record) =>
      driven(record, (time) =>
        toPct(sum(record, (i) => record.bins.throttleMean[i] * record.bins.time[i]) / time),
      ),
  },
  {
    name: 'throttle_travel_pct_per_km',
    label: 'Throttle travel',
    unit: '%/km',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      'Sum of the changes of the throttle command without their signs, over the horizontal distance driven; on a road along time, over the distance travelled.',
    source: 'total variation of the control signal (Skogestad, J. Process Control 13 (2003), from memory)',
    measure: (record) => placeless(perKm(record, toPct(sum(record, (i) => record.bins.throttleTravel[i])))),
  },
  ...THROTTLE_ROWS,
  timed(
    'at_upper_limit_s',
    'At full throttle',
    'Time with the command at its upper limit.',
    (b) => b.timeUpper,
  ),
  timed(
    'at_lower_limit_s',
    'At closed throttle',
    'Time with the command at its lower limit.',
    (b) => b.timeLower,
  ),
  timed(
    'at_rate_limit_s',
    'At the rate limit',
    'Time with the actuator at its rate limit.',
    (b) => b.timeRate,
  ),
  {
    name: 'at_limit_pct',
    label: 'At a limit',
    unit: '%',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition: 'Share of the time with hold on with the command at its upper or lower limit.',
    source: DEFINED_HERE,
    measure: (record) =>
      held(record, (time) =>
        toPct(sum(record, (i) => record.bins.timeUpper[i] + record.bins.timeLower[i]) / time),
      ),
  },
  ...COMFORT_ROWS,
  ...DRIVE_QUALITY_ROWS,
  {
    name: 'brake_energy_wh',
    label: 'Brake energy',
    unit: 'Wh',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition: "Work of the rider's brake.",
    source: DEFINED_HERE,
    measure: (record) => driven(record, () => toWh(sum(record, (i) => Math.abs(record.bins.brakeWork[i])))),
  },
  {
    name: 'brake_distance_m',
    label: 'Braked distance',
    unit: 'm',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      "Distance driven with the rider's brake on, horizontal (on a road along time: travelled): in each bin its share of the time.",
    source: DEFINED_HERE,
    measure: (record) => driven(record, () => brakeDistance(record)),
  },
  {
    name: 'brake_power_needed_kw',
    label: 'Brake power needed',
    unit: 'kW',
    weight: 'event',
    takesBand: false,
    better: 'lower',
    definition:
      'Greatest power of a brake that would hold the set speed beside the least throttle: (least force - force needed) times the set speed, by the demand of the road. 0 where the least throttle holds back enough.',
    source: DEFINED_HERE,
    measure: brakePowerNeeded,
  },
  {
    name: 'shifts',
    label: 'Shifts',
    unit: 'shifts',
    weight: 'event',
    takesBand: false,
    better: 'lower',
    definition: 'Changes of gear, by the rider or by the gearbox.',
    source: DEFINED_HERE,
    measure: shiftCount,
  },
  {
    name: 'hold_cancelled_s',
    label: 'Hold cancelled',
    unit: 's',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition:
      "Time with hold cancelled by the rider's shifts: clutch open, or the throttle in the rider's hand until the hold resumes. 0 for a gearbox that shifts by itself.",
    source: DEFINED_HERE,
    measure: (record) =>
      driven(record, () => (record.shiftsCancel ? sum(record, (i) => record.bins.timeShift[i]) : 0)),
  },
  ...HOLD_ROWS,
  {
    name: 'beyond_grip_s',
    label: 'Beyond grip',
    unit: 's',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition:
      'Time in the bins of distance in which the drive reached the grip of the driven wheel at least once. The model has no slip: what the wheel would do then is not in any figure.',
    source: DEFINED_HERE,
    measure: timeBeyondGrip,
  },
  {
    name: 'ledger_residual',
    label: 'Energy account open',
    unit: '1',
    weight: 'event',
    takesBand: false,
    better: 'lower',
    definition:
      'Sum of the terms of the energy account of the whole run over the integral of their magnitudes, without its sign: how well the numbers close.',
    source: DEFINED_HERE,
    measure: (record) => placeless(Math.abs(record.ledgerResidual)),
  },
];

/** Row by name; undefined for a name that the table does not have. */
export const figureRow = (name: string): FigureRow | undefined => FIGURES.find((row) => row.name === name);

/** Some of these figures are in the record only where the plan asks for `detail`. */
export const askDetail = (figures: readonly string[]): boolean =>
  figures.some((name) => figureRow(name)?.detail === true);
