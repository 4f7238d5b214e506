import { VACUUM_PERMEABILITY } from '../constants.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS } from '../units.js';

/** Current helicity [G^2/m] of 1 mA/m^2 in 1 G: Bz mu0 Jz with mu0 Jz in G/m. */
const HELICITY_PER_DENSITY_GAUSS = (1e-3 * VACUUM_PERMEABILITY) / TESLA_PER_GAUSS;

/** The vertical part of the current helicity, Bz (curl B)z. */
export interface CurrentHelicity {
  /** Mean over all known pixels, and over those of either polarity [G^2/m]. */
  readonly mean: number;
  readonly positive: number;
  readonly negative: number;
  /** Integral over the area [G^2 m]. */
  readonly total: number;
}

/**
 * Current helicity of a current map [mA/m^2] and the vertical field [G] (Abramenko, Wang & Yurchishin
 * 1996, Sol. Phys. 168, 75); a pixel belongs to a polarity from `leastG`. Errors of the two factors are
 * independent, so noise leaves the mean as it is. NaN is left out.
 */
export function currentHelicity(
  density: Float64Array,
  bz: Float64Array,
  leastG: number,
  pixelMm: number,
): CurrentHelicity {
  let [sum, count, up, upCount, down, downCount] = [0, 0, 0, 0, 0, 0];
  for (let i = 0; i < density.length; i++) {
    const product = density[i] * bz[i];
    if (Number.isNaN(product)) continue;
    sum += product;
    count++;
    if (bz[i] >= leastG) {
      up += product;
      upCount++;
    } else if (bz[i] <= -leastG) {
      down += product;
      downCount++;
    }
  }
  const scale = HELICITY_PER_DENSITY_GAUSS;
  return {
    mean: (scale * sum) / count,
    positive: (scale * up) / upCount,
    negative: (scale * down) / downCount,
    total: scale * sum * (pixelMm * METRES_PER_MEGAMETRE) ** 2,
  };
}
