import type { CaseDocument } from '../case/read-case-file.ts';
import { roadOptionsOf } from '../case/road-of.ts';
import { type Path, placeOf } from '../case/yaml-source.ts';
import type { RiderAct, RiderPlan, RoutePlace } from '../loop/plan.ts';
import { InputError, type Problem } from '../problems/input-error.ts';
import type { Place } from '../problems/place.ts';
import type { Warning } from '../problems/warning.ts';
import type { Road } from '../road/road.ts';
import type { Requirement } from '../study/findings.ts';
import type { CostTerm } from '../study/tune-cost.ts';
import { fromKm, toKm } from '../units/convert.ts';
import type { Ride } from './ride-of.ts';
import type { CandidateResult } from './run-result.ts';

/** What a ride does at places and times that its case writes. */
type PlacedRide = Pick<Ride, 'hold' | 'rider' | 'faults'>;

/** A stretch may run over the end by this much without a word: places are written in km, to a metre [m]. */
const OVERRUN = 1;
/** The end of a road is the end, to rounding [m]. */
const AT_END = 1e-6;

const lengthOf = (road: Road): number => road.distance[road.size - 1] ?? 0;
/** A place or a length as people write it: to a metre, without zeros at the end. */
const km = (distance: number): string => `${Number(toKm(distance).toFixed(3))} km`;

/**
 * What a case says by its kilometres must lie on the road: a requirement that begins beyond the end would be judged on
 * nothing, and a change there would never happen.
 *
 * @param cost terms of a tuning, where there is one
 * @returns a warning for each stretch that runs over the end
 * @throws InputError `beyond-the-road`, for all of them, each at its key
 */
export function placesOnRoad(
  { source, file }: CaseDocument,
  requirements: readonly Requirement[],
  { hold, rider, faults = [] }: PlacedRide,
  road: Road,
  cost: readonly CostTerm[] = [],
): readonly Warning[] {
  const length = lengthOf(road);
  const beyond = (place: Place, message: string, found: number): Problem =>
    beyondTheRoad(place, message, found, `${km(length)}, the length of the road`);
  const outside = (list: Path, items: readonly { readonly at: RoutePlace }[], message: string): Problem[] =>
    items.flatMap(({ at }, i) =>
      'distance' in at && at.distance >= length - AT_END
        ? [beyond(placeOf(source, [...list, i, 'at_km']), message, at.distance)]
        : [],
    );
  const problems = [
    ...outside(['hold', 'changes'], hold.changes, 'the set speed would change beyond the end of the road'),
    ...outside(['rider', 'does'], writtenActs(rider), 'the rider would do this beyond the end of the road'),
    ...outside(['faults'], faults, 'the fault would begin beyond the end of the road'),
  ];
  file.hold.shifts.forEach(({ at_km }, i) => {
    const at = fromKm(at_km);
    if (at >= length - AT_END)
      problems.push(
        beyond(
          placeOf(source, ['hold', 'shifts', i, 'at_km']),
          'the rider would shift beyond the end of the road',
          at,
        ),
      );
  });
  const warnings: Warning[] = [];
  const judged = [
    ...requirements.map(({ id, where }, i) => ({ name: id, where, path: ['requirements', i] })),
    ...cost.map(({ figure, where }, i) => ({
      name: `The cost of ${figure}`,
      where,
      path: ['tune', 'cost', i],
    })),
  ];
  judged.forEach(({ name, where, path }) => {
    if (typeof where === 'string') return;
    const place = (key: string) => placeOf(source, [...path, 'where', key]);
    if (where.from >= length - AT_END)
      problems.push(
        beyond(place('from_km'), 'the stretch would begin beyond the end of the road', where.from),
      );
    else if (where.to > length + OVERRUN)
      warnings.push({
        code: 'stretch-cut-at-end',
        message: `${name} is judged to the end of the road, ${km(length)}: its stretch would go on to ${km(where.to)}.`,
        place: place('to_km'),
        from: where.from,
        to: length,
      });
  });
  const [first, ...others] = problems;
  if (first !== undefined) throw new InputError(first, ...others);
  return warnings;
}

const beyondTheRoad = (place: Place, message: string, found: number, most: string): Problem => ({
  code: 'beyond-the-road',
  place,
  message,
  found: km(found),
  allowed: `less than ${most}`,
});

/**
 * Masks and shelter are places along the track: one that begins beyond its end would do nothing.
 *
 * @param length of the track as its file, or the profile, has it [m]
 * @throws InputError `beyond-the-road`, for all of them, each at its key
 */
export function stretchesOnTrack(document: CaseDocument, length: number): void {
  const { masks, shelter } = roadOptionsOf(document);
  const beyond = (key: 'masks' | 'shelter', stretches: readonly { readonly from: number }[]): Problem[] =>
    stretches.flatMap(({ from }, i) =>
      from < length - AT_END
        ? []
        : [
            beyondTheRoad(
              placeOf(document.source, ['road', key, i, 'from_km']),
              'the stretch would begin beyond the end of the track',
              from,
              `${km(length)}, the length of the track`,
            ),
          ],
    );
  const [first, ...others] = [...beyond('masks', masks), ...beyond('shelter', shelter)];
  if (first !== undefined) throw new InputError(first, ...others);
}

/** A warning for each change, act and fault at a time that a run had not reached when it ended. */
export function timesNotReached(
  { source }: CaseDocument,
  { hold, rider, faults = [] }: PlacedRide,
  candidates: readonly Pick<CandidateResult, 'name' | 'result'>[],
): readonly Warning[] {
  const notReached = (
    list: Path,
    items: readonly { readonly at: RoutePlace }[],
    code: string,
    words: string,
  ): Warning[] =>
    items.flatMap(({ at }, i): Warning[] => {
      if (!('time' in at)) return [];
      const ended = candidates.filter(({ result }) => result.endTime <= at.time);
      if (ended.length === 0) return [];
      const names = ended.map(({ name, result }) => `${name} after ${result.endTime.toFixed(1)} s`);
      return [
        {
          code,
          message: `${words} at ${at.time} s: the run had ended before it (${names.join(', ')}).`,
          place: placeOf(source, [...list, i, 'at_s']),
        },
      ];
    });
  return [
    ...notReached(['hold', 'changes'], hold.changes, 'change-not-reached', 'The set speed did not change'),
    ...notReached(['rider', 'does'], writtenActs(rider), 'act-not-reached', 'The rider did nothing'),
    ...notReached(['faults'], faults, 'fault-not-reached', 'The sensor had no fault'),
  ];
}

/** In the order of the file: acts for bends stand among them, and never out of their order. */
const writtenActs = ({ acts = [] }: RiderPlan): readonly RiderAct[] =>
  acts.filter(({ reason }) => reason === 'written');
