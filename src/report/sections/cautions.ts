import type { RiderPlan } from '../../loop/plan.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';

/** A result about a ride of a vehicle. */
export interface Ridden {
  readonly result: { readonly rider: RiderPlan; readonly vehicle: Vehicle };
}

/** What every reader must know, whatever the figures say. */
export function cautions({ result: { rider, vehicle } }: Ridden): readonly string[] {
  const brake = rider.brakesAbove !== null;
  const grip =
    vehicle.traction === null
      ? 'Nothing here looks at grip, lean, bends or traffic.'
      : 'Grip is looked at on the straight alone, with one coefficient all along; nothing here looks at lean, bends or traffic.';
  const shifts = rider.shifts.length > 0 ? ' but for the shifts of the plan' : '';
  return [
    'A simulation is no approval to ride. It shows where a design fails on paper; it cannot show that one is safe on the road.',
    `Speed hold can hide a slide, a bend or a stop ahead: it keeps driving while grip or sight goes. ${grip}`,
    `The rider's override, and the cut-outs by brake, clutch and stand, are outside this model${shifts}${brake ? '; the brake that it has only holds a given overspeed on descents' : ''}.`,
    "Type-approval rules, local law and a qualified person's judgement come first.",
    'Every figure is as good as the track, the vehicle data and the defaults below; a requirement that is met by less than its spread is not met with certainty.',
  ];
}
