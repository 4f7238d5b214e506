/**
 * Angular wavenumbers [1 / unit of `pixel`] of an n-point transform in its usual order
 * 0, 1, .., -2, -1 (times 2 pi / (n pixel)).
 */
export function wavenumbers(n: number, pixel: number): Float64Array {
  const step = (2 * Math.PI) / (n * pixel);
  return Float64Array.from({ length: n }, (_, i) => step * (2 * i <= n ? i : i - n));
}

/**
 * The same for an odd operator (a derivative): the Nyquist mode of an even n, whose sign is not
 * defined, is zero.
 */
export function derivativeWavenumbers(n: number, pixel: number): Float64Array {
  const k = wavenumbers(n, pixel);
  if (n % 2 === 0) k[n / 2] = 0;
  return k;
}

/** How often a column of a half spectrum of width nx occurs in the whole spectrum: 1 or 2. */
export function columnWeight(column: number, nx: number): 1 | 2 {
  return column === 0 || 2 * column === nx ? 1 : 2;
}
