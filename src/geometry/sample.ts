// Values between pixel centres. Hot functions: numbers in, number out, nothing allocated.

type Values = Float32Array | Float64Array;

/**
 * Bilinear value at (x, y) of an nx x ny map, weights renormalised over the corners that are not NaN;
 * NaN where known corners carry less than half of the weight. Beyond the outermost pixel centres the
 * edge value continues.
 */
export function sampleBilinear(
  values: Values,
  nx: number,
  ny: number,
  x: number,
  y: number,
): number {
  const i = Math.floor(x);
  const j = Math.floor(y);
  const u = x - i;
  const v = y - j;
  const left = i < 0 ? 0 : i >= nx ? nx - 1 : i;
  const right = i + 1 < 0 ? 0 : i + 1 >= nx ? nx - 1 : i + 1;
  const low = (j < 0 ? 0 : j >= ny ? ny - 1 : j) * nx;
  const high = (j + 1 < 0 ? 0 : j + 1 >= ny ? ny - 1 : j + 1) * nx;
  const a = values[left + low];
  const b = values[right + low];
  const c = values[left + high];
  const d = values[right + high];
  const plain = (1 - v) * ((1 - u) * a + u * b) + v * ((1 - u) * c + u * d);
  if (!Number.isNaN(plain)) return plain;
  let weight = 0;
  let sum = 0;
  if (!Number.isNaN(a)) {
    weight += (1 - u) * (1 - v);
    sum += (1 - u) * (1 - v) * a;
  }
  if (!Number.isNaN(b)) {
    weight += u * (1 - v);
    sum += u * (1 - v) * b;
  }
  if (!Number.isNaN(c)) {
    weight += (1 - u) * v;
    sum += (1 - u) * v * c;
  }
  if (!Number.isNaN(d)) {
    weight += u * v;
    sum += u * v * d;
  }
  return weight >= 0.5 ? sum / weight : Number.NaN;
}

/**
 * Cubic convolution at (x, y) (Keys 1981, IEEE Trans. ASSP 29, 1153, a = -1/2), exact for quadratics,
 * so that refining does not blur; falls back to `sampleBilinear` beside NaN and at the edges.
 */
export function sampleCubic(values: Values, nx: number, ny: number, x: number, y: number): number {
  const i = Math.floor(x);
  const j = Math.floor(y);
  if (i < 1 || j < 1 || i > nx - 3 || j > ny - 3) return sampleBilinear(values, nx, ny, x, y);
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
  let p = i - 1 + nx * (j - 1);
  let sum =
    wy0 * (wx0 * values[p] + wx1 * values[p + 1] + wx2 * values[p + 2] + wx3 * values[p + 3]);
  p += nx;
  sum += wy1 * (wx0 * values[p] + wx1 * values[p + 1] + wx2 * values[p + 2] + wx3 * values[p + 3]);
  p += nx;
  sum += wy2 * (wx0 * values[p] + wx1 * values[p + 1] + wx2 * values[p + 2] + wx3 * values[p + 3]);
  p += nx;
  sum += wy3 * (wx0 * values[p] + wx1 * values[p + 1] + wx2 * values[p + 2] + wx3 * values[p + 3]);
  return Number.isNaN(sum) ? sampleBilinear(values, nx, ny, x, y) : sum;
}
