import type { CoastDownFit } from '../identify/coast-down.ts';
import type { RoadLoadForm, TestAir } from '../identify/reference-conditions.ts';
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
}

/** A coast-down: drag area and rolling coefficient, and a vehicle file with them. */
export interface CoastDownIdentification extends Whole {
  readonly kind: 'coast-down';
  readonly fit: CoastDownFit;
  readonly air: TestAir;
  readonly measured: RoadLoadForm;
  readonly atReference: RoadLoadForm;
  /** Text of the vehicle file. */
  readonly vehicle: string;
}

/** What logs told. */
export type Identification = CoastDownIdentification;
