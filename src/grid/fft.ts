// Two-dimensional real Fourier transforms. Sign and normalisation are stated here and nowhere else:
//   forward  F(kx, ky) = sum over x, y of f(x, y) exp(-i (kx x + ky y)), not normalised;
//   inverse  f(x, y) = 1 / (nx ny) sum over kx, ky of F(kx, ky) exp(+i (kx x + ky y)).
import { kernelInverseRealFft2, kernelRealFft2, kernelTakes } from './fft-kernel.js';
import { portableInverseRealFft2, portableRealFft2 } from './portable-fft.js';
import { type Spectrum2, unwrittenNumbers, unwrittenSpectrum } from './spectrum.js';

export { goodSize } from './fft-plan.js';
export { setTransformThreads } from './fft-threads.js';
export { emptySpectrum, type Spectrum2 } from './spectrum.js';

/**
 * Transforms row-major real `values` (nx * ny) forward, into `out` where it is given (in a loop that
 * saves up to a quarter of the time). One NaN spoils the whole spectrum.
 */
export function realFft2(values: Float64Array, nx: number, ny: number, out?: Spectrum2): Spectrum2 {
  if (!(isSize(nx) && isSize(ny)) || values.length !== nx * ny) {
    throw new RangeError(`realFft2: ${values.length} values are not ${nx} x ${ny}`);
  }
  if (out) checkSpectrum(out, nx, ny);
  const result = out ?? unwrittenSpectrum(nx, ny);
  if (!kernelTakes(nx, ny)) return portableRealFft2(values, nx, ny, result);
  kernelRealFft2(values, nx, ny, result);
  return result;
}

/**
 * Inverse of `realFft2`, into `out` where it is given. What is not self-conjugate in the columns
 * kx = 0 and kx = nx / 2 (such as an imaginary part of the mean) is ignored.
 */
export function inverseRealFft2(spectrum: Spectrum2, out?: Float64Array): Float64Array {
  const { nx, ny } = spectrum;
  checkSpectrum(spectrum, nx, ny);
  if (out && out.length !== nx * ny) {
    throw new RangeError(`inverseRealFft2: room for ${out.length} values, not ${nx} x ${ny}`);
  }
  const result = out ?? unwrittenNumbers(nx * ny);
  if (!kernelTakes(nx, ny)) return portableInverseRealFft2(spectrum, result);
  kernelInverseRealFft2(spectrum, result);
  return result;
}

/** Which transforms are in use: the compiled ones, or the portable ones in their stead. */
export function transformKernel(): 'compiled' | 'portable' {
  return kernelTakes(1, 1) ? 'compiled' : 'portable';
}

function isSize(n: number): boolean {
  return Number.isInteger(n) && n >= 1;
}

function checkSpectrum({ nx, ny, columns, re, im }: Spectrum2, wantX: number, wantY: number): void {
  const count = ((wantX >> 1) + 1) * wantY;
  if (
    nx !== wantX ||
    ny !== wantY ||
    columns !== (nx >> 1) + 1 ||
    re.length !== count ||
    im.length !== count
  ) {
    throw new RangeError(
      `spectrum of ${nx} x ${ny} with ${re.length} modes, wanted ${wantX} x ${wantY} with ${count}`,
    );
  }
}
