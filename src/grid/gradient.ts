/**
 * Size of the gradient of an nx x ny map [unit per `pixel`] by central differences, one-sided at the
 * edges and beside missing pixels; NaN where neither neighbour of a direction is known.
 */
export function gradientSize(
  values: Float64Array,
  nx: number,
  ny: number,
  pixel: number,
): Float64Array {
  const out = new Float64Array(nx * ny);
  const slope = (before: number, here: number, after: number): number => {
    if (!Number.isNaN(before) && !Number.isNaN(after)) return 0.5 * (after - before);
    return !Number.isNaN(after) ? after - here : here - before;
  };
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      const i = x + nx * y;
      const here = values[i];
      const dx = slope(
        x > 0 ? values[i - 1] : Number.NaN,
        here,
        x < nx - 1 ? values[i + 1] : Number.NaN,
      );
      const dy = slope(
        y > 0 ? values[i - nx] : Number.NaN,
        here,
        y < ny - 1 ? values[i + nx] : Number.NaN,
      );
      out[i] = Math.sqrt(dx * dx + dy * dy) / pixel;
    }
  }
  return out;
}

/** Bilinear value at (x, y) in pixels of an nx x ny map; NaN outside or where a corner is missing. */
export function bilinear(
  values: Float64Array,
  nx: number,
  ny: number,
  x: number,
  y: number,
): number {
  if (!(x >= 0 && y >= 0 && x <= nx - 1 && y <= ny - 1)) return Number.NaN;
  const i = Math.min(Math.floor(x), Math.max(0, nx - 2));
  const j = Math.min(Math.floor(y), Math.max(0, ny - 2));
  const u = x - i;
  const v = y - j;
  const p = i + nx * j;
  const right = nx > 1 ? 1 : 0;
  const up = ny > 1 ? nx : 0;
  return (
    (1 - v) * ((1 - u) * values[p] + u * values[p + right]) +
    v * ((1 - u) * values[p + up] + u * values[p + up + right])
  );
}
