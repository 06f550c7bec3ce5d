import type { CoastDownFit } from '../identify/coast-down.ts';
import type { RoadLoadForm, TestAir } from '../identify/reference-conditions.ts';
import type { RideFit } from '../identify/ride.ts';
import type { StepTestFit } from '../identify/step-test.ts';
import type { Warning } from '../problems/warning.ts';
import type { InputFile } from './run-result.ts';

/** Where a number that the fit took for granted is from. */
export interface GivenNumber {
  /** In words: `mass`. */
  readonly name: string;
  readonly value: number;
  readonly unit: string;
  /** `vehicle proving-125.yaml`, `--mass-kg`, or the source of a default. */
  readonly from: string;
  readonly isDefault: boolean;
}

interface Whole {
  readonly toolVersion: string;
  /** Names of the logs, without their folders. */
  readonly logs: readonly string[];
  /** Logs first, then the vehicle or the case with its vehicle. */
  readonly inputs: readonly InputFile[];
  readonly given: readonly GivenNumber[];
  readonly warnings: readonly Warning[];
  /** Text of the file that was asked for: a vehicle, or candidates of a case. */
  readonly text: string;
}

/** A coast-down: drag area and rolling coefficient, and a vehicle file with them. */
export interface CoastDownIdentification extends Whole {
  readonly kind: 'coast-down';
  readonly fit: CoastDownFit;
  readonly air: TestAir;
  /** With two terms, as the vehicle file has it. */
  readonly measured: RoadLoadForm;
  readonly atReference: RoadLoadForm;
  /** With three; null: the runs do not tell the second from nothing. */
  readonly withThreeTerms: { readonly measured: RoadLoadForm; readonly atReference: RoadLoadForm } | null;
}

/** Gains of PI that follow from a step test, for one wanted closed loop. */
export interface StepDesign {
  readonly name: string;
  /** Time constant of the closed loop beside its delay [s]. */
  readonly closedLoop: number;
  /** Throttle per speed error [1/(m/s)], and integral time [s]. */
  readonly kp: number;
  readonly integralTime: number;
}

/** A step test: gain, time constant and delay, and candidates designed from them. */
export interface StepIdentification extends Whole {
  readonly kind: 'step';
  readonly fit: StepTestFit;
  readonly designs: readonly StepDesign[];
}

/** A ride beside a vehicle. */
export interface RideIdentification extends Whole {
  readonly kind: 'ride';
  readonly fit: RideFit;
  readonly vehicleName: string;
  /** Where height and wind are from, in words. */
  readonly roadWords: string;
  /** Where the force at the wheel is from, in words. */
  readonly driveWords: string;
}

/** What logs told. */
export type Identification = CoastDownIdentification | StepIdentification | RideIdentification;
