import type { HoldEventKind } from '../../loop/result.ts';
import type { HoldMeasure, HoldTransient, HoldTransients } from '../../study/hold-transient.ts';
import { badness } from '../../study/hold-transients.ts';
import type { View } from './view.ts';

/** The same event in the runs of the candidates, with what followed it in each. */
export interface HoldMoment {
  readonly kind: HoldEventKind;
  /** Where the first of them had it [m]. */
  readonly distance: number;
  /** In order along the way; at most one a candidate. */
  readonly measures: readonly HoldMeasure[];
  /** Those of them that have a picture. */
  readonly shown: readonly HoldTransient[];
}

/** Kinds in the order of the page. */
export const MOMENT_KINDS: readonly HoldEventKind[] = [
  'engaged',
  'resumed',
  'tapped',
  'override_ended',
  'ended',
];

/** Events of candidates within this of each other are the same one [m]: each run is some metres further at the same time. */
const SAME_PLACE = 100;
/** Of a kind at most so many have a picture. */
const MOST = 2;

/** Events of one kind, those of all candidates at a place together, in order along the way. */
export function momentsOf(transients: HoldTransients, kind: HoldEventKind): readonly HoldMoment[] {
  const measures = transients.measures
    .filter(({ event }) => event.kind === kind)
    .toSorted((a, b) => a.event.distance - b.event.distance);
  const groups: HoldMeasure[][] = [];
  for (const measure of measures) {
    const { cause, distance } = measure.event;
    const group = groups.findLast(
      ([first, ...rest]) =>
        first !== undefined &&
        distance - first.event.distance <= SAME_PLACE &&
        first.event.cause === cause &&
        ![first, ...rest].some(({ candidate }) => candidate === measure.candidate),
    );
    if (group === undefined) groups.push([measure]);
    else group.push(measure);
  }
  return groups.map((group) => ({
    kind,
    distance: group[0]!.event.distance,
    measures: group,
    shown: group.flatMap((measure) => transients.shown.find((one) => isSame(one, measure)) ?? []),
  }));
}

const isSame = (a: HoldMeasure, b: HoldMeasure): boolean =>
  a.candidate === b.candidate && a.event.time === b.event.time && a.event.kind === b.event.kind;

/** The moments of a kind that the page has pictures of: the worst of the designs, in order along the way. */
export function shownMoments({ result, candidates }: View, kind: HoldEventKind): readonly HoldMoment[] {
  const designs = new Set(candidates.filter(({ locked }) => !locked).map(({ name }) => name));
  // Designs come before a throttle locked in place.
  const worst = ({ shown }: HoldMoment): number =>
    shown.reduce(
      (most, one) => Math.max(most, badness(one) + (designs.has(one.candidate) ? 1e6 : 0)),
      Number.NEGATIVE_INFINITY,
    );
  return momentsOf(result.transients, kind)
    .filter(({ shown }) => shown.length > 0)
    .toSorted((a, b) => worst(b) - worst(a) || a.distance - b.distance)
    .slice(0, MOST)
    .toSorted((a, b) => a.distance - b.distance);
}
