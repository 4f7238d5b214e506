/** Seeded uniform numbers in [0, 1): the minimal standard generator of Park & Miller 1988, CACM 31, 1192. */
export function uniform(seed: number): () => number {
  let state = seed % 2147483647 || 1;
  for (let i = 0; i < 10; i++) state = (state * 16807) % 2147483647;
  return () => {
    state = (state * 16807) % 2147483647;
    return state / 2147483647;
  };
}

/** Seeded standard normal numbers (Box & Muller 1958). */
export function normalNoise(seed: number): () => number {
  const next = uniform(seed);
  return () => Math.sqrt(-2 * Math.log(next())) * Math.cos(2 * Math.PI * next());
}
