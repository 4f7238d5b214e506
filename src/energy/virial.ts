import { VACUUM_PERMEABILITY } from '../constants.js';
import { fieldArrays, noiseAt, type VectorField, type VectorNoise } from '../field/vector-field.js';
import type { Grid2 } from '../grid/grid.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS } from '../units.js';
import type { Energy } from './spectral-energy.js';

/** Energy [J] of 1 G^2 Mm^3 over mu0, and force [N] of 1 G^2 Mm^2 over mu0. */
const JOULE_PER_GAUSS2_MM3 =
  (TESLA_PER_GAUSS ** 2 * METRES_PER_MEGAMETRE ** 3) / VACUUM_PERMEABILITY;
const NEWTON_PER_GAUSS2_MM2 = JOULE_PER_GAUSS2_MM3 / METRES_PER_MEGAMETRE;

/** The horizontal components of a field on the grid of another. */
export interface HorizontalField {
  readonly x: Grid2<'G'>;
  readonly y: Grid2<'G'>;
}

/** Point about which the virial is taken, in pixels, and how far the field reaches from it [Mm]. */
export interface VirialOrigin {
  readonly x: number;
  readonly y: number;
  readonly radiusMm: number;
}

/** Centre of Bz^2 and the root mean square distance from it: noise and quiet Sun hardly move it. */
export function virialOrigin(field: VectorField): VirialOrigin {
  const { nx, ny, pixelMm, bz } = fieldArrays(field);
  let [sum, sumX, sumY, sumSquare] = [0, 0, 0, 0];
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      const weight = bz[x + nx * y] ** 2;
      if (Number.isNaN(weight)) continue;
      sum += weight;
      sumX += weight * x;
      sumY += weight * y;
      sumSquare += weight * (x * x + y * y);
    }
  }
  const [x, y] = [sumX / sum, sumY / sum];
  const radiusMm = pixelMm * Math.sqrt(Math.max(0, sumSquare / sum - x * x - y * y));
  return { x, y, radiusMm };
}

/** Total energy by the virial theorem, and how much of it hangs on the origin. */
export interface VirialEnergy extends Energy {
  /**
   * Share of the energy by which it changes when the origin moves by the radius of the region along
   * the net force: zero for a force-free field that the patch holds whole.
   */
  readonly originChange: number;
  /** What noise alone would make of it: the root mean square for a map without net force. */
  readonly originChangeNoise: number;
  readonly origin: VirialOrigin;
}

/**
 * Energy [J] of a force-free field above the plane from the plane alone, (1/mu0) times the integral of
 * (x Bx + y By) Bz (Molodensky 1974, Sol. Phys. 39, 393), with its error from noise. Missing pixels
 * count as no field. Another origin d [pixels] away gives an energy different by exactly d . F with
 * F the net horizontal force (`horizontalForce`).
 */
export function virialEnergy(
  field: VectorField,
  noise: VectorNoise,
  origin: VirialOrigin = virialOrigin(field),
): VirialEnergy {
  const { nx, ny, pixelMm, bx, by, bz } = fieldArrays(field);
  let energy = 0;
  let variance = 0;
  for (let j = 0; j < ny; j++) {
    const y = (j - origin.y) * pixelMm;
    for (let i = 0; i < nx; i++) {
      const p = i + nx * j;
      const x = (i - origin.x) * pixelMm;
      const lever = x * bx[p] + y * by[p];
      const part = lever * bz[p];
      if (Number.isNaN(part)) continue;
      energy += part;
      const [sx, sy, sz] = [noiseAt(noise.x, p), noiseAt(noise.y, p), noiseAt(noise.z, p)];
      // Products of two errors are in the squares of the measured field twice: take one off.
      const across = x * x * sx * sx + y * y * sy * sy;
      variance += bz[p] * bz[p] * across + lever * lever * sz * sz - across * sz * sz;
    }
  }
  const scale = JOULE_PER_GAUSS2_MM3 * pixelMm * pixelMm;
  const joules = scale * energy;
  const force = horizontalForce(field);
  const reachM = origin.radiusMm * METRES_PER_MEGAMETRE;
  return {
    joules,
    sigma: scale * Math.sqrt(Math.max(0, variance)),
    originChange: (reachM * Math.hypot(force.x, force.y)) / Math.abs(joules),
    originChangeNoise: (reachM * forceNoise(field, noise)) / Math.abs(joules),
    origin,
  };
}

/** Root mean square [N] of the net horizontal force that noise alone makes. */
function forceNoise(field: VectorField, noise: VectorNoise): number {
  const { pixelMm, bx, by, bz } = fieldArrays(field);
  let variance = 0;
  for (let i = 0; i < bz.length; i++) {
    if (Number.isNaN(bx[i] * by[i] * bz[i])) continue;
    const across = noiseAt(noise.x, i) ** 2 + noiseAt(noise.y, i) ** 2;
    const vertical = noiseAt(noise.z, i) ** 2;
    variance += bz[i] ** 2 * across + (bx[i] ** 2 + by[i] ** 2 - across) * vertical;
  }
  return NEWTON_PER_GAUSS2_MM2 * pixelMm * pixelMm * Math.sqrt(Math.max(0, variance));
}

/** Net horizontal force [N] on the half space above, -(1/mu0) integral of Bx Bz, By Bz (Low 1985). */
export function horizontalForce(field: VectorField): { readonly x: number; readonly y: number } {
  const { pixelMm, bx, by, bz } = fieldArrays(field);
  let [x, y] = [0, 0];
  for (let i = 0; i < bz.length; i++) {
    if (Number.isNaN(bx[i] * by[i] * bz[i])) continue;
    x -= bx[i] * bz[i];
    y -= by[i] * bz[i];
  }
  const scale = NEWTON_PER_GAUSS2_MM2 * pixelMm * pixelMm;
  return { x: scale * x, y: scale * y };
}

/** Free energy by the virial theorem [J]. */
export interface VirialFreeEnergy extends Energy {
  /**
   * How far the energy of the current-free field by the virial theorem is from that by its spectrum
   * [J]: what field beyond the patch and coarse pixels do to the virial. Part of `sigma`.
   */
  readonly truncationJ: number;
  /** 1-sigma error by noise alone [J]. */
  readonly noiseJ: number;
}

/**
 * Free energy [J]: total energy by the virial theorem less that of the current-free field. `potential`
 * is the latter by its spectrum, `horizontal` its components on the grid of `field`; its virial about the
 * same origin tells what is lost at the rim of the patch.
 */
export function virialFreeEnergy(
  field: VectorField,
  horizontal: HorizontalField,
  total: VirialEnergy,
  potential: Energy,
): VirialFreeEnergy {
  const again = virialEnergy(
    { x: horizontal.x, y: horizontal.y, z: field.z },
    { x: 0, y: 0, z: 0 },
    total.origin,
  );
  const truncationJ = Math.abs(again.joules - potential.joules);
  const noiseJ = Math.hypot(total.sigma, potential.sigma);
  return {
    joules: total.joules - potential.joules,
    sigma: Math.hypot(noiseJ, truncationJ),
    truncationJ,
    noiseJ,
  };
}
