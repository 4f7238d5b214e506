// Two-dimensional real Fourier transforms. Sign and normalisation are stated here and nowhere else:
//   forward  F(kx, ky) = sum over x, y of f(x, y) exp(-i (kx x + ky y)), not normalised;
//   inverse  f(x, y) = 1 / (nx ny) sum over kx, ky of F(kx, ky) exp(+i (kx x + ky y)).
import { kernelInverseRealFft2, kernelRealFft2, kernelTakes } from './fft-kernel.js';
import { portableInverseRealFft2, portableRealFft2 } from './portable-fft.js';
import { emptySpectrum, type Spectrum2 } from './spectrum.js';

export { goodSize } from './fft-plan.js';
export { emptySpectrum, type Spectrum2 } from './spectrum.js';

/** Transforms row-major real `values` (nx * ny, no NaN) forward, into `out` where it is given. */
export function realFft2(
  values: Float64Array,
  nx: number,
  ny: number,
  out: Spectrum2 = emptySpectrum(nx, ny),
): Spectrum2 {
  if (!kernelTakes(nx, ny)) return portableRealFft2(values, nx, ny, out);
  kernelRealFft2(values, nx, ny, out);
  return out;
}

/** Inverse of `realFft2`; the imaginary parts of self-conjugate modes are ignored. */
export function inverseRealFft2(
  spectrum: Spectrum2,
  out: Float64Array = new Float64Array(spectrum.nx * spectrum.ny),
): Float64Array {
  if (!kernelTakes(spectrum.nx, spectrum.ny)) return portableInverseRealFft2(spectrum, out);
  kernelInverseRealFft2(spectrum, out);
  return out;
}
