/** Full width at half maximum of a Gaussian over its standard deviation. */
export const WIDTH_PER_DEVIATION = 2 * Math.sqrt(2 * Math.LN2);

function gaussianWeights(deviation: number): Float64Array {
  const reach = Math.max(1, Math.ceil(3.5 * deviation));
  const weights = new Float64Array(2 * reach + 1);
  for (let i = -reach; i <= reach; i++) weights[i + reach] = Math.exp(-0.5 * (i / deviation) ** 2);
  const sum = weights.reduce((a, b) => a + b);
  return weights.map((weight) => weight / sum);
}

/** Convolves every line of a map with symmetric weights; beyond the edges counts as zero. */
function convolveLines(
  source: Float64Array,
  out: Float64Array,
  shape: { count: number; length: number; lineStep: number; pixelStep: number },
  weights: Float64Array,
): void {
  const reach = weights.length >> 1;
  const { count, length, lineStep, pixelStep } = shape;
  for (let line = 0; line < count; line++) {
    const start = line * lineStep;
    for (let p = 0; p < length; p++) {
      let sum = 0;
      const first = Math.max(-reach, -p);
      const last = Math.min(reach, length - 1 - p);
      for (let d = first; d <= last; d++)
        sum += weights[d + reach] * source[start + (p + d) * pixelStep];
      out[start + p * pixelStep] = sum;
    }
  }
}

function blurPlain(values: Float64Array, nx: number, ny: number, weights: Float64Array) {
  const half = new Float64Array(values.length);
  const out = new Float64Array(values.length);
  convolveLines(values, half, { count: ny, length: nx, lineStep: nx, pixelStep: 1 }, weights);
  convolveLines(half, out, { count: nx, length: ny, lineStep: 1, pixelStep: nx }, weights);
  return out;
}

/**
 * Gaussian blur of an nx x ny row-major map with standard deviation `deviation` in pixels, weights
 * renormalised over the pixels that exist and are not NaN; missing pixels stay NaN.
 */
export function gaussianBlur(
  values: Float64Array,
  nx: number,
  ny: number,
  deviation: number,
): Float64Array {
  const weights = gaussianWeights(deviation);
  const known = Float64Array.from(values, (value) => (!Number.isNaN(value) ? 1 : 0));
  const filled = Float64Array.from(values, (value) => (!Number.isNaN(value) ? value : 0));
  const sum = blurPlain(filled, nx, ny, weights);
  const weight = blurPlain(known, nx, ny, weights);
  return sum.map((value, i) => (known[i] ? value / weight[i] : Number.NaN));
}

/**
 * Gaussian blur where beyond the edges and missing pixels count as zero, so that the sum of the map
 * spreads but never grows.
 */
export function gaussianSpread(
  values: Float64Array,
  nx: number,
  ny: number,
  deviation: number,
): Float64Array {
  const filled = Float64Array.from(values, (value) => (!Number.isNaN(value) ? value : 0));
  return blurPlain(filled, nx, ny, gaussianWeights(deviation));
}
