import { toKm, toWh } from '../units/convert.ts';
import { detailed, sumOf } from './detail-measures.ts';
import type { DriveQuality } from './drive-quality.ts';
import { heldLength } from './figure-measures.ts';
import type { FigureRow } from './figure-row.ts';

const OVER =
  'over the bins of distance in which hold was on all the time; the target is the set speed, at the same places for the same time, a change of it being a jump';
const J2951 = 'SAE J2951, formula from memory';

const rating = (
  name: string,
  label: string,
  definition: string,
  of: keyof DriveQuality,
  better: FigureRow['better'],
): FigureRow => ({
  name,
  label,
  unit: '%',
  weight: 'event',
  takesBand: false,
  better,
  definition,
  source: J2951,
  detail: true,
  measure: (record) => detailed(record, () => record.quality()[of]),
});

/** Drive-quality metrics of driving cycles, the set speed being the cycle. Their root mean squared speed error is `rms_error_kmh`. */
export const DRIVE_QUALITY_ROWS: readonly FigureRow[] = [
  rating(
    'energy_rating_pct',
    'Energy rating',
    `ER = 100 (E driven - E target) / E target, ${OVER}. E is the work of the wheel force while it pushes: as the drive gave it, and as the set speed asks for it by air, rolling, slope and the rise of speed at a change.`,
    'energy',
    null,
  ),
  rating(
    'distance_rating_pct',
    'Distance rating',
    `DR = 100 (D driven - D target) / D target, D the distance travelled, ${OVER}.`,
    'distance',
    null,
  ),
  rating(
    'energy_economy_rating_pct',
    'Energy economy rating',
    `EER = 100 (1 - (1 + DR / 100) / (1 + ER / 100)), ${OVER}: how much of the energy per distance is above that of the target.`,
    'energyEconomy',
    null,
  ),
  rating(
    'speed_change_rating_pct',
    'Speed change rating',
    `ASCR = 100 (ASC driven - ASC target) / ASC target, ASC the sum of the changes of speed without their signs, ${OVER}. None where the set speed never changes.`,
    'speedChange',
    'lower',
  ),
  rating(
    'inertial_work_rating_pct',
    'Inertial work rating',
    `IWR = 100 (IW driven - IW target) / IW target, IW the work into a rising speed, ${OVER}. None where the set speed never rises. For scale: driving cycles of type approval allow -2 to +4 %, and an rms error below 1.3 km/h (WLTP, from memory).`,
    'inertialWork',
    'lower',
  ),
  {
    name: 'inertial_work_wh_per_km',
    label: 'Inertial work per km',
    unit: 'Wh/km',
    weight: 'distance',
    takesBand: false,
    better: 'lower',
    definition:
      'IW: the effective mass times acceleration times distance where the speed rises, sample by sample, per km driven with hold on.',
    source: J2951,
    detail: true,
    measure: (record) =>
      detailed(
        record,
        ({ inertialWork }) => {
          const length = heldLength(record);
          return length > 0
            ? toWh(sumOf(record, inertialWork)) / toKm(length)
            : { none: 'no such stretch was driven' };
        },
        ({ inertialWork }, i) => inertialWork[i],
      ),
  },
];
