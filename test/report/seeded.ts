/** Numbers in [0, 1) from a seed: a 32-bit linear congruential generator (Numerical Recipes' constants, from memory). */
export function seeded(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 4294967296;
  };
}
