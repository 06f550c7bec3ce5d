import type { Road } from '../../src/road/road.ts';
import { seeded } from './seeded.ts';

const TURN = 2 * Math.PI;

/** A made-up road over a pass: rolling ground, a climb and a descent of up to 9 % about its middle, noise, a spike. */
export function fixtureRoad(lengthKm: number, withPositions: boolean): Road {
  const grid = 10;
  const size = Math.round((lengthKm * 1000) / grid) + 1;
  const random = seeded(7);
  const column = (of: (i: number) => number) => Float64Array.from({ length: size }, (_, i) => of(i));
  const length = (size - 1) * grid;
  const height = (x: number): number =>
    120 +
    13 * Math.sin((TURN * x) / 2600) +
    4 * Math.sin((TURN * x) / 910 + 1) +
    Math.min(30, lengthKm) *
      11 *
      (1 / (1 + Math.exp(-(x - 0.42 * length) / 1000)) - 1 / (1 + Math.exp(-(x - 0.62 * length) / 850)));
  const distance = column((i) => i * grid);
  const elevation = column((i) => height(distance[i]!));
  const grade = column((i) => (height(distance[i]! + 5) - height(distance[i]! - 5)) / 10);
  const station = new Float64Array(size);
  for (let i = 1; i < size; i++) station[i] = station[i - 1]! + grid * Math.hypot(1, grade[i - 1]!);
  const raw = column((i) => elevation[i]! + 1.6 * (random() - 0.5) + (i === Math.round(size * 0.2) ? 45 : 0));
  const heading = column(
    (i) => (((0.9 + 0.8 * Math.sin(i / 180) + 0.3 * Math.sin(i / 41)) % TURN) + TURN) % TURN,
  );
  const latitudeDeg = new Float64Array(size).fill(52.1);
  const longitudeDeg = new Float64Array(size).fill(-1.2);
  for (let i = 1; i < size; i++) {
    latitudeDeg[i] = latitudeDeg[i - 1]! + (grid * Math.cos(heading[i - 1]!)) / 111_200;
    longitudeDeg[i] = longitudeDeg[i - 1]! + (grid * Math.sin(heading[i - 1]!)) / 68_500;
  }
  const temperature = (i: number) => 288.15 - 0.0065 * elevation[i]!;
  return {
    along: 'distance',
    name: 'Invented pass road',
    size,
    station,
    distance,
    elevation,
    rawElevation: raw,
    grade,
    gradeSd: new Float64Array(size).fill(0.004),
    heading: withPositions ? heading : null,
    curvature: withPositions ? new Float64Array(size) : null,
    headwind: column((i) => 2.4 * Math.cos(4.36 - heading[i]!)),
    crosswind: column((i) => 2.4 * Math.sin(4.36 - heading[i]!)),
    airDensity: column((i) => 1.225 * (1 - 2.25577e-5 * elevation[i]!) ** 4.25588),
    airTemperature: column(temperature),
    latitudeDeg: withPositions ? latitudeDeg : null,
    longitudeDeg: withPositions ? longitudeDeg : null,
    grid,
    smoothing: {
      source: 'barometric',
      wavelength: 200,
      lambda: 1066,
      residualSd: 0.46,
      sourceGradeSd: 0.002,
      shortestHill: 290,
    },
    masks: [{ from: length * 0.31, to: length * 0.31 + 250, reason: 'viaduct' }],
    repairs: [
      {
        kind: 'elevation_spike',
        from: length * 0.2,
        to: length * 0.2,
        points: 1,
        line: 512,
        message: 'One elevation stands 45 m off its neighbours and was left out.',
      },
      {
        kind: 'gap',
        from: length * 0.71,
        to: length * 0.71 + 310,
        points: 0,
        line: 1480,
        message: 'No points over 310 m; bridged in a straight line.',
      },
    ],
    warnings: [],
    turnsAt: null,
    points: Math.round(size / 1.5),
  };
}
