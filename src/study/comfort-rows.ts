import { toKm, toPct } from '../units/convert.ts';
import { detailed, furthestClass, quantile, sumOf } from './detail-measures.ts';
import { type FigureRecord, heldLength } from './figure-measures.ts';
import { DEFINED_HERE, type FigureRow } from './figure-row.ts';
import type { Figure } from './findings.ts';

const perHeldKm = (record: FigureRecord, amount: number): Figure => {
  const length = heldLength(record);
  return length > 0 ? amount / toKm(length) : { none: 'no such stretch was driven' };
};

/** How the command works, beside its travel and its limits. */
export const THROTTLE_ROWS: readonly FigureRow[] = [
  {
    name: 'reversals_per_km',
    label: 'Throttle reversals',
    unit: 'per km',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      'Turns of the throttle command per km driven with hold on. A turn counts once the command has come back from its extreme by more than 0.5 % of the throttle; shifts are left out.',
    source: DEFINED_HERE,
    detail: true,
    measure: (record) =>
      detailed(
        record,
        ({ reversals }) => perHeldKm(record, sumOf(record, reversals)),
        ({ reversals }, i) => reversals[i],
      ),
  },
  {
    name: 'command_rate_pct_per_s',
    label: 'Fastest command',
    unit: '%/s',
    weight: 'event',
    takesBand: false,
    better: 'lower',
    definition:
      'Greatest change of the throttle command, within its limits, from one controller sample to the next, over the sample time; shifts are left out.',
    source: DEFINED_HERE,
    detail: true,
    measure: (record) =>
      detailed(
        record,
        ({ commandRate }) => {
          let greatest = 0;
          for (let i = 0; i < record.bins.size; i++)
            if (record.chosen[i] === 1) greatest = Math.max(greatest, commandRate[i]);
          return toPct(greatest);
        },
        ({ commandRate }, i) => commandRate[i],
      ),
  },
  {
    name: 'headroom_p5_pct',
    label: 'Throttle headroom',
    unit: '%',
    weight: 'time',
    takesBand: false,
    better: 'higher',
    definition:
      'What the command leaves of the throttle up to its upper limit for 95 % of the time with hold on, to 0.1 %: the 5th percentile of upper limit less command. Its place is where the command was highest.',
    source: DEFINED_HERE,
    detail: true,
    measure: (record) =>
      detailed(
        record,
        ({ command }) => {
          const high = quantile(record, command, 0.95);
          return typeof high === 'number' ? toPct(Math.max(0, record.greatestCommand - high)) : high;
        },
        ({ command }, i) => highestClass(command, i),
      ),
  },
];

/** Highest class of a bin above that of 0 throttle. */
function highestClass(
  { start, index }: { readonly start: Uint32Array; readonly index: Int16Array },
  i: number,
): number {
  let highest = 0;
  for (let k = start[i]; k < start[i + 1]; k++) highest = Math.max(highest, index[k]);
  return highest;
}

/** What the rider feels along the way. */
export const COMFORT_ROWS: readonly FigureRow[] = [
  {
    name: 'rms_acceleration_m_s2',
    label: 'Rms acceleration',
    unit: 'm/s²',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition:
      'Root of the time mean of the squared acceleration along the way, taken over each controller sample, with hold on. Its place is the bin with the greatest mean square.',
    source: DEFINED_HERE,
    detail: true,
    measure: (record) =>
      detailed(
        record,
        ({ accelerationSquare }, time) => Math.sqrt(sumOf(record, accelerationSquare) / time),
        ({ accelerationSquare }, i) =>
          record.bins.time[i] > 0 ? accelerationSquare[i] / record.bins.time[i] : 0,
      ),
  },
  {
    name: 'p95_jerk_m_s3',
    label: '95 % of |jerk|',
    unit: 'm/s³',
    weight: 'time',
    takesBand: false,
    better: 'lower',
    definition:
      'The value that |jerk| stays within for 95 % of the time with hold on, to 0.005 m/s³. Jerk is the change of the mean acceleration from one window of 0.2 s to the next, over 0.2 s: about the shortest change that a rider tells from a jolt, and the same for any sample time up to it. Its place is where |jerk| was greatest. For scale: 0.5 to 1 m/s³ is often named as comfortable (from memory).',
    source: DEFINED_HERE,
    detail: true,
    measure: (record) =>
      detailed(
        record,
        ({ jerk }) => quantile(record, jerk, 0.95, true),
        ({ jerk }, i) => furthestClass(jerk, i),
      ),
  },
  {
    name: 'speed_change_m_s_per_km',
    label: 'Speed change per km',
    unit: '(m/s)/km',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      'ASC: sum of the changes of speed without their signs, from one controller sample to the next, per km driven with hold on.',
    source:
      'absolute speed change of SAE J2951, formula from memory; per km because a set speed that never changes has no rating',
    detail: true,
    measure: (record) =>
      detailed(
        record,
        ({ accelerationAbsolute }) => perHeldKm(record, sumOf(record, accelerationAbsolute)),
        ({ accelerationAbsolute }, i) => accelerationAbsolute[i],
      ),
  },
];
