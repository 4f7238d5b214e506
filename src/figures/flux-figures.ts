import { areasAbove, type FluxSums, STRONG_AREA_FIELD_G, sumFlux } from '../field/flux.js';
import type { Grid2 } from '../grid/grid.js';
import { type PatchNoise, signalLeast, UNIFORM_DEVIATION } from './patch-noise.js';
import { type Quantities, quantity, withSigma } from './quantity.js';

/**
 * A pixel at the threshold T = 3 sigma is in or out by chance: integrated over the crossing, the
 * variance is T^2 sigma / sqrt(pi) per unit of field, 9 / (2 sqrt pi) sigma^2 for each pixel within one sigma.
 */
const EDGE_WEIGHT = 9 / (2 * Math.sqrt(Math.PI));

/**
 * Fluxes, peaks and area of the radial field. Flux sums count pixels above three noise deviations; their
 * errors join the noise, sigma sqrt(N pixel cell), with what the other way from the line of sight to
 * the radial field would change. `sums` are those of `radial`.
 */
export function fluxQuantities(
  radial: Grid2<'G'>,
  sums: FluxSums,
  other: Grid2<'G'>,
  noise: PatchNoise,
): Quantities {
  const others = other === radial ? sums : sumFlux(other, signalLeast(noise));
  const pixelMm2 = radial.pixelMm ** 2;
  const noiseOf = (pixels: number) =>
    1e16 * noise.deviationG * Math.sqrt(pixels * pixelMm2 * noise.cellMm2);
  const sigma = (pixels: number, here: number, there: number) =>
    Math.hypot(noiseOf(pixels), UNIFORM_DEVIATION * (here - there));
  const up = sums.positiveMx;
  const down = sums.negativeMx;
  const upPixels = sums.positivePixels + EDGE_WEIGHT * sums.positiveEdgePixels;
  const downPixels = sums.negativePixels + EDGE_WEIGHT * sums.negativeEdgePixels;
  const pixels = upPixels + downPixels;
  const unsigned = up + down;
  const unsignedSigma = sigma(pixels, unsigned, others.positiveMx + others.negativeMx);
  const net = up - down;
  const netSigma = sigma(pixels, net, others.positiveMx - others.negativeMx);
  const one = noise.pixelDeviationG;
  const [area, less, more] = areasAbove(
    radial,
    [0, one, -one].map((shift) => STRONG_AREA_FIELD_G + shift),
  );
  const peak = (key: 'peak_positive_field' | 'peak_negative_field') => {
    const field = key === 'peak_positive_field' ? 'peakPositiveG' : 'peakNegativeG';
    return withSigma(
      key,
      sums[field],
      Math.hypot(one, UNIFORM_DEVIATION * (sums[field] - others[field])),
      'measured',
    );
  };
  return {
    positive_flux: withSigma(
      'positive_flux',
      up,
      sigma(upPixels, up, others.positiveMx),
      'measured',
    ),
    negative_flux: withSigma(
      'negative_flux',
      -down,
      sigma(downPixels, down, others.negativeMx),
      'measured',
    ),
    unsigned_flux: withSigma('unsigned_flux', unsigned, unsignedSigma, 'measured'),
    net_flux: withSigma('net_flux', net, netSigma, 'measured'),
    flux_imbalance: withSigma('flux_imbalance', net / unsigned, netSigma / unsigned, 'measured'),
    peak_positive_field: peak('peak_positive_field'),
    peak_negative_field: peak('peak_negative_field'),
    strong_field_area: quantity('strong_field_area', area, less, more, 'measured'),
  };
}
