// Two-dimensional real Fourier transforms. Sign and normalisation are stated here and nowhere else:
//   forward  F(kx, ky) = sum over x, y of f(x, y) exp(-i (kx x + ky y)), not normalised;
//   inverse  f(x, y) = 1 / (nx ny) sum over kx, ky of F(kx, ky) exp(+i (kx x + ky y)).
import ndarray from 'ndarray';
import fft from 'ndarray-fft';

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

/** Transforms row-major real `values` (nx * ny, no NaN) forward. */
export function realFft2(values: Float64Array, nx: number, ny: number): Spectrum2 {
  const re = Float64Array.from(values);
  const im = new Float64Array(nx * ny);
  fft(1, ndarray(re, [ny, nx]), ndarray(im, [ny, nx]));
  const columns = (nx >> 1) + 1;
  const half = emptySpectrum(nx, ny);
  for (let y = 0; y < ny; y++) {
    half.re.set(re.subarray(y * nx, y * nx + columns), y * columns);
    half.im.set(im.subarray(y * nx, y * nx + columns), y * columns);
  }
  return half;
}

/** Inverse of `realFft2`; the imaginary parts of self-conjugate modes are ignored. */
export function inverseRealFft2(spectrum: Spectrum2): Float64Array {
  const { nx, ny, columns } = spectrum;
  const re = new Float64Array(nx * ny);
  const im = new Float64Array(nx * ny);
  for (let y = 0; y < ny; y++) {
    const mirror = (ny - y) % ny;
    for (let x = 0; x < nx; x++) {
      const stored = x < columns;
      const from = stored ? x + columns * y : nx - x + columns * mirror;
      re[x + nx * y] = spectrum.re[from];
      im[x + nx * y] = stored ? spectrum.im[from] : -spectrum.im[from];
    }
  }
  fft(-1, ndarray(re, [ny, nx]), ndarray(im, [ny, nx]));
  return re;
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
