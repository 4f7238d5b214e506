/** Full width at half maximum of a Gaussian over its standard deviation. */
export const WIDTH_PER_DEVIATION = 2 * Math.sqrt(2 * Math.LN2);

function gaussianWeights(deviation: number): Float64Array {
  const reach = Math.max(1, Math.ceil(3 * deviation));
  const weights = new Float64Array(2 * reach + 1);
  for (let i = -reach; i <= reach; i++) weights[i + reach] = Math.exp(-0.5 * (i / deviation) ** 2);
  const sum = weights.reduce((a, b) => a + b);
  return weights.map((weight) => weight / sum);
}

/** Convolves along rows; beyond the ends counts as zero. */
function blurRows(source: Float64Array, out: Float64Array, nx: number, weights: Float64Array) {
  const reach = weights.length >> 1;
  out.fill(0);
  for (let start = 0; start < source.length; start += nx) {
    for (let d = -reach; d <= reach; d++) {
      const weight = weights[d + reach];
      const last = start + Math.min(nx, nx - d);
      for (let i = start + Math.max(0, -d); i < last; i++) out[i] += weight * source[i + d];
    }
  }
}

/** Convolves along columns, a whole row at a time so that memory is read in order. */
function blurColumns(source: Float64Array, out: Float64Array, nx: number, weights: Float64Array) {
  const reach = weights.length >> 1;
  const ny = source.length / nx;
  out.fill(0);
  for (let y = 0; y < ny; y++) {
    const first = Math.max(-reach, -y);
    const last = Math.min(reach, ny - 1 - y);
    for (let d = first; d <= last; d++) {
      const weight = weights[d + reach];
      const from = (y + d) * nx;
      const to = y * nx;
      for (let x = 0; x < nx; x++) out[to + x] += weight * source[from + x];
    }
  }
}

function blurPlain(values: Float64Array, nx: number, weights: Float64Array): Float64Array {
  const half = new Float64Array(values.length);
  const out = new Float64Array(values.length);
  blurRows(values, half, nx, weights);
  blurColumns(half, out, nx, weights);
  return out;
}

/** Copies a map with zero for what is missing; tells whether anything was. */
function fillWithZeros(values: Float64Array): { filled: Float64Array; complete: boolean } {
  const filled = new Float64Array(values.length);
  let complete = true;
  for (let i = 0; i < values.length; i++) {
    if (Number.isNaN(values[i])) complete = false;
    else filled[i] = values[i];
  }
  return { filled, complete };
}

/** How much of the weight lies on the line, for each of its n pixels. */
function lineWeight(n: number, weights: Float64Array): Float64Array {
  const out = new Float64Array(n);
  blurRows(new Float64Array(n).fill(1), out, n, weights);
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
  const { filled, complete } = fillWithZeros(values);
  const out = blurPlain(filled, nx, weights);
  if (complete) {
    const along = lineWeight(nx, weights);
    const across = lineWeight(ny, weights);
    for (let y = 0, i = 0; y < ny; y++)
      for (let x = 0; x < nx; x++, i++) out[i] /= along[x] * across[y];
    return out;
  }
  const known = new Float64Array(values.length);
  for (let i = 0; i < values.length; i++) known[i] = Number.isNaN(values[i]) ? 0 : 1;
  const weight = blurPlain(known, nx, weights);
  for (let i = 0; i < out.length; i++) out[i] = known[i] === 0 ? Number.NaN : out[i] / weight[i];
  return out;
}

/**
 * Gaussian blur where beyond the edges and missing pixels count as zero, so that the sum of the map
 * spreads but never grows.
 */
export function gaussianSpread(values: Float64Array, nx: number, deviation: number): Float64Array {
  return blurPlain(fillWithZeros(values).filled, nx, gaussianWeights(deviation));
}
