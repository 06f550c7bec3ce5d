// A made-up road whose true grade is known, with the noise of each kind of elevation source: the recipe of the
// published-style experiment in this folder's tests (tangents 100-900 m, grades N(0, 3.5 %), vertical curves K 10-60 m/%).

export interface Randomness {
  uniform(): number;
  normal(): number;
}

/** Mulberry32 with Box-Muller: the tests' own, so that they do not lean on the code under test. */
export function randomness(seed: number): Randomness {
  let state = seed >>> 0;
  const uniform = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  const normal = (): number => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
  return { uniform, normal };
}

export interface TrueRoad {
  readonly distance: Float64Array;
  readonly elevation: Float64Array;
  readonly grade: Float64Array;
}

/** Tangents joined by parabolas; grade and elevation exact at multiples of `step` [m]. */
export function syntheticRoad(random: Randomness, length: number, step: number): TrueRoad {
  const size = Math.round(length / step) + 1;
  const distance = Float64Array.from({ length: size }, (_, i) => i * step);
  const elevation = new Float64Array(size);
  const grade = new Float64Array(size);
  let i = 0;
  let start = 0;
  let height = 300;
  let before = 0.035 * random.normal();
  while (i < size) {
    // A tangent, then the parabola to the next grade; heights in closed form.
    const tangent = 100 + 800 * random.uniform();
    const after = 0.035 * random.normal();
    const curve = (10 + 50 * random.uniform()) * 100 * Math.abs(after - before);
    const bend = (after - before) / curve;
    for (; i < size && distance[i]! <= start + tangent + curve; i++) {
      const past = distance[i]! - start;
      const bent = Math.max(0, past - tangent);
      grade[i] = before + bend * bent;
      elevation[i] = height + before * past + (bend * bent * bent) / 2;
    }
    height += before * (tangent + curve) + (bend * curve * curve) / 2;
    start += tangent + curve;
    before = after;
  }
  return { distance, elevation, grade };
}

/** Stationary first-order autoregressive noise: s.d. [m], correlation length [m], at equal steps [m]. */
export function autoregressive(
  random: Randomness,
  size: number,
  sd: number,
  length: number,
  step: number,
): Float64Array {
  const a = Math.exp(-step / length);
  const drive = sd * Math.sqrt(1 - a * a);
  const out = new Float64Array(size);
  out[0] = sd * random.normal();
  for (let i = 1; i < size; i++) out[i] = a * out[i - 1]! + drive * random.normal();
  return out;
}

export type NoiseClass = 'white' | 'gnss' | 'barometric' | 'barometric-1m' | 'dem30' | 'lidar';

/** The elevation as a source of this class gives it. */
export function measure(
  random: Randomness,
  noise: NoiseClass,
  elevation: Float64Array,
  step: number,
): Float64Array {
  const n = elevation.length;
  const ar = (sd: number, length: number): Float64Array => autoregressive(random, n, sd, length, step);
  const plus = (...parts: Float64Array[]): Float64Array =>
    elevation.map((z, i) => parts.reduce((sum, part) => sum + part[i]!, z));
  const white = (sd: number): Float64Array => Float64Array.from({ length: n }, () => sd * random.normal());
  const quantised = (z: Float64Array, quantum: number): Float64Array =>
    z.map((value) => Math.round(value / quantum) * quantum);
  switch (noise) {
    case 'white':
      return plus(white(1));
    case 'gnss':
      return plus(ar(3, 400), white(0.5));
    case 'barometric':
      return quantised(plus(ar(0.5, 800)), 0.2);
    case 'barometric-1m':
      return quantised(plus(ar(0.5, 800)), 1);
    case 'dem30':
      return plus(ar(3, 60));
    case 'lidar':
      return plus(ar(0.15, 100));
  }
}
