// Smoothing of the H-transform (SMOOTH of the tiled image convention): where quantisation lost the
// differences inside a cell, they are moved towards those that neighbouring sums suggest.

/**
 * Adjusts the differences of all inner cells of one level, in place. `a` holds nx x ny interleaved
 * coefficients in rows of `stride`; no difference moves by more than `limit`.
 */
export function smoothCells(
  a: Float64Array,
  nx: number,
  ny: number,
  stride: number,
  limit: number,
): void {
  const nextRow = 2 * stride;
  for (let y = 2; y < ny - 2; y += 2) {
    for (let x = 0; x < nx; x += 2) adjustSlope(a, y * stride + x, nextRow, stride, limit);
  }
  for (let y = 0; y < ny; y += 2) {
    for (let x = 2; x < nx - 2; x += 2) adjustSlope(a, y * stride + x, 2, 1, limit);
  }
  for (let y = 2; y < ny - 2; y += 2) {
    for (let x = 2; x < nx - 2; x += 2) adjustCurvature(a, y * stride + x, stride, limit);
  }
}

/**
 * The difference at `at + side`, from the sums at `at` and in the cells `step` before and after it:
 * an eighth of their slope, kept monotonic.
 */
function adjustSlope(a: Float64Array, at: number, step: number, side: number, limit: number): void {
  const up = a[at + step] - a[at];
  const down = a[at] - a[at - step];
  const highest = 4 * Math.max(Math.min(up, down), 0);
  const lowest = 4 * Math.min(Math.max(up, down), 0);
  if (lowest >= highest) return;
  const wanted = clamp(up + down, lowest, highest);
  const change = Math.trunc((wanted - 8 * a[at + side]) / 8);
  a[at + side] += clamp(change, -limit, limit);
}

/** The mixed difference, a 64th of that of the four diagonal neighbours, kept monotonic. */
function adjustCurvature(a: Float64Array, at: number, stride: number, limit: number): void {
  const mixed = at + stride + 1;
  const h0 = a[at];
  const minusMinus = a[at - 2 * stride - 2] - h0;
  const plusMinus = a[at + 2 * stride - 2] - h0; // next row, previous column
  const minusPlus = a[at - 2 * stride + 2] - h0;
  const plusPlus = a[at + 2 * stride + 2] - h0;
  const rise = 2 * a[at + stride];
  const run = 2 * a[at + 1];
  const highest =
    16 *
    Math.min(
      Math.max(plusPlus, 0) - rise - run,
      Math.max(-plusMinus, 0) + rise - run,
      Math.max(-minusPlus, 0) - rise + run,
      Math.max(minusMinus, 0) + rise + run,
    );
  const lowest =
    16 *
    Math.max(
      Math.min(plusPlus, 0) - rise - run,
      Math.min(-plusMinus, 0) + rise - run,
      Math.min(-minusPlus, 0) - rise + run,
      Math.min(minusMinus, 0) + rise + run,
    );
  if (lowest >= highest) return;
  const wanted = clamp(plusPlus + minusMinus - minusPlus - plusMinus, lowest, highest);
  const change = Math.trunc((wanted - 64 * a[mixed]) / 64);
  a[mixed] += clamp(change, -limit, limit);
}

function clamp(value: number, low: number, high: number): number {
  return Math.max(Math.min(value, high), low);
}
