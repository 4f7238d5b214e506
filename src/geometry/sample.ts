// Values between pixel centres, a line of samples at a time: a call per sample was measured to cost more
// than the sample, because results were boxed.

type Values = Float32Array | Float64Array;

/** An image: nx x ny row-major values, NaN missing. */
export interface Picture {
  readonly values: Values;
  readonly nx: number;
  readonly ny: number;
}

/** Whether a position lies on a pixel: up to half a pixel beyond the outermost centres. */
function isOnPicture(x: number, y: number, nx: number, ny: number): boolean {
  return x >= -0.5 && y >= -0.5 && x <= nx - 0.5 && y <= ny - 0.5;
}

/**
 * Bilinear value at (x, y), weights renormalised over the corners that are not NaN; NaN where known
 * corners carry less than half of the weight. Beyond the outermost pixel centres the edge value
 * continues.
 */
function carefulBilinear(values: Values, nx: number, ny: number, x: number, y: number): number {
  const i = Math.floor(x);
  const j = Math.floor(y);
  let weight = 0;
  let sum = 0;
  for (let b = 0; b < 2; b++) {
    for (let a = 0; a < 2; a++) {
      const column = Math.min(nx - 1, Math.max(0, i + a));
      const row = Math.min(ny - 1, Math.max(0, j + b));
      const value = values[column + nx * row];
      if (Number.isNaN(value)) continue;
      const share = (a ? x - i : 1 + i - x) * (b ? y - j : 1 + j - y);
      weight += share;
      sum += share * value;
    }
  }
  return weight >= 0.5 ? sum / weight : Number.NaN;
}

/**
 * Bilinear values at positions (x, y), written to `out`: NaN outside the picture and where known corners
 * carry less than half of the weight, which is otherwise shared among them.
 */
export function sampleBilinear(
  { values, nx, ny }: Picture,
  x: Float64Array,
  y: Float64Array,
  out: Float64Array,
): void {
  bilinearLine(values, nx, ny, x, y, out);
}

function bilinearLine(
  values: Values,
  nx: number,
  ny: number,
  xs: Float64Array,
  ys: Float64Array,
  out: Float64Array,
): void {
  for (let k = 0; k < xs.length; k++) {
    const x = xs[k];
    const y = ys[k];
    let value = Number.NaN;
    if (x >= 0 && y >= 0 && x < nx - 1 && y < ny - 1) {
      const i = x | 0;
      const j = y | 0;
      const u = x - i;
      const p = i + nx * j;
      const low = values[p] + u * (values[p + 1] - values[p]);
      const high = values[p + nx] + u * (values[p + nx + 1] - values[p + nx]);
      value = low + (y - j) * (high - low);
    }
    // Rare: a corner is missing, or the position is in the outermost half pixel, or off the picture.
    if (Number.isNaN(value) && isOnPicture(x, y, nx, ny))
      value = carefulBilinear(values, nx, ny, x, y);
    out[k] = value;
  }
}

/**
 * The same by cubic convolution (Keys 1981, IEEE Trans. ASSP 29, 1153, a = -1/2), exact for quadratics, so
 * that refining does not blur; bilinear beside NaN and at the edges.
 */
export function sampleCubic(
  { values, nx, ny }: Picture,
  x: Float64Array,
  y: Float64Array,
  out: Float64Array,
): void {
  cubicLine(values, nx, ny, x, y, out);
}

function cubicLine(
  values: Values,
  nx: number,
  ny: number,
  xs: Float64Array,
  ys: Float64Array,
  out: Float64Array,
): void {
  for (let k = 0; k < xs.length; k++) {
    const x = xs[k];
    const y = ys[k];
    let value = Number.NaN;
    if (x >= 1 && y >= 1 && x < nx - 2 && y < ny - 2) {
      const i = x | 0;
      const j = y | 0;
      const u = x - i;
      const v = y - j;
      const wx0 = u * (-0.5 + u * (1 - 0.5 * u));
      const wx1 = 1 + u * u * (-2.5 + 1.5 * u);
      const wx2 = u * (0.5 + u * (2 - 1.5 * u));
      const wx3 = u * u * (-0.5 + 0.5 * u);
      const wy0 = v * (-0.5 + v * (1 - 0.5 * v));
      const wy1 = 1 + v * v * (-2.5 + 1.5 * v);
      const wy2 = v * (0.5 + v * (2 - 1.5 * v));
      const wy3 = v * v * (-0.5 + 0.5 * v);
      const a = i - 1 + nx * (j - 1);
      const b = a + nx;
      const c = b + nx;
      const d = c + nx;
      value =
        wy0 * (wx0 * values[a] + wx1 * values[a + 1] + wx2 * values[a + 2] + wx3 * values[a + 3]) +
        wy1 * (wx0 * values[b] + wx1 * values[b + 1] + wx2 * values[b + 2] + wx3 * values[b + 3]) +
        wy2 * (wx0 * values[c] + wx1 * values[c + 1] + wx2 * values[c + 2] + wx3 * values[c + 3]) +
        wy3 * (wx0 * values[d] + wx1 * values[d + 1] + wx2 * values[d + 2] + wx3 * values[d + 3]);
    }
    if (Number.isNaN(value) && isOnPicture(x, y, nx, ny))
      value = carefulBilinear(values, nx, ny, x, y);
    out[k] = value;
  }
}
