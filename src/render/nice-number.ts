/** Smallest 1, 2 or 5 times a power of ten that is not below `value` (> 0). */
export function niceStepAbove(value: number): number {
  return stepAbove(value, [1, 2, 5, 10]);
}

/** Smallest round limit not below `value` (> 0): finer than steps, still easy to read. */
export function niceLimitAbove(value: number): number {
  return stepAbove(value, [1, 1.5, 2, 2.5, 3, 4, 5, 6, 8, 10]);
}

/** Nearest of 1, 2, 3, 5 times a power of ten, by ratio. */
export function nearestNice(value: number): number {
  const power = 10 ** Math.floor(Math.log10(value));
  const ratio = (step: number) => Math.abs(Math.log((step * power) / value));
  const best = [1, 2, 3, 5, 10].reduce((a, b) => (ratio(b) < ratio(a) ? b : a));
  return Number((best * power).toPrecision(3));
}

function stepAbove(value: number, steps: readonly number[]): number {
  const power = 10 ** Math.floor(Math.log10(value));
  // A hair of slack, so that 2.0000000001 counts as 2.
  const step = steps.find((each) => each * power >= value * (1 - 1e-9)) ?? 10;
  return Number((step * power).toPrecision(3));
}

/** Values looked at for a quantile; an even sample of a larger map is as good for a colour limit. */
const QUANTILE_SAMPLE = 16_384;

/**
 * The q-quantile (0..1) of |values| over the finite ones, from every k-th value where there are more
 * than 16 384; NaN when there is none.
 */
export function quantileOfSize(values: Float64Array, q: number): number {
  // An odd step does not fall in with the usual row lengths.
  const step = Math.ceil(values.length / QUANTILE_SAMPLE) | 1;
  const sizes = new Float64Array(Math.ceil(values.length / step));
  let count = 0;
  for (let i = 0; i < values.length; i += step) {
    const size = Math.abs(values[i]);
    if (size < Number.POSITIVE_INFINITY) sizes[count++] = size;
  }
  if (count === 0) return Number.NaN;
  return sizes.subarray(0, count).sort()[Math.min(count - 1, Math.floor(q * count))];
}
