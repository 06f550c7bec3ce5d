import { wrapTurn } from './plan.ts';
import type { Road } from './road.ts';

/**
 * A road driven out and back in one drive. The way back is the mirror image: the same knots from the other end, grade,
 * winds and curvature with the other sign. At the turn two knots share one place, so the grade steps there.
 * Masks come twice, once for each way; repairs and warnings stand at their place on the way out.
 */
export function thereAndBack(road: Road): Road {
  const { size } = road;
  const length = road.distance[size - 1]!;
  const way = road.station[size - 1]!;
  const mirrored = (values: Float64Array, back: (value: number) => number): Float64Array => {
    const out = new Float64Array(2 * size);
    out.set(values);
    for (let i = 0; i < size; i++) out[2 * size - 1 - i] = back(values[i]!);
    return out;
  };
  const same = (values: Float64Array): Float64Array => mirrored(values, (value) => value);
  const turned = (values: Float64Array): Float64Array => mirrored(values, (value) => -value);
  return {
    ...road,
    size: 2 * size,
    station: mirrored(road.station, (s) => 2 * way - s),
    distance: mirrored(road.distance, (x) => 2 * length - x),
    elevation: same(road.elevation),
    rawElevation: road.rawElevation && same(road.rawElevation),
    grade: turned(road.grade),
    gradeSd: same(road.gradeSd),
    heading: road.heading && mirrored(road.heading, (psi) => wrapTurn(psi + Math.PI)),
    curvature: road.curvature && turned(road.curvature),
    headwind: turned(road.headwind),
    crosswind: turned(road.crosswind),
    airDensity: same(road.airDensity),
    airTemperature: same(road.airTemperature),
    latitudeDeg: road.latitudeDeg && same(road.latitudeDeg),
    longitudeDeg: road.longitudeDeg && same(road.longitudeDeg),
    masks: [
      ...road.masks,
      ...road.masks.toReversed().map((mask) => ({
        ...mask,
        from: 2 * length - mask.to,
        to: 2 * length - mask.from,
      })),
    ],
    warnings: [
      ...road.warnings,
      {
        code: 'turn-at-speed',
        message: `The road turns round at ${(length / 1000).toFixed(2)} km and the turn is taken at speed: judge nothing within a few hundred metres of it.`,
        from: length,
        to: length,
      },
    ],
    turnsAt: length,
  };
}
