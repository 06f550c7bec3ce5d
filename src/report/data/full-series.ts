import type { FullSeries } from '../../loop/result.ts';
import type { CandidateResult, RunResult } from '../../run/run-result.ts';
import { toKmh, toPct, toRpm } from '../../units/convert.ts';
import { turns } from '../model/gear-words.ts';
import { limitWords, MODE_ABOUT, modeWord } from './bin-series.ts';
import { ShareAlong } from './share-along.ts';
import { type Column, csvText } from './table.ts';

/** What the rows of a full series are made from. */
export interface FullSource {
  readonly series: FullSeries;
  readonly share: Float64Array;
  readonly locked: boolean;
  /** The drive has a shaft that turns: its law is over [rad/s]. */
  readonly turns: boolean;
}

/** The columns of series-<candidate>.csv under `series: full`: one row a controller sample. */
export const FULL_COLUMNS: readonly Column<FullSource>[] = [
  {
    name: 'time_s',
    decimals: 4,
    about: 'time from the start of the run',
    value: (s, i) => s.series.time[i]!,
  },
  {
    name: 'distance_m',
    decimals: 3,
    about: 'horizontal distance from the driven start',
    value: (s, i) => s.series.distance[i]!,
  },
  { name: 'set_speed_kmh', decimals: 3, about: 'set speed', value: (s, i) => toKmh(s.series.setSpeed[i]!) },
  {
    name: 'reference_kmh',
    decimals: 4,
    about: 'what the controller aims at: the set speed behind its ramp',
    value: (s, i) => toKmh(s.series.reference[i]!),
  },
  { name: 'speed_kmh', decimals: 5, about: 'true speed', value: (s, i) => toKmh(s.series.speed[i]!) },
  {
    name: 'measured_kmh',
    decimals: 5,
    about: 'speed as the controller sees it',
    value: (s, i) => toKmh(s.series.measured[i]!),
  },
  {
    name: 'command_pct',
    decimals: 4,
    about: 'throttle command before it is limited',
    value: (s, i) => toPct(s.series.command[i]!),
  },
  {
    name: 'actuator_pct',
    decimals: 4,
    about: 'throttle at the actuator',
    value: (s, i) => toPct(s.series.actuator[i]!),
  },
  {
    name: 'p_pct',
    decimals: 4,
    about: 'proportional part of the command',
    value: (s, i) => toPct(s.series.proportional[i]!),
  },
  {
    name: 'i_pct',
    decimals: 4,
    about: 'integral part of the command',
    value: (s, i) => toPct(s.series.integral[i]!),
  },
  {
    name: 'ff_pct',
    decimals: 4,
    about: 'feedforward part of the command',
    value: (s, i) => toPct(s.series.feedforward[i]!),
  },
  {
    name: 'limit',
    decimals: 0,
    about: 'upper, lower, rate: what limits the throttle, joined by +',
    value: (s, i) => limitWords(s.series.limit[i]!),
  },
  {
    name: 'mode',
    decimals: 0,
    about: MODE_ABOUT,
    value: (s, i) => modeWord(s.series.limit[i]!, s.locked),
  },
  { name: 'gear', decimals: 0, about: 'gear, from 1', value: (s, i) => s.series.gear[i]! + 1 },
  {
    name: 'engine_rpm',
    decimals: 0,
    about: 'engine speed; 0 with the clutch open; empty for a drive without an engine',
    value: (s, i) => (s.turns ? toRpm(s.series.shaftSpeed[i]!) : null),
  },
  {
    name: 'demand_pct',
    decimals: 2,
    about: 'force that the set speed needs over the force that is there; negative: it must hold back',
    value: (s, i) => toPct(s.share[i]!),
  },
  {
    name: 'drive_force_n',
    decimals: 3,
    about: 'force of the drive at the wheel',
    value: (s, i) => s.series.driveForce[i]!,
  },
  {
    name: 'acceleration_m_s2',
    decimals: 5,
    about: 'acceleration along the road',
    value: (s, i) => s.series.acceleration[i]!,
  },
];

/** series-<candidate>.csv, one row a controller sample. */
export function fullSeriesCsv(run: RunResult, candidate: CandidateResult, series: FullSeries): string {
  const along = new ShareAlong(run.road, run.demand);
  const place = run.road.along === 'time' ? series.time : series.distance;
  const share = new Float64Array(series.size);
  for (let i = 0; i < series.size; i++) share[i] = along.at(place[i]!);
  const locked = candidate.controller.kind === 'locked';
  return csvText(FULL_COLUMNS, { series, share, locked, turns: turns(run.vehicle.drive) }, series.size);
}
