/**
 * The numbers of scripts/reference/make-fft-fixtures.py: Park and Miller's generator with the
 * factor 48271 (Comm. ACM 36 (1993) 108), exact binary fractions within -1 .. 1.
 */
export function randomNumbers(seed: number, count: number): Float64Array {
  const values = new Float64Array(count);
  let state = seed;
  for (let i = 0; i < count; i++) {
    state = (state * 48271) % 2147483647;
    values[i] = state / 2 ** 30 - 1;
  }
  return values;
}
