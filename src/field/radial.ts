import type { LocalPatch } from '../geometry/patch.js';
import { PIXEL_GOOD } from '../geometry/patch.js';
import { emptySpectrum, goodSize, inverseRealFft2, realFft2, type Spectrum2 } from '../grid/fft.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import { derivativeWavenumbers, wavenumbers } from '../grid/wavenumbers.js';
import { horizontalSpectrum } from './potential.js';

/** How the radial field was had from the component along the line of sight. */
export type RadialMethod = 'potential' | 'mu' | 'given';

/** Below this cosine (80 degrees) dividing by mu only amplifies noise; the divisor stops here. */
const LEAST_MU = 0.17;
/**
 * The view changes over a patch, so each pass leaves a residue; three passes bring energy and flux within
 * 0.5 % of the limit, and so do two where the first left less than a twentieth (small patches).
 */
const PASSES = 3;
const SMALL_RESIDUE = 0.05;

/** Radial field [G] as line-of-sight field over mu: right where the field is radial (plage). */
export function radialByMu(patch: LocalPatch): Grid2<'G'> {
  const b = patch.field.values.data;
  const mu = patch.toObserver.z;
  const out = new Float64Array(b.length);
  for (let i = 0; i < b.length; i++) out[i] = b[i] / Math.max(mu[i], LEAST_MU);
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
  const { nx, ny, mask } = patch;
  const px = goodSize(Math.ceil(1.5 * nx));
  const py = goodSize(Math.ceil(1.5 * ny));
  const view = meanView(patch);
  const radial = emptySpectrum(px, py);
  const scratch = emptySpectrum(px, py);
  const residual = new Float64Array(px * py);
  const field = { x: emptyMap(px, py), y: emptyMap(px, py), z: emptyMap(px, py) };
  for (let pass = 0; pass < PASSES; pass++) {
    if (pass > 0) {
      inverseRealFft2(horizontalSpectrum(radial, 'x', scratch), field.x);
      inverseRealFft2(horizontalSpectrum(radial, 'y', scratch), field.y);
      inverseRealFft2(radial, field.z);
    }
    const left = writeResidual(patch, field, residual, px);
    addInverse(radial, realFft2(residual, px, py, scratch), view);
    if (left < SMALL_RESIDUE) break;
  }
  inverseRealFft2(radial, field.z);
  const out = new Float64Array(nx * ny);
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const p = i + nx * j;
      out[p] = mask[p] === PIXEL_GOOD ? field.z[i + px * j] : Number.NaN;
    }
  }
  return makeGrid(out, nx, ny, 'G', patch.pixelMm);
}

function emptyMap(nx: number, ny: number): Float64Array {
  return new Float64Array(nx * ny);
}

/**
 * Writes measured less modelled line-of-sight field to the corner of the padded map that the patch fills;
 * gives its root mean square over that of the measured field.
 */
function writeResidual(
  patch: LocalPatch,
  field: { readonly x: Float64Array; readonly y: Float64Array; readonly z: Float64Array },
  residual: Float64Array,
  px: number,
): number {
  const { nx, ny, mask } = patch;
  const { x, y, z } = patch.toObserver;
  const measured = patch.field.values.data;
  let left = 0;
  let all = 0;
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const p = i + nx * j;
      if (mask[p] !== PIXEL_GOOD) continue;
      const q = i + px * j;
      const value = measured[p] - x[p] * field.x[q] - y[p] * field.y[q] - z[p] * field.z[q];
      residual[q] = value;
      left += value * value;
      all += measured[p] * measured[p];
    }
  }
  return all > 0 ? Math.sqrt(left / all) : 0;
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
