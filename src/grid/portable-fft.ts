// The same transforms as fft.ts by the package ndarray-fft, in plain JavaScript: the fallback where
// WebAssembly SIMD is missing, and the independent reference of the tests.
import { createRequire } from 'node:module';
import ndarray from 'ndarray';
import { emptySpectrum, type Spectrum2 } from './spectrum.js';

type Transform = typeof import('ndarray-fft').default;

let loaded: Transform | undefined;

/** The package's transform, loaded when first wanted: it takes 16 ms that most runs can do without. */
function transform(...args: Parameters<Transform>): void {
  loaded ??= createRequire(import.meta.url)('ndarray-fft') as Transform;
  loaded(...args);
}

/** Forward transform of row-major real `values` (nx * ny), written to `out`. */
export function portableRealFft2(
  values: Float64Array,
  nx: number,
  ny: number,
  out: Spectrum2 = emptySpectrum(nx, ny),
): Spectrum2 {
  const { columns } = out;
  const re = Float64Array.from(values);
  const im = new Float64Array(nx * ny);
  transform(1, ndarray(re, [ny, nx]), ndarray(im, [ny, nx]));
  for (let y = 0; y < ny; y++) {
    out.re.set(re.subarray(y * nx, y * nx + columns), y * columns);
    // ndarray-fft transforms with the opposite sign in the exponent; for real maps that conjugates.
    for (let x = 0; x < columns; x++) out.im[x + columns * y] = -im[x + nx * y];
  }
  return out;
}

/** Inverse of `portableRealFft2`; the imaginary parts of self-conjugate modes are ignored. */
export function portableInverseRealFft2(
  spectrum: Spectrum2,
  out: Float64Array = new Float64Array(spectrum.nx * spectrum.ny),
): Float64Array {
  const { nx, ny, columns } = spectrum;
  const re = new Float64Array(nx * ny);
  const im = new Float64Array(nx * ny);
  for (let y = 0; y < ny; y++) {
    const mirror = (ny - y) % ny;
    for (let x = 0; x < nx; x++) {
      const stored = x < columns;
      const from = stored ? x + columns * y : nx - x + columns * mirror;
      re[x + nx * y] = spectrum.re[from];
      im[x + nx * y] = stored ? -spectrum.im[from] : spectrum.im[from];
    }
  }
  transform(-1, ndarray(re, [ny, nx]), ndarray(im, [ny, nx]));
  out.set(re);
  return out;
}
