import type { Vehicle } from '../vehicle/vehicle.ts';
import type { Controller } from './controller.ts';
import { integerController } from './integer.ts';
import { lockedController } from './locked.ts';
import { piController } from './pi.ts';
import { pidController } from './pid.ts';
import type { ControllerSetup } from './setup.ts';

/**
 * The run-time form of a controller over a drive's range of the command, [low, high].
 *
 * @param vehicle that a model in it is compiled from, and whose gears a schedule has
 */
export function controllerFor(
  setup: ControllerSetup,
  low: number,
  high: number,
  vehicle: Vehicle,
): Controller {
  switch (setup.kind) {
    case 'pi':
      return piController(setup, low, high);
    case 'pid':
      return pidController(setup, low, high, vehicle);
    case 'integer':
      return integerController(setup, low, high);
    case 'locked':
      return lockedController(low, high);
  }
}
