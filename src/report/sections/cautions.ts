import type { SupervisorSetup } from '../../control/supervisor-setup.ts';
import type { HoldPlan, RiderPlan, SensorFault } from '../../loop/plan.ts';
import type { BendPlan } from '../../study/bend-plan.ts';
import type { Vehicle } from '../../vehicle/vehicle.ts';

/** A result about a ride of a vehicle. */
export interface Ridden {
  readonly result: {
    readonly rider: RiderPlan;
    readonly vehicle: Vehicle;
    readonly hold?: HoldPlan;
    readonly supervisor?: SupervisorSetup | null;
    readonly faults?: readonly SensorFault[];
    readonly bends?: BendPlan | null;
  };
}

/** What every reader must know, whatever the figures say. */
export function cautions({ result }: Ridden): readonly string[] {
  const { vehicle, bends = null } = result;
  const grip = vehicle.traction !== null;
  const sight =
    bends === null
      ? grip
        ? 'Grip is looked at on the straight alone, with one coefficient all along; nothing here looks at lean, bends or traffic.'
        : 'Nothing here looks at grip, lean, bends or traffic.'
      : `Bends are known by the radius of the track alone: a bend that the track does not show is ridden at the set speed, and camber, sight${grip ? '' : ', grip'} and surface are not looked at${grip ? '; grip is looked at on the straight alone, with one coefficient all along' : ''}. Nothing here looks at lean or traffic.`;
  return [
    'A simulation is no approval to ride. It shows where a design fails on paper; it cannot show that one is safe on the road.',
    `Speed hold can hide a slide, a bend or a stop ahead: it keeps driving while grip or sight goes. ${sight}`,
    handsOnIt(result),
    "Type-approval rules, local law and a qualified person's judgement come first.",
    'Every figure is as good as the track, the vehicle data and the defaults below; a requirement that is met by less than its spread is not met with certainty.',
  ];
}

/** What of override and cut-outs is in the model, and how. */
function handsOnIt({ rider, hold, supervisor = null, faults = [] }: Ridden['result']): string {
  const asked =
    supervisor !== null ||
    faults.length > 0 ||
    hold?.starts === 'by_hand' ||
    (rider.acts !== undefined && rider.acts.length > 0);
  const shifts = rider.shifts.length > 0 ? ' but for the shifts of the plan' : '';
  const brake =
    rider.brakesAbove === null ? '' : '; the brake that it has only holds a given overspeed on descents';
  return asked
    ? 'Switch, grip, brake and clutch work here as the case writes them: at once, every time, in the hand of a rider who knows road and vehicle and never errs. No reaction time, no stuck switch, no second channel of the sensor and no cut-out by the stand is in this model: what ends hold on paper is no proof that it ends on the road.'
    : `The rider's override, and the cut-outs by brake, clutch and stand, are outside this model${shifts}${brake}.`;
}
