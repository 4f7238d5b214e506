import { VACUUM_PERMEABILITY } from '../constants.js';
import { fieldArrays, noiseAt, type VectorField, type VectorNoise } from '../field/vector-field.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS } from '../units.js';
import type { Energy } from './spectral-energy.js';
import type { HorizontalField } from './virial.js';

/** Free energy guessed from the surface alone. */
export interface ExcessEnergy extends Energy {
  /** Mean of |B - Bpot|^2 / 2 mu0 over the patch [J/m^3], noise taken off. */
  readonly densityJPerM3: number;
  /** Height over which that density is taken to reach [Mm]. */
  readonly heightMm: number;
}

const JOULE_PER_M3_PER_GAUSS2 = TESLA_PER_GAUSS ** 2 / (2 * VACUUM_PERMEABILITY);

/**
 * Excess-energy proxy [J]: the density |B - Bpot|^2 / 2 mu0 at the surface (Wang et al. 1996, ApJ 456,
 * 861), summed over the area, times a height. The height is that of the current-free field itself, its
 * energy `potential` over its energy density summed over the surface: what makes the same
 * product exact for the current-free field. It is a proxy: free energy may reach higher or less high.
 * What noise adds to the square is taken off. Missing pixels count as no field.
 */
export function excessEnergy(
  field: VectorField,
  horizontal: HorizontalField,
  noise: VectorNoise,
  potential: Energy,
): ExcessEnergy {
  const { pixelMm, bx, by, bz } = fieldArrays(field);
  const px = horizontal.x.values.data;
  const py = horizontal.y.values.data;
  let [excess, variance, surface, count] = [0, 0, 0, 0];
  for (let i = 0; i < bz.length; i++) {
    const [dx, dy] = [bx[i] - px[i], by[i] - py[i]];
    if (Number.isNaN(dx * dy * bz[i])) continue;
    const [vx, vy] = [noiseAt(noise.x, i) ** 2, noiseAt(noise.y, i) ** 2];
    const vz = noiseAt(noise.z, i) ** 2;
    // The current-free field takes up the noise of Bz: each mode goes to x and y by kx / k and ky / k,
    // hence half of its variance to each.
    const [wx, wy] = [vx + 0.5 * vz, vy + 0.5 * vz];
    excess += dx * dx + dy * dy - wx - wy;
    // Var (d + e)^2 = 4 d^2 w + 2 w^2, with the measured d^2 holding w already.
    variance += 4 * (dx * dx * wx + dy * dy * wy) - 2 * (wx * wx + wy * wy);
    surface += px[i] * px[i] + py[i] * py[i] + bz[i] * bz[i] - 2 * vz;
    count++;
  }
  const heightMm =
    potential.joules /
    (surface * JOULE_PER_M3_PER_GAUSS2 * pixelMm * pixelMm * METRES_PER_MEGAMETRE ** 3);
  const scale = JOULE_PER_M3_PER_GAUSS2 * pixelMm * pixelMm * heightMm * METRES_PER_MEGAMETRE ** 3;
  return {
    joules: scale * excess,
    sigma: scale * Math.sqrt(Math.max(0, variance)),
    densityJPerM3: (JOULE_PER_M3_PER_GAUSS2 * excess) / count,
    heightMm,
  };
}
