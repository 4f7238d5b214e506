// Two-dimensional real Fourier transforms. Sign and normalisation are stated here and nowhere else:
//   forward  F(kx, ky) = sum over x, y of f(x, y) exp(-i (kx x + ky y)), not normalised;
//   inverse  f(x, y) = 1 / (nx ny) sum over kx, ky of F(kx, ky) exp(+i (kx x + ky y)).
import { portableInverseRealFft2, portableRealFft2 } from './portable-fft.js';
import { emptySpectrum, type Spectrum2 } from './spectrum.js';

export { emptySpectrum, type Spectrum2 } from './spectrum.js';

/** Transforms row-major real `values` (nx * ny, no NaN) forward, into `out` where it is given. */
export function realFft2(
  values: Float64Array,
  nx: number,
  ny: number,
  out: Spectrum2 = emptySpectrum(nx, ny),
): Spectrum2 {
  return portableRealFft2(values, nx, ny, out);
}

/** Inverse of `realFft2`; the imaginary parts of self-conjugate modes are ignored. */
export function inverseRealFft2(
  spectrum: Spectrum2,
  out: Float64Array = new Float64Array(spectrum.nx * spectrum.ny),
): Float64Array {
  return portableInverseRealFft2(spectrum, out);
}

/** The smallest length >= n whose only prime factors are 2, 3 and 5: transforms of it are fast. */
export function goodSize(n: number): number {
  if (!(n >= 1 && n <= 2 ** 30)) throw new RangeError(`goodSize: ${n} is not within 1 .. 2^30`);
  let best = 2 ** Math.ceil(Math.log2(n));
  for (let fives = 1; fives < best; fives *= 5) {
    for (let odd = fives; odd < best; odd *= 3) {
      let length = odd;
      while (length < n) length *= 2;
      if (length < best) best = length;
    }
  }
  return best;
}
