// A record for tests, written out by hand: rows of bins with the columns that matter, the rest zero.
import type { BinRecord, LoopResult } from '../../src/loop/result.ts';
import type { FigureRecord } from '../../src/study/figure-measures.ts';
import { qualityOfRun } from '../../src/study/run-quality.ts';
import { roadOf } from './road-of.ts';
import { vehicleOf } from './vehicle-of.ts';

export type BinColumn = Exclude<keyof BinRecord, 'size' | 'edge' | 'gear' | 'detail'>;
export type BinRow = Partial<Record<Exclude<BinColumn, 'timeInBand'>, number>> & { timeInBand?: number[] };

/** Bins of `width` metres from 0. */
export function recordOf(width: number, rows: readonly BinRow[], bands = 1): BinRecord {
  const size = rows.length;
  const column = (name: Exclude<BinColumn, 'timeInBand'>): Float64Array =>
    Float64Array.from(rows, (row) => row[name] ?? 0);
  let time = 0;
  const timeAt = Float64Array.from(rows, (row) => {
    const at = time;
    time += row.time ?? 0;
    return at;
  });
  return {
    size,
    edge: Float64Array.from({ length: size + 1 }, (_, i) => i * width),
    timeAt,
    time: column('time'),
    setSpeed: column('setSpeed'),
    speedMean: column('speedMean'),
    speedMin: column('speedMin'),
    speedMax: column('speedMax'),
    errorMean: column('errorMean'),
    errorSquare: column('errorSquare'),
    errorMin: column('errorMin'),
    errorMax: column('errorMax'),
    throttleMean: column('throttleMean'),
    throttleMin: column('throttleMin'),
    throttleMax: column('throttleMax'),
    throttleTravel: column('throttleTravel'),
    timeUpper: column('timeUpper'),
    timeLower: column('timeLower'),
    timeRate: column('timeRate'),
    timeBrake: column('timeBrake'),
    timeInBand: Float64Array.from(rows.flatMap((row) => row.timeInBand ?? new Array<number>(bands).fill(0))),
    gear: new Uint8Array(size),
    driveForce: column('driveForce'),
    wheelPower: column('wheelPower'),
    driveWork: column('driveWork'),
    regenerationWork: column('regenerationWork'),
    brakeWork: column('brakeWork'),
    driveForceMax: column('driveForceMax'),
    driveForceMin: column('driveForceMin'),
    timeShift: column('timeShift'),
    drawn: column('drawn'),
    driveLost: column('driveLost'),
    regenerationLost: column('regenerationLost'),
    timeOff: column('timeOff'),
    detail: null,
  };
}

export function resultOf(bins: BinRecord, more: Partial<LoopResult> = {}): LoopResult {
  let endTime = 0;
  for (const t of bins.time) endTime += t;
  return {
    status: 'completed',
    endDistance: bins.edge[bins.size]!,
    endTime,
    bins,
    ledger: {
      drive: 0,
      regeneration: 0,
      aero: 0,
      rolling: 0,
      climb: 0,
      brake: 0,
      kinetic: 0,
      shifts: 0,
      drawn: null,
      chargeAtEnd: null,
      residual: 0,
    },
    checkpoints: [],
    shifts: [],
    bites: [],
    ...more,
  };
}

/** What figures are taken over: all bins of a record of a level road, of a run to which nothing happened. */
export function figureRecord(bins: BinRecord, more: Partial<FigureRecord> = {}): FigureRecord {
  const end = bins.edge[bins.size]!;
  const road = roadOf([{ length: end, grade: 0 }]);
  const chosen = new Uint8Array(bins.size).fill(1);
  return {
    bins,
    chosen,
    end,
    along: 'distance',
    bands: [2 / 3.6],
    band: null,
    recoveries: [],
    source: null,
    shifts: [],
    shiftsCancel: false,
    beyondGrip: null,
    brakeNeeded: new Float64Array(bins.size),
    ledgerResidual: 0,
    road,
    greatestCommand: 1,
    events: [],
    quality: () => qualityOfRun(road, vehicleOf(), bins, more.chosen ?? chosen),
    hold: () => ({ measures: [], off: [], endedByRule: [] }),
    ...more,
  };
}
