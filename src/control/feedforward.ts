import { exp, sin } from '../numeric/elementary.ts';
import { STANDARD_GRAVITY } from '../units/constants.ts';
import { BUS_FEEDFORWARD, BUS_GEAR, BUS_MEASURED, BUS_REFERENCE, BUS_SLOPE } from './bus.ts';
import { SLOPE, SLOPE_MEASURED } from './memory.ts';
import type { FeedforwardSetup } from './setup.ts';
import type { VehicleModel } from './vehicle-model.ts';

/** A part of a controller that works from a model, once a sample before the law. */
export interface ModelPart {
  /** Puts its filters at rest, as if all had been steady. */
  readonly engage: (bus: Float64Array) => void;
  /** Adds its part of the command to BUS_FEEDFORWARD. */
  readonly step: (bus: Float64Array) => void;
}

/**
 * Feedforward of drag and grade: with T the throttle that gives a force in the gear in hand, at the reference r,
 *
 *     drag and grade  T(F(r) + m G)                  G = g sin(theta)
 *     grade alone     T(F(r) + m G) - T(F(r))        drag alone: T(F(r))
 *
 * The accelerometer reads A = a + g sin(theta + pitch error); with z = y(k) - y(k - 1), kept = exp(-Ts / Tf), G is
 *
 *     G <- kept G + (1 - kept) (A - z / Ts),
 *
 * the usual estimate of the grade from longitudinal acceleration; the pitch error is taken as g sin(pitch error) more.
 *
 * The grade that it reckons with stands at SLOPE.
 */
export function feedforward(setup: FeedforwardSetup, model: VehicleModel, sample: number): ModelPart {
  const { drag, grade } = setup;
  const sensed = grade?.kind === 'accelerometer';
  const graded = grade !== null;
  const filter = sensed ? grade.filter : 0;
  const constants = Float64Array.of(
    filter > 0 ? exp(-sample / filter) : 0,
    1 / sample,
    sensed ? STANDARD_GRAVITY * sin(grade.pitchError) : 0,
    model.mass,
  );

  // Drag and its throttle at the reference, which seldom moves: a table looked up once.
  const known = Float64Array.of(Number.NaN, Number.NaN, 0, 0);
  const { out } = model;

  const step = (bus: Float64Array): void => {
    const reference = bus[BUS_REFERENCE];
    const gear = bus[BUS_GEAR];
    if (reference !== known[0] || gear !== known[1]) {
      known[0] = reference;
      known[1] = gear;
      model.drag(reference);
      known[2] = out[0];
      model.throttle(gear, reference, known[2]);
      known[3] = out[0];
    }
    if (!graded) {
      bus[BUS_FEEDFORWARD] += known[3];
      return;
    }
    let slope = bus[BUS_SLOPE];
    if (sensed) {
      const measured = bus[BUS_MEASURED];
      const reading = slope + constants[2] - (measured - bus[SLOPE_MEASURED]) * constants[1];
      slope = reading + constants[0] * (bus[SLOPE] - reading);
      bus[SLOPE_MEASURED] = measured;
    }
    bus[SLOPE] = slope;
    model.throttle(gear, reference, known[2] + constants[3] * slope);
    bus[BUS_FEEDFORWARD] += drag ? out[0] : out[0] - known[3];
  };
  const engage = (bus: Float64Array): void => {
    bus[SLOPE] = bus[BUS_SLOPE] + constants[2];
    bus[SLOPE_MEASURED] = bus[BUS_MEASURED];
  };
  return { engage, step };
}
