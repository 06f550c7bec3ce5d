import { type CombinedCase, caseOfCombination } from '../case/case-of-combination.ts';
import {
  type Combination,
  type Matrix,
  type MatrixList,
  matrixOf,
  ownCombination,
} from '../case/matrix-of.ts';
import type { CaseDocument } from '../case/read-case-file.ts';
import type { VehicleDocument } from '../case/read-vehicle-file.ts';
import { requirementsOf } from '../case/run-of.ts';
import { rideProblems, vehicleOfCase } from '../case/vehicle-of-case.ts';
import { placeOf } from '../case/yaml-source.ts';
import type { Candidate } from '../control/setup.ts';
import type { SupervisorSetup } from '../control/supervisor-setup.ts';
import type { HoldPlan, RiderPlan, SensorFault } from '../loop/plan.ts';
import { InputError, type Problem } from '../problems/input-error.ts';
import type { Road } from '../road/road.ts';
import type { FigureSpread } from '../study/figure-spread.ts';
import type { Requirement } from '../study/findings.ts';
import { toKm } from '../units/convert.ts';
import type { Vehicle } from '../vehicle/vehicle.ts';
import { rideOf } from './ride-of.ts';

/**
 * Everything that the combinations of a matrix are run from. Plain data, so that it can be posted to a worker; what
 * combinations share stands in it once.
 */
export interface MatrixWork {
  readonly lists: readonly MatrixList[];
  /** Which way the case itself drives the road. */
  readonly direction: Combination['direction'];
  readonly roads: readonly Road[];
  readonly vehicles: readonly Vehicle[];
  /** With the gains of the case itself: a design is not made anew for each combination. */
  readonly candidates: readonly Candidate[];
  readonly scheme: 'exact' | 'fast';
  /** Half-widths of the bands that are counted, the figures' own first [m/s]. */
  readonly bands: readonly number[];
  /** Width of the record's bins [m]. */
  readonly bin: number;
  /** Of the run of the case itself, by which figures near a limit are judged. */
  readonly spread: FigureSpread;
  readonly cells: readonly CellPlan[];
}

/** A combination before its runs. */
export interface CellPlan {
  readonly combination: Combination;
  /** It is the case itself. */
  readonly own: boolean;
  readonly ride: CellRide | null;
  /** Why it cannot be run; null: it can. */
  readonly reason: string | null;
  /** Stretches as this combination drives over them. */
  readonly requirements: readonly Requirement[];
}

/** What is different from one combination to the next. */
export interface CellRide {
  /** Index into the roads, and into the vehicles. */
  readonly road: number;
  readonly vehicle: number;
  readonly hold: HoldPlan;
  readonly rider: RiderPlan;
  readonly supervisor?: SupervisorSetup;
  readonly faults?: readonly SensorFault[];
}

/** What combinations and the run of the case itself have in common. */
export interface MatrixBase {
  readonly document: CaseDocument;
  readonly vehicle: VehicleDocument;
  /** Of the case itself. */
  readonly road: Road;
  /** Makes the road of a case that drives the same track. */
  readonly makeRoad: (document: CaseDocument) => Road;
}

/** The matrix of a case with its roads, vehicles and rides; the rest of the work is added once the run itself is done. */
export type MatrixRides = Pick<MatrixWork, 'lists' | 'direction' | 'roads' | 'vehicles' | 'cells'>;

/**
 * Makes roads, vehicles and rides of every combination; null where the case has no matrix. A combination that the
 * vehicle cannot ride, such as a gear that does not turn at the set speed, is kept with its reason.
 *
 * @throws InputError `no-gears`, `out-of-range` (a gear), `wind-needs-heading`, `wind-without-effect` where the track
 *   says itself what wind there is
 */
export function matrixRides(base: MatrixBase): MatrixRides | null {
  const { document, vehicle, road } = base;
  const matrix = matrixOf(document, vehicle);
  if (matrix === null) return null;
  const own = keyOf(ownCombination(document, vehicle));
  const length = road.distance[road.size - 1] ?? 0;
  const roads = sharing<Road>();
  const vehicles = sharing<Vehicle>();
  const cells = matrix.combinations.map((combination): CellPlan => {
    const turned = combination.direction !== document.file.track.direction;
    const here = caseOfCombination(document, vehicle, combination, toKm(length));
    const requirements = requirementsOf(document).map((one) =>
      turned ? turnedRequirement(one, length) : one,
    );
    const cell = { combination, own: keyOf(combination) === own, requirements };
    const unable = (problems: readonly Problem[]): CellPlan => ({
      ...cell,
      ride: null,
      reason: problems.map(reasonOf).join('; '),
    });
    const problems = rideProblems(here.document, here.vehicle);
    if (problems.length > 0) return unable(problems);
    try {
      const places = {
        road: roads.at(roadKey(combination, road), () => roadHere(base, here, matrix, combination)),
        vehicle: vehicles.at(vehicleKey(here, combination), () => vehicleOfCase(here.document, here.vehicle)),
      };
      // Bends are taken as this load, direction and set speed meet them.
      const { bends: _, ...ridden } = rideOf(
        here.document,
        vehicles.all[places.vehicle]!,
        roads.all[places.road]!,
      );
      return { ...cell, ride: { ...places, ...ridden }, reason: null };
    } catch (error) {
      if (!(error instanceof InputError) || error.problems.some(({ place }) => isOfMatrix(place.key)))
        throw error;
      return unable(error.problems);
    }
  });
  refuseIdleWinds(base, matrix, roads.all, cells);
  const { direction } = document.file.track;
  return { lists: matrix.lists, direction, roads: roads.all, vehicles: vehicles.all, cells };
}

const isOfMatrix = (key: string | undefined): boolean => key?.startsWith('matrix') === true;

/** Things made once for each key. */
function sharing<T>(): { readonly all: T[]; readonly at: (key: string, make: () => T) => number } {
  const all: T[] = [];
  const places = new Map<string, number>();
  return {
    all,
    at: (key, make) => {
      const known = places.get(key);
      if (known !== undefined) return known;
      const place = all.push(make()) - 1;
      places.set(key, place);
      return place;
    },
  };
}

/** Without the labels, which change nothing. */
const keyOf = ({ load, wind, direction, gear, setSpeedKmh }: Combination): string =>
  JSON.stringify([
    load.riderKg,
    load.payloadKg + load.pillionKg,
    windKey(wind),
    direction,
    gear,
    setSpeedKmh,
  ]);
const windKey = ({ speed, fromDeg }: Combination['wind']): string =>
  speed === 0 ? 'still' : `${speed} ${fromDeg}`;

/** Distance over time of a road along time is that at the set speed. */
const roadKey = ({ wind, direction, setSpeedKmh }: Combination, { along }: Road): string =>
  JSON.stringify([windKey(wind), direction, along === 'time' ? setSpeedKmh : null]);
const vehicleKey = ({ document }: CombinedCase, { load }: Combination): string =>
  JSON.stringify([load.riderKg, load.payloadKg + load.pillionKg, document.file.hold.gear ?? null]);

function roadHere(
  { document, makeRoad }: MatrixBase,
  here: CombinedCase,
  { lists }: Matrix,
  { wind }: Combination,
): Road {
  try {
    return makeRoad(here.document);
  } catch (error) {
    if (!(error instanceof InputError) || !lists.includes('winds')) throw error;
    const [first, ...others] = error.problems.map((problem) =>
      problem.code === 'wind-needs-heading'
        ? {
            ...problem,
            place: placeOf(document.source, ['matrix', 'winds', indexOfWind(document, wind)]),
          }
        : problem,
    );
    throw first === undefined ? error : new InputError(first, ...others);
  }
}

/** Which item of the list is this wind. */
const indexOfWind = ({ file }: CaseDocument, { speed, fromDeg }: Combination['wind']): number =>
  Math.max(
    0,
    (file.matrix?.winds ?? []).findIndex(
      (item) => typeof item === 'object' && item.speed_m_s === speed && item.from_deg === fromDeg,
    ),
  );

/** A track that says itself what wind it meets makes every combination of winds the same. */
function refuseIdleWinds(
  { document }: MatrixBase,
  { lists }: Matrix,
  roads: readonly Road[],
  cells: readonly CellPlan[],
): void {
  if (!lists.includes('winds')) return;
  const seen = new Map<string, { key: string; road: Road }>();
  for (const { ride, combination } of cells) {
    const road = ride === null ? undefined : roads[ride.road];
    if (road === undefined) continue;
    const others = JSON.stringify([combination.direction, combination.setSpeedKmh]);
    const before = seen.get(others);
    const key = windKey(combination.wind);
    if (before === undefined) seen.set(others, { key, road });
    else if (before.key !== key && sameWind(before.road, road))
      throw new InputError({
        code: 'wind-without-effect',
        place: placeOf(document.source, ['matrix', 'winds']),
        message: 'changes nothing: the track says itself what wind it meets',
        allowed: 'no winds, or a track without headwind',
      });
  }
}

const sameWind = (a: Road, b: Road): boolean =>
  a.headwind.every((w, i) => w === b.headwind[i]) && a.crosswind.every((w, i) => w === b.crosswind[i]);

/** The same stretch of the ground, driven the other way. */
function turnedRequirement(requirement: Requirement, length: number): Requirement {
  const { where } = requirement;
  if (typeof where === 'string') return requirement;
  return { ...requirement, where: { from: Math.max(0, length - where.to), to: length - where.from } };
}

const reasonOf = ({ message, found, allowed }: Problem): string =>
  [message, found === undefined ? '' : ` (${found})`, allowed === undefined ? '' : `: ${allowed}`].join('');
