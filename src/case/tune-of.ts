import { InputError, type Problem } from '../problems/input-error.ts';
import type { CostTerm } from '../study/tune-cost.ts';
import { fromKmh, fromPct } from '../units/convert.ts';
import type { CaseFile } from './case-schema.ts';
import { type DefaultUsed, listDefaults } from './list-defaults.ts';
import { type CombinedLoad, loadOf, ownCombination } from './matrix-of.ts';
import type { CaseDocument } from './read-case-file.ts';
import type { VehicleDocument } from './read-vehicle-file.ts';
import { whereOf } from './run-of.ts';
import { type TUNE_DESIGNS, tuneSchema } from './tune-schema.ts';
import { placeOf } from './yaml-source.ts';

export type TuneDesign = (typeof TUNE_DESIGNS)[number];

/** What a case asks of the tuning, in SI. */
export interface TunePlan {
  /** Greatest sensitivity at any operating point. */
  readonly sensitivity: number;
  readonly cost: readonly CostTerm[];
  /** The grid: true speeds [m/s], rise over run, headwinds [m/s], indices of gears, loads. */
  readonly speeds: readonly number[];
  readonly grades: readonly number[];
  readonly headwinds: readonly number[];
  readonly gears: readonly number[];
  readonly loads: readonly CombinedLoad[];
  /** Number of the candidate in the file whose sampling and anti-windup the proposals have; null: the defaults of a PI. */
  readonly like: number | null;
  readonly designs: readonly TuneDesign[];
  readonly gradeStep: number;
  readonly damping: number;
  readonly overshoot: number;
  readonly mostReplays: number;
}

/**
 * What a case asks of the tuning; a case without `tune` asks for the defaults.
 *
 * @throws InputError `no-gears`, `out-of-range` for gears that the vehicle does not have; `too-many-points`
 */
export function tuneOf(document: CaseDocument, vehicle: VehicleDocument): TunePlan {
  const { file } = document;
  const asked = file.tune ?? tuneSchema.parse({});
  refuseGears(document, vehicle);
  const own = ownCombination(document, vehicle);
  const loads = asked.loads ?? file.matrix?.loads ?? ['own'];
  const speeds = asked.speeds_kmh?.map(fromKmh) ?? setSpeeds(file, vehicle);
  const gears = inOrder((asked.gears ?? gearsOf(file, own.gear)).map((gear) => gear - 1));
  refuseSize(document, {
    speeds: inOrder(speeds).length,
    grades: asked.grades_pct.length,
    headwinds: asked.headwinds_m_s.length,
    gears: gears.length,
    loads: loads.length,
  });
  return {
    sensitivity: asked.max_sensitivity,
    cost: asked.cost.map(({ figure, where, weight }) => ({ figure, where: whereOf(where), weight })),
    speeds: inOrder(speeds),
    grades: inOrder(asked.grades_pct.map(fromPct)),
    headwinds: inOrder(asked.headwinds_m_s),
    gears,
    loads: loads.map((load) => loadOf(load, own.load)),
    like: likeOf(file, asked.like),
    designs: asked.designs,
    gradeStep: fromPct(asked.grade_step_pct),
    damping: asked.damping,
    overshoot: fromPct(asked.overshoot_pct),
    mostReplays: asked.most_replays,
  };
}

/** The defaults of `tune` that were used. */
export function tuneDefaults({ source, file }: CaseDocument): readonly DefaultUsed[] {
  const given = (source.value as { tune?: unknown }).tune ?? {};
  const designSpeeds = file.hold.set_speed_is === 'indicated' ? ' as indicated' : '';
  return listDefaults(tuneSchema, given, 'case').map((used) => ({
    ...used,
    key: `tune.${used.key}`,
    value: used.value + (used.key === 'speeds_kmh' ? designSpeeds : ''),
  }));
}

/** Every point takes some tens of milliseconds. */
const MOST_POINTS = 500;

function refuseSize({ source }: CaseDocument, counts: Readonly<Record<string, number>>): void {
  const points = Object.values(counts).reduce((product, count) => product * count, 1);
  if (points <= MOST_POINTS) return;
  const words = Object.entries(counts).flatMap(([name, count]) => (count > 1 ? [`${count} ${name}`] : []));
  throw new InputError({
    code: 'too-many-points',
    place: placeOf(source, ['tune']),
    message: 'the grid has too many operating points',
    found: `${words.join(' x ')} = ${points}`,
    allowed: `at most ${MOST_POINTS}, beside those of the route`,
  });
}

const inOrder = (values: readonly number[]): readonly number[] => [...new Set(values)].sort((a, b) => a - b);

/** The true speeds that the set speeds stand for [m/s]. */
function setSpeeds({ hold, matrix }: CaseFile, vehicle: VehicleDocument): readonly number[] {
  const scaleError = vehicle.file.speed_sensor?.scale_error_pct ?? 0;
  const shown = hold.set_speed_is === 'indicated' ? 1 + fromPct(scaleError) : 1;
  return [
    hold.set_speed_kmh,
    ...hold.changes.map(({ set_speed_kmh }) => set_speed_kmh),
    ...(matrix?.set_speeds_kmh ?? []),
  ].map((speed) => fromKmh(speed) / shown);
}

/** From 1. */
function gearsOf({ hold, matrix }: CaseFile, own: number | null): readonly number[] {
  if (own === null) return [1];
  return [own, ...hold.shifts.map(({ gear }) => gear), ...(matrix?.gears ?? [])];
}

function likeOf({ candidates }: CaseFile, name: string | undefined): number | null {
  const at = candidates.findIndex((one) =>
    name === undefined ? one.kind === 'pi' || one.kind === 'pid' : (one.name ?? one.kind) === name,
  );
  return at < 0 ? null : at;
}

function refuseGears(
  { source, file }: CaseDocument,
  { file: { drive }, source: vehicle }: VehicleDocument,
): void {
  const problems = (file.tune?.gears ?? []).flatMap((gear, i): Problem[] => {
    const place = placeOf(source, ['tune', 'gears', i]);
    if (drive?.kind !== 'engine')
      return [
        {
          code: 'no-gears',
          place: placeOf(source, ['tune', 'gears']),
          message: 'the drive has no gears',
          found: drive === undefined ? 'no drive' : `kind: ${drive.kind}`,
          allowed: 'kind: engine',
        },
      ];
    if (gear <= drive.gear_ratios.length) return [];
    return [
      {
        code: 'out-of-range',
        place,
        message: `is no gear of ${vehicle.file}`,
        found: String(gear),
        allowed: `a gear from 1 to ${drive.gear_ratios.length}`,
      },
    ];
  });
  const [first, ...others] = problems;
  if (first !== undefined) throw new InputError(first, ...others);
}
