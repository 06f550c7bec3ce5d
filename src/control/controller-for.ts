import type { Controller } from './controller.ts';
import { lockedController } from './locked.ts';
import { piController } from './pi.ts';
import type { ControllerSetup } from './setup.ts';

/** The run-time form of a controller over a drive's range of the command, [low, high]. */
export function controllerFor(setup: ControllerSetup, low: number, high: number): Controller {
  return setup.kind === 'pi' ? piController(setup, low, high) : lockedController(low, high);
}
