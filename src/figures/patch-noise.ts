import type { FieldNoise } from '../energy/spectral-energy.js';
import type { LocalPatch } from '../geometry/patch.js';

/**
 * What the other way from the line of sight would give is taken as the far end of a uniform
 * distribution: its deviation is the width over sqrt(12).
 */
export const UNIFORM_DEVIATION = 1 / Math.sqrt(12);

/** Noise of the radial field over a patch and of one of its pixels [G]. */
export interface PatchNoise extends FieldNoise {
  readonly pixelDeviationG: number;
}

/** Foreshortening raises the noise of the radial field and the area of a source pixel, both by 1/mu. */
export function patchNoise(
  patch: LocalPatch,
  options: { readonly noiseG: number; readonly sourcePixelMm: number },
): PatchNoise {
  const mu = Math.max(0.17, patch.center.mu);
  const deviationG = patch.component === 'radial' ? options.noiseG : options.noiseG / mu;
  const cellMm2 = options.sourcePixelMm ** 2 / (patch.component === 'radial' ? 1 : mu);
  const share = Math.min(1, Math.sqrt(cellMm2 / patch.pixelMm ** 2));
  return { deviationG, cellMm2, pixelDeviationG: deviationG * share };
}
