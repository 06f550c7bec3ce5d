import fc from 'fast-check';

/** Numbers spread evenly between two ends; `fc.double` looks mostly near 0 and at its ends. */
export const uniform = (min: number, max: number): fc.Arbitrary<number> =>
  fc.integer({ min: 0, max: 2 ** 30 }).map((k) => min + ((max - min) * k) / 2 ** 30);
