/**
 * Seeded uniform numbers in (0, 1), the same on every machine: the 32-bit shift-register generator
 * of Marsaglia 2003, J. Stat. Softw. 8, 14, with shifts 13, 17, 5. Seeds are spread first, so that
 * neighbouring ones give unlike numbers.
 */
export function seededUniform(seed: number): () => number {
  let state = Math.imul(Math.trunc(seed) ^ 0x9e3779b9, 0x85ebca6b) | 0 || 1;
  const next = () => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    return ((state >>> 0) + 0.5) / 4294967296;
  };
  for (let i = 0; i < 8; i++) next();
  return next;
}

/** Seeded standard normal numbers, two from each pair of uniform ones (Box & Muller 1958). */
export function seededNormal(seed: number): () => number {
  const next = seededUniform(seed);
  let spare: number | undefined;
  return () => {
    if (spare !== undefined) {
      const value = spare;
      spare = undefined;
      return value;
    }
    const size = Math.sqrt(-2 * Math.log(next()));
    const angle = 2 * Math.PI * next();
    spare = size * Math.sin(angle);
    return size * Math.cos(angle);
  };
}
