import type { LocalPatch } from '../geometry/patch.js';
import { PIXEL_GOOD } from '../geometry/patch.js';
import { goodSize, inverseRealFft2, realFft2, type Spectrum2 } from '../grid/fft.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import { derivativeWavenumbers, wavenumbers } from '../grid/wavenumbers.js';
import { horizontalSpectrum } from './potential.js';

/** How the radial field was had from the component along the line of sight. */
export type RadialMethod = 'potential' | 'mu' | 'given';

/** Below this cosine (80 degrees) dividing by mu only amplifies noise; the divisor stops here. */
const LEAST_MU = 0.17;
/** The view changes over a patch; each pass halves what that leaves, and three reach noise. */
const PASSES = 4;

/** Radial field [G] as line-of-sight field over mu: right where the field is radial (plage). */
export function radialByMu(patch: LocalPatch): Grid2<'G'> {
  const b = patch.field.values.data;
  const mu = patch.toObserver.z;
  const out = Float64Array.from(b, (value, i) => value / Math.max(mu[i], LEAST_MU));
  return makeGrid(out, patch.nx, patch.ny, 'G', patch.pixelMm);
}

interface View {
  readonly x: number;
  readonly y: number;
  readonly z: number;
}

/** Direction to the observer, averaged over the patch with the field strength as weight. */
function meanView(patch: LocalPatch): View {
  const { x, y, z } = patch.toObserver;
  const b = patch.field.values.data;
  let [sx, sy, sz] = [0, 0, 0];
  for (let i = 0; i < b.length; i++) {
    if (patch.mask[i] !== PIXEL_GOOD) continue;
    const weight = Math.abs(b[i]) + 1e-9;
    sx += weight * x[i];
    sy += weight * y[i];
    sz += weight * z[i];
  }
  const size = Math.hypot(sx, sy, sz) || 1;
  return { x: sx / size, y: sy / size, z: Math.max(sz / size, LEAST_MU) };
}

/**
 * Adds to `radial` the spectrum of the vertical field whose line-of-sight component, seen from
 * `view`, is `residual`: b_z = b_los / (n_z - i (n_x kx + n_y ky) / k).
 */
function addInverse(radial: Spectrum2, residual: Spectrum2, view: View): void {
  const { nx, ny, columns } = radial;
  const kx = wavenumbers(nx, 1);
  const ky = wavenumbers(ny, 1);
  const oddX = derivativeWavenumbers(nx, 1);
  const oddY = derivativeWavenumbers(ny, 1);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < columns; x++) {
      const i = x + columns * y;
      const k = Math.sqrt(kx[x] * kx[x] + ky[y] * ky[y]) || 1;
      const tilt = (view.x * oddX[x] + view.y * oddY[y]) / k;
      const square = view.z * view.z + tilt * tilt;
      radial.re[i] += (residual.re[i] * view.z - residual.im[i] * tilt) / square;
      radial.im[i] += (residual.im[i] * view.z + residual.re[i] * tilt) / square;
    }
  }
}

/**
 * Radial field [G] of the current-free field whose component along the line of sight is the
 * measured one (Leka, Barnes & Wagner 2017, Sol. Phys. 292, 36): exact division in Fourier space for
 * one viewing direction, repeated on what is left because the direction changes over the patch.
 * Missing pixels do not constrain the field and are NaN in the result.
 */
export function radialByPotential(patch: LocalPatch): Grid2<'G'> {
  const { nx, ny } = patch;
  const px = goodSize(Math.ceil(1.5 * nx));
  const py = goodSize(Math.ceil(1.5 * ny));
  const measured = patch.field.values.data;
  const { x: viewX, y: viewY, z: viewZ } = patch.toObserver;
  const view = meanView(patch);
  const residual = new Float64Array(px * py);
  let radial: Spectrum2 | undefined;
  let result: Float64Array = residual;
  for (let pass = 0; ; pass++) {
    const bz = radial ? inverseRealFft2(radial) : undefined;
    if (bz && pass === PASSES) {
      result = bz;
      break;
    }
    const bx = radial ? inverseRealFft2(horizontalSpectrum(radial, 'x')) : undefined;
    const by = radial ? inverseRealFft2(horizontalSpectrum(radial, 'y')) : undefined;
    for (let j = 0; j < ny; j++) {
      for (let i = 0; i < nx; i++) {
        const p = i + nx * j;
        const q = i + px * j;
        if (patch.mask[p] !== PIXEL_GOOD) continue;
        const modelled =
          bx && by && bz ? viewX[p] * bx[q] + viewY[p] * by[q] + viewZ[p] * bz[q] : 0;
        residual[q] = measured[p] - modelled;
      }
    }
    const spectrum = realFft2(residual, px, py);
    radial ??= {
      ...spectrum,
      re: new Float64Array(spectrum.re.length),
      im: new Float64Array(spectrum.im.length),
    };
    addInverse(radial, spectrum, view);
  }
  const out = new Float64Array(nx * ny);
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const p = i + nx * j;
      out[p] = patch.mask[p] === PIXEL_GOOD ? result[i + px * j] : Number.NaN;
    }
  }
  return makeGrid(out, nx, ny, 'G', patch.pixelMm);
}

/** Radial field [G] of a patch by the method named; a patch that holds it already is returned as it is. */
export function radialField(
  patch: LocalPatch,
  method: 'potential' | 'mu',
): { readonly field: Grid2<'G'>; readonly method: RadialMethod } {
  if (patch.component === 'radial') return { field: patch.field, method: 'given' };
  const field = method === 'mu' ? radialByMu(patch) : radialByPotential(patch);
  return { field, method };
}
