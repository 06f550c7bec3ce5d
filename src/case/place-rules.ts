import type { RuleFault } from './check-file.ts';
import type { Path } from './yaml-source.ts';

/** Something that a file places along the way. */
type Placed = { readonly at_km: number } | { readonly at_s: number };

/** All items of a list say where they are in the same of two ways. */
export function oneWay(list: readonly object[], path: Path, one: string, other: string): RuleFault[] {
  const first = list[0] !== undefined && one in list[0] ? one : other;
  const odd = list.findIndex((item) => !(first in item));
  if (odd < 0) return [];
  return [
    {
      path: [...path, odd],
      code: 'mixed-list',
      message: `${one} and ${other} are mixed in one list`,
      found: `${first} before, ${first === one ? other : one} here`,
      allowed: `all by ${one}, or all by ${other}`,
    },
  ];
}

/** Faults where a list is placed by kilometre and by time, or its places do not increase. */
export function placesInOrder(list: readonly Placed[], path: Path, message: string): RuleFault[] {
  const mixed = oneWay(list, path, 'at_km', 'at_s');
  if (mixed.length > 0) return mixed;
  const at = (item: Placed): number => ('at_km' in item ? item.at_km : item.at_s);
  return list.flatMap((item, i) => {
    const before = i === 0 ? Number.NEGATIVE_INFINITY : at(list[i - 1]!);
    if (at(item) > before) return [];
    return [
      {
        path: [...path, i, 'at_km' in item ? 'at_km' : 'at_s'],
        code: 'not-in-order',
        message,
        found: `${at(item)} after ${before}`,
        allowed: `more than ${before}`,
      },
    ];
  });
}

/** A fault where a stretch does not go forwards. */
export function upwards(stretch: { from_km: number; to_km: number }, path: Path): RuleFault[] {
  if (stretch.from_km < stretch.to_km) return [];
  return [
    {
      path: [...path, 'to_km'],
      code: 'not-in-order',
      message: 'the stretch ends before it starts',
      found: `${stretch.from_km} km to ${stretch.to_km} km`,
      allowed: `more than ${stretch.from_km} km`,
    },
  ];
}
