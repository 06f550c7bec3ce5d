/** Uniform numbers in [0, 1): sfc32 (Doty-Humphrey, PractRand). */
export function stream(seed) {
  let [a, b, c, d] = [seed, 0x9e3779b9, 0x243f6a88, 1];
  const next = () => {
    const t = (((a + b) | 0) + d) | 0;
    d = (d + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = (c << 21) | (c >>> 11);
    c = (c + t) | 0;
    return (t >>> 0) / 4294967296;
  };
  for (let i = 0; i < 20; i++) next();
  return next;
}

/** A standard normal number (Box and Muller). */
export const normal = (random) => Math.sqrt(-2 * Math.log(1 - random())) * Math.cos(2 * Math.PI * random());
