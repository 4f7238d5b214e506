/**
 * Copies an nx x ny map into the lower left corner of a zeroed paddedNx x paddedNy one; NaN becomes
 * zero (no field where nothing is known).
 */
export function padWithZeros(
  values: Float64Array,
  nx: number,
  ny: number,
  paddedNx: number,
  paddedNy: number,
): Float64Array {
  const out = new Float64Array(paddedNx * paddedNy);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      const value = values[x + nx * y];
      if (!Number.isNaN(value)) out[x + paddedNx * y] = value;
    }
  }
  return out;
}

/** The lower left nx x ny corner of a map that is `paddedNx` wide. */
export function crop(values: Float64Array, paddedNx: number, nx: number, ny: number): Float64Array {
  const out = new Float64Array(nx * ny);
  for (let y = 0; y < ny; y++) out.set(values.subarray(y * paddedNx, y * paddedNx + nx), y * nx);
  return out;
}
