import {
  addComplex,
  type Complex,
  complex,
  divideComplex,
  expComplex,
  multiplyComplex,
  subtractComplex,
} from '../numeric/complex.ts';

/** When and how a PI controller works in the loop. */
export interface LoopTiming {
  /** [s] */
  readonly sample: number;
  /** From sample to command [s]. */
  readonly computingDelay: number;
  readonly integration: 'forward' | 'backward';
}

export interface Gains {
  /** [1/(m/s)] */
  readonly kp: number;
  /** [1/(m/s)/s] */
  readonly ki: number;
  /** A derivative on the measurement [1/(m/s2)], and its filter [s]; left out: none. */
  readonly kd?: number;
  readonly derivativeFilter?: number;
}

/** z = e^(j w h). */
export const onCircle = (frequency: number, sample: number): Complex =>
  expComplex(complex(0, frequency * sample));

/** kd / (Tf + Ts), and what the filter keeps over a sample: D(z) = gain (z - 1) / (z - kept). */
export function derivativeOf(
  { kd = 0, derivativeFilter = 0 }: Gains,
  sample: number,
): { readonly gain: number; readonly kept: number } {
  const spread = derivativeFilter + sample;
  return { gain: kd / spread, kept: derivativeFilter / spread };
}

/** From error to integral for ki = 1: h / (z - 1) by the forward rule, h z / (z - 1) by the backward rule. */
export function integratorAt({ sample, integration }: LoopTiming, z: Complex): Complex {
  const forward = divideComplex(complex(sample), subtractComplex(z, complex(1)));
  return integration === 'backward' ? multiplyComplex(forward, z) : forward;
}

/** From measurement to command of a derivative on the measurement, with its sign turned: what it adds to C(z). */
export function derivativeAt(gains: Gains, sample: number, z: Complex): Complex {
  const { gain, kept } = derivativeOf(gains, sample);
  if (gain === 0) return complex(0);
  const above = multiplyComplex(complex(gain), subtractComplex(z, complex(1)));
  return divideComplex(above, subtractComplex(z, complex(kept)));
}

/** C(z) from measurement, with its sign turned, to command. */
export function controllerAt(gains: Gains, timing: LoopTiming, z: Complex): Complex {
  return addComplex(
    addComplex(complex(gains.kp), derivativeAt(gains, timing.sample, z)),
    multiplyComplex(complex(gains.ki), integratorAt(timing, z)),
  );
}
