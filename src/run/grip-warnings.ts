import type { Warning } from '../problems/warning.ts';
import type { Demand, Replayed } from '../study/findings.ts';
import { type GripPlace, gripPlaces } from '../study/grip-places.ts';
import { toKm } from '../units/convert.ts';

const WHAT: Readonly<Record<GripPlace['kind'], string>> = {
  spin: 'the driven wheel would spin',
  lift: 'the front wheel would leave the road',
  slide: 'the driven wheel would slide, held back too hard',
};

/** One warning a candidate and kind: where it went furthest beyond the grip, and how often. */
export function gripWarnings(replayed: readonly Replayed[], demand: Demand): readonly Warning[] {
  return replayed.flatMap((run) => {
    const places = gripPlaces(run, demand);
    return (['spin', 'lift', 'slide'] as const).flatMap((kind) => {
      const own = places.filter((place) => place.kind === kind);
      return own.length === 0 ? [] : [warningOf(run.name, own)];
    });
  });
}

function warningOf(name: string, places: readonly GripPlace[]): Warning {
  const beyond = ({ force, limit }: GripPlace): number => Math.abs(force) - Math.abs(limit);
  const [worst, ...others] = places.toSorted((a, b) => beyond(b) - beyond(a)) as [GripPlace, ...GripPlace[]];
  const more =
    others.length === 0 ? '' : ` (and at ${others.length} more ${others.length === 1 ? 'place' : 'places'})`;
  const who = worst.asked
    ? 'The set speed itself asks for as much there'
    : 'The set speed does not ask for as much: the throttle went there by itself';
  return {
    code: 'grip-reached',
    message: `${name} reaches the grip of the tyre at km ${toKm(worst.at).toFixed(2)}${more}: ${Math.abs(worst.force).toFixed(0)} N at the wheel where ${Math.abs(worst.limit).toFixed(0)} N pass, so that ${WHAT[worst.kind]}. ${who}. The model has no slip and drives on as if the wheel held: what it shows from there on is not what the vehicle would do.`,
    from: worst.from,
    to: worst.to,
  };
}
