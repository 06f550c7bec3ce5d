import {
  LIMIT_BRAKE,
  LIMIT_LOWER,
  LIMIT_OFF,
  LIMIT_OVERRIDE,
  LIMIT_RATE,
  LIMIT_SHIFT,
  LIMIT_UPPER,
} from '../../loop/plan.ts';
import type { BinRecord } from '../../loop/result.ts';
import type { CandidateResult, RunResult } from '../../run/run-result.ts';
import type { Stretch } from '../../study/findings.ts';
import { meanErrorIn } from '../../study/held-time.ts';
import { toKmh, toKw, toPct, toWh } from '../../units/convert.ts';
import { overridesOf } from '../model/hold-away.ts';
import { ShareAlong } from './share-along.ts';
import { type Column, csvText } from './table.ts';

/** What the rows of a series by bin are made from. */
export interface BinSource {
  readonly bins: BinRecord;
  /** Share of demand of greatest magnitude in each bin. */
  readonly share: Float64Array;
  /** Drive work from the start to the end of each bin [J]. */
  readonly work: Float64Array;
  /** Drawn from fuel or battery so far [J]; null: no source. */
  readonly drawn: Float64Array | null;
  readonly locked: boolean;
  /** Where the rider's grip had the throttle, in order along the way. */
  readonly overrides: readonly Stretch[];
}

/** `upper`, `lower`, `rate`, joined by `+`; empty when nothing limited the throttle. */
export function limitWords(bits: number): string {
  const words: string[] = [];
  if (bits & LIMIT_UPPER) words.push('upper');
  if (bits & LIMIT_LOWER) words.push('lower');
  if (bits & LIMIT_RATE) words.push('rate');
  return words.join('+');
}

/**
 * `shift` with the clutch open or the throttle in the rider's hand, `off` while hold is off, `override` while the grip has
 * the throttle, `brake` while the rider brakes, else `locked` or `hold`.
 */
export function modeWord(bits: number, locked: boolean): string {
  if (bits & LIMIT_SHIFT) return 'shift';
  if (bits & LIMIT_OFF) return 'off';
  if (bits & LIMIT_OVERRIDE) return 'override';
  if (bits & LIMIT_BRAKE) return 'brake';
  return locked ? 'locked' : 'hold';
}

function bits({ bins, overrides }: BinSource, i: number): number {
  const [from, to] = [bins.edge[i]!, bins.edge[i + 1]!];
  const gripped = overrides.some((grip) => grip.from < to && grip.to > from);
  return (
    (bins.timeUpper[i]! > 0 ? LIMIT_UPPER : 0) |
    (bins.timeLower[i]! > 0 ? LIMIT_LOWER : 0) |
    (bins.timeRate[i]! > 0 ? LIMIT_RATE : 0) |
    (bins.timeBrake[i]! > 0 ? LIMIT_BRAKE : 0) |
    (bins.timeShift[i]! > 0 ? LIMIT_SHIFT : 0) |
    (bins.timeOff[i]! > 0 ? LIMIT_OFF : 0) |
    (gripped ? LIMIT_OVERRIDE : 0)
  );
}

/** What `mode` says, in both series. */
export const MODE_ABOUT =
  "hold or locked; brake where the rider holds an overspeed; shift with the clutch open or the throttle in the rider's hand for it; off where hold is off and the rider rides by hand; override where the rider's grip has the throttle";

/** The columns of series-<candidate>.csv by bin: one row a distance bin. */
export const BIN_COLUMNS: readonly Column<BinSource>[] = [
  {
    name: 'time_s',
    decimals: 3,
    about: 'time at which the bin is entered',
    value: (s, i) => s.bins.timeAt[i]!,
  },
  { name: 'distance_m', decimals: 2, about: 'start of the bin', value: (s, i) => s.bins.edge[i]! },
  { name: 'set_speed_kmh', decimals: 3, about: 'set speed', value: (s, i) => toKmh(s.bins.setSpeed[i]!) },
  {
    name: 'speed_kmh',
    decimals: 4,
    about: 'true speed, mean over time',
    value: (s, i) => toKmh(s.bins.speedMean[i]!),
  },
  {
    name: 'speed_min_kmh',
    decimals: 4,
    about: 'least speed in the bin',
    value: (s, i) => toKmh(s.bins.speedMin[i]!),
  },
  {
    name: 'speed_max_kmh',
    decimals: 4,
    about: 'greatest speed in the bin',
    value: (s, i) => toKmh(s.bins.speedMax[i]!),
  },
  {
    name: 'speed_error_kmh',
    decimals: 4,
    about:
      'speed minus set speed, mean over the time with hold on, negative is too slow; empty where hold is off',
    value: (s, i) => {
      const error = meanErrorIn(s.bins, i);
      return error === null ? null : toKmh(error);
    },
  },
  {
    name: 'throttle_pct',
    decimals: 3,
    about: 'throttle at the actuator, mean over time',
    value: (s, i) => toPct(s.bins.throttleMean[i]!),
  },
  {
    name: 'throttle_min_pct',
    decimals: 3,
    about: 'least throttle in the bin',
    value: (s, i) => toPct(s.bins.throttleMin[i]!),
  },
  {
    name: 'throttle_max_pct',
    decimals: 3,
    about: 'greatest throttle in the bin',
    value: (s, i) => toPct(s.bins.throttleMax[i]!),
  },
  { name: 'gear', decimals: 0, about: 'gear, from 1', value: (s, i) => s.bins.gear[i]! + 1 },
  {
    name: 'demand_pct',
    decimals: 2,
    about:
      'force that the set speed needs over the force that is there, of greatest magnitude in the bin; negative: it must hold back',
    value: (s, i) => toPct(s.share[i]!),
  },
  {
    name: 'drive_force_n',
    decimals: 2,
    about: 'force of the drive at the wheel, mean',
    value: (s, i) => s.bins.driveForce[i]!,
  },
  {
    name: 'wheel_power_kw',
    decimals: 4,
    about: 'power at the wheel, mean',
    value: (s, i) => toKw(s.bins.wheelPower[i]!),
  },
  {
    name: 'wheel_energy_wh',
    decimals: 3,
    about: 'work of the drive while it pushes, from the start of the run to the end of the bin',
    value: (s, i) => toWh(s.work[i]!),
  },
  {
    name: 'limit',
    decimals: 0,
    about: 'upper, lower, rate: what limited the throttle somewhere in the bin, joined by +',
    value: (s, i) => limitWords(bits(s, i)),
  },
  {
    name: 'mode',
    decimals: 0,
    about: MODE_ABOUT,
    value: (s, i) => modeWord(bits(s, i), s.locked),
  },
  {
    name: 'drawn_energy_wh',
    decimals: 3,
    about:
      'drawn from fuel or battery, from the start of the run to the end of the bin; empty without a source of energy',
    value: (s, i) => (s.drawn === null ? null : toWh(s.drawn[i]!)),
  },
];

/** series-<candidate>.csv, one row a distance bin. */
export function binSeriesCsv(run: RunResult, candidate: CandidateResult): string {
  const { bins, ledger } = candidate.result;
  const along = new ShareAlong(run.road, run.demand);
  const share = new Float64Array(bins.size);
  const work = new Float64Array(bins.size);
  const drawn = new Float64Array(bins.size);
  let total = 0;
  let used = 0;
  for (let i = 0; i < bins.size; i++) {
    const inTime = run.road.along === 'time';
    const from = inTime ? bins.timeAt[i]! : bins.edge[i]!;
    share[i] = along.extreme(from, inTime ? from + bins.time[i]! : bins.edge[i + 1]!);
    total += bins.driveWork[i]!;
    work[i] = total;
    used += bins.drawn[i]!;
    drawn[i] = used;
  }
  const source = {
    bins,
    share,
    work,
    drawn: ledger.drawn === null ? null : drawn,
    locked: candidate.controller.kind === 'locked',
    overrides: overridesOf(candidate.result),
  };
  return csvText(BIN_COLUMNS, source, bins.size);
}
