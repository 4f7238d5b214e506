// The spectrum of a real map, as every transform of this project returns it.

/**
 * Half of the spectrum of a real nx x ny map: columns kx = 0 .. floor(nx / 2), all ny rows of ky
 * in the usual order (0, 1, .., -2, -1). Row-major: element `kx + columns * ky`.
 */
export interface Spectrum2 {
  readonly nx: number;
  readonly ny: number;
  readonly columns: number;
  readonly re: Float64Array;
  readonly im: Float64Array;
}

/** A spectrum of zeros for an nx x ny map. */
export function emptySpectrum(nx: number, ny: number): Spectrum2 {
  const columns = (nx >> 1) + 1;
  return {
    nx,
    ny,
    columns,
    re: new Float64Array(columns * ny),
    im: new Float64Array(columns * ny),
  };
}

/** As `emptySpectrum`, but of whatever numbers the memory held: for one who fills all of it. */
export function unwrittenSpectrum(nx: number, ny: number): Spectrum2 {
  const columns = (nx >> 1) + 1;
  const re = unwrittenNumbers(columns * ny);
  return { nx, ny, columns, re, im: unwrittenNumbers(columns * ny) };
}

/** Room for `count` numbers, not cleared: clearing takes a fifth of the time of a transform. */
export function unwrittenNumbers(count: number): Float64Array {
  return new Float64Array(Buffer.allocUnsafeSlow(8 * count).buffer);
}
