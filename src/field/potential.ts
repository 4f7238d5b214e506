import { emptySpectrum, goodSize, inverseRealFft2, realFft2, type Spectrum2 } from '../grid/fft.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import { crop, padWithZeros } from '../grid/padding.js';
import { derivativeWavenumbers, wavenumbers } from '../grid/wavenumbers.js';

/** What is assumed beyond the patch: no field at all, or the patch again and again. */
export type Sides = 'open' | 'periodic';

/** Side of the transform for a map of n pixels: doubled with open sides, so that images lie far away. */
export function transformSize(n: number, sides: Sides): number {
  return goodSize(sides === 'open' ? 2 * n : n);
}

/** Spectrum of a map padded with zeros to the transform size of its sides; NaN counts as zero. */
export function paddedSpectrum(field: Grid2<'G'>, sides: Sides): Spectrum2 {
  const [ny, nx] = field.values.shape;
  const px = transformSize(nx, sides);
  const py = transformSize(ny, sides);
  return realFft2(padWithZeros(field.values.data, nx, ny, px, py), px, py);
}

/**
 * Multiplies a spectrum of the vertical field by -i kx / k ('x') or -i ky / k ('y'): the horizontal
 * component of the current-free field above it at height 0 (Nakagawa & Raadu 1972, Sol. Phys. 25,
 * 127, with alpha = 0). The mean (k = 0) has no horizontal field. Writes into `out` where it is given.
 */
export function horizontalSpectrum(
  vertical: Spectrum2,
  direction: 'x' | 'y',
  out: Spectrum2 = emptySpectrum(vertical.nx, vertical.ny),
): Spectrum2 {
  const { nx, ny, columns } = vertical;
  const kx = wavenumbers(nx, 1);
  const ky = wavenumbers(ny, 1);
  const alongX = derivativeWavenumbers(nx, 1);
  const alongY = derivativeWavenumbers(ny, 1);
  for (let y = 0; y < ny; y++) {
    const across = ky[y] * ky[y];
    for (let x = 0; x < columns; x++) {
      const along = direction === 'x' ? alongX[x] : alongY[y];
      const square = kx[x] * kx[x] + across;
      const gain = square > 0 ? along / Math.sqrt(square) : 0;
      const i = x + columns * y;
      out.re[i] = gain * vertical.im[i];
      out.im[i] = -gain * vertical.re[i];
    }
  }
  return out;
}

/**
 * Horizontal components [G] at the surface of the current-free field whose vertical component is
 * `radial` [G]; both with the shape of the map, x west and y north. `spectrum` is the map's padded
 * spectrum, where the caller has it already.
 */
export function potentialHorizontalField(
  radial: Grid2<'G'>,
  sides: Sides,
  spectrum: Spectrum2 = paddedSpectrum(radial, sides),
): { readonly x: Grid2<'G'>; readonly y: Grid2<'G'> } {
  const [ny, nx] = radial.values.shape;
  const component = (direction: 'x' | 'y') =>
    makeGrid(
      crop(inverseRealFft2(horizontalSpectrum(spectrum, direction)), spectrum.nx, nx, ny),
      nx,
      ny,
      'G',
      radial.pixelMm,
    );
  return { x: component('x'), y: component('y') };
}

/**
 * Strength [G] of the current-free field at one point `heightMm` above pixel position (x, y), by
 * summing the field of every surface element in free space:
 * B = sum of Bz dA (r - r') / (2 pi |r - r'|^3). Exact for heights of several pixels.
 */
export function potentialStrengthAbove(
  radial: Grid2<'G'>,
  x: number,
  y: number,
  heightMm: number,
): number {
  const [ny, nx] = radial.values.shape;
  const b = radial.values.data;
  const z = heightMm / radial.pixelMm;
  let sumX = 0;
  let sumY = 0;
  let sumZ = 0;
  for (let j = 0; j < ny; j++) {
    const dy = y - j;
    for (let i = 0; i < nx; i++) {
      const value = b[i + nx * j];
      if (Number.isNaN(value)) continue;
      const dx = x - i;
      const square = dx * dx + dy * dy + z * z;
      const weight = value / (square * Math.sqrt(square));
      sumX += weight * dx;
      sumY += weight * dy;
      sumZ += weight * z;
    }
  }
  return Math.hypot(sumX, sumY, sumZ) / (2 * Math.PI);
}
