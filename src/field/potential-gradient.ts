import { inverseRealFft2 } from '../grid/fft.js';
import type { Grid2 } from '../grid/grid.js';
import { crop } from '../grid/padding.js';
import { wavenumbers } from '../grid/wavenumbers.js';
import { paddedSpectrum, type Sides } from './potential.js';

/**
 * dBz/dz [G/Mm] at the surface of the current-free field whose vertical component is `radial` [G]:
 * every mode falls with height as exp(-k z). Values at missing pixels mean nothing.
 */
export function potentialVerticalGradient(radial: Grid2<'G'>, sides: Sides): Float64Array {
  const [ny, nx] = radial.values.shape;
  const spectrum = paddedSpectrum(radial, sides);
  const kx = wavenumbers(spectrum.nx, radial.pixelMm);
  const ky = wavenumbers(spectrum.ny, radial.pixelMm);
  const { re, im, columns } = spectrum;
  for (let y = 0; y < spectrum.ny; y++) {
    for (let x = 0; x < columns; x++) {
      const k = Math.sqrt(kx[x] * kx[x] + ky[y] * ky[y]);
      re[x + columns * y] *= -k;
      im[x + columns * y] *= -k;
    }
  }
  return crop(inverseRealFft2(spectrum), spectrum.nx, nx, ny);
}
