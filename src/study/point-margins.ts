import type { Gains, LoopTiming } from '../control/controller-response.ts';
import type { LinearController } from '../control/linear-controller.ts';
import { type LoopMargins, type LoopScan, loopScan } from '../control/loop-scan.ts';
import { type SampledLoop, sampledLoop } from '../control/sampled-loop.ts';
import { type LinearVehicle, linearise } from '../vehicle/linearise.ts';
import { keptInGear } from './gear-course.ts';
import type { OperatingPoint, PointMargins } from './operating-point.ts';

/**
 * Margins of a controller at an operating point: the vehicle linearised there, every lag and delay of the replay, the
 * sampler and the computing delay exactly, the controller's gains as they are at this speed in this gear.
 *
 * @param point that the drive can hold, as `operatingPoints` makes them
 * @throws RangeError where the throttle has no effect at the point
 */
export function pointMargins(point: OperatingPoint, controller: LinearController): PointMargins {
  return pointMarginsOf(pointLoop(point, controller).margins(gainsAtPoint(point, controller)));
}

/** Gains of a controller at an operating point: by the gear and by the speed that it measures there. */
export function gainsAtPoint(point: OperatingPoint, controller: LinearController): Gains {
  return controller.gainsAt(point.gear, point.speed * (1 + point.vehicle.sensor.scaleError));
}

/**
 * The linear loop at an operating point, made and scanned once: for many gains under one timing.
 *
 * @throws RangeError where the throttle has no effect at the point
 */
export function pointLoop(point: OperatingPoint, timing: LoopTiming): LoopScan<SampledLoop> {
  return loopScan(sampledLoop(vehicleAt(point), linearAt(point), timing));
}

/** The linear model of the vehicle at an operating point. */
export function linearAt(point: OperatingPoint): LinearVehicle {
  const model = linearise(vehicleAt(point), point);
  if (model === null) throw new RangeError('the throttle has no effect at this operating point');
  return model;
}

/** The vehicle of a point in its gear. */
export const vehicleAt = ({ vehicle, gear }: OperatingPoint): OperatingPoint['vehicle'] =>
  keptInGear(vehicle, gear);

export function pointMarginsOf({ stable, figures }: LoopMargins): PointMargins {
  const place = (frequency: number | undefined): number | null =>
    frequency === undefined || Number.isNaN(frequency) ? null : frequency;
  return {
    stable,
    gainMargin: figures?.gainMargin ?? null,
    phaseCrossover: place(figures?.phaseCrossover),
    gainReduction: figures?.gainReduction ?? null,
    phaseMargin: figures?.phaseMargin ?? null,
    gainCrossover: place(figures?.gainCrossover),
    delayMargin: figures?.delayMargin ?? null,
    sensitivity: figures?.sensitivity ?? null,
    sensitivityAt: place(figures?.sensitivityAt),
    bandwidth: place(figures?.bandwidth),
  };
}
