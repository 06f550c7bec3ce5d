import type { Problem } from '../problems/input-error.ts';
import type { CaseDocument } from './read-case-file.ts';
import { type Path, placeOf } from './yaml-source.ts';

/** Rules of the unit that go with none of the set speeds of a case, or not with one of them. */
export function speedsOfUnit({ source, file: { hold, supervisor } }: CaseDocument): Problem[] {
  if (supervisor === undefined) return [];
  const { lowest_speed_kmh: lowest, too_slow } = supervisor;
  const asked: { path: Path; speedKmh: number }[] = [
    { path: ['hold', 'set_speed_kmh'], speedKmh: hold.set_speed_kmh },
    ...hold.changes.map(({ set_speed_kmh }, i) => ({
      path: ['hold', 'changes', i, 'set_speed_kmh'],
      speedKmh: set_speed_kmh,
    })),
  ];
  const problems = asked.flatMap(({ path, speedKmh }): Problem[] =>
    lowest === undefined || speedKmh > lowest
      ? []
      : [
          {
            code: 'not-in-order',
            place: placeOf(source, path),
            message: 'the unit does not hold so low a speed: hold would end at once',
            found: `${speedKmh} km/h`,
            allowed: `more than ${lowest} km/h, supervisor.lowest_speed_kmh`,
          },
        ],
  );
  const fastest = asked.reduce((most, { speedKmh }) => Math.max(most, speedKmh), 0);
  if (too_slow !== undefined && too_slow.below_set_kmh >= fastest)
    problems.push({
      code: 'not-in-order',
      place: placeOf(source, ['supervisor', 'too_slow', 'below_set_kmh']),
      message: 'is never reached: the vehicle would stand still before',
      found: `${too_slow.below_set_kmh} km/h`,
      allowed: `less than ${fastest} km/h, the highest set speed`,
    });
  return problems;
}
