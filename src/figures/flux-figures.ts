import { areasAbove, type FluxSums, STRONG_AREA_FIELD_G, sumFlux } from '../field/flux.js';
import type { Grid2 } from '../grid/grid.js';
import { type PatchNoise, UNIFORM_DEVIATION } from './patch-noise.js';
import { type Quantities, quantity, withSigma } from './quantity.js';

/**
 * Fluxes, peaks and area of the radial field. Flux sums go by `polarityMap`; their
 * errors join the noise, sigma sqrt(N pixel cell), with what the other way from the line of sight to
 * the radial field would change. `sums` are those of `radial` by
 * `polarity`.
 */
export function fluxQuantities(
  radial: Grid2<'G'>,
  sums: FluxSums,
  polarity: Int8Array,
  other: Grid2<'G'>,
  noise: PatchNoise,
): Quantities {
  const others = other === radial ? sums : sumFlux(other, polarity);
  const pixelMm2 = radial.pixelMm ** 2;
  const noiseOf = (pixels: number) =>
    1e16 * noise.deviationG * Math.sqrt(pixels * pixelMm2 * noise.cellMm2);
  const sigma = (pixels: number, here: number, there: number) =>
    Math.hypot(noiseOf(pixels), UNIFORM_DEVIATION * (here - there));
  const up = sums.positiveMx;
  const down = sums.negativeMx;
  const upPixels = sums.positivePixels;
  const downPixels = sums.negativePixels;
  const pixels = upPixels + downPixels;
  // Nothing above the noise is no flux of zero: it cannot be had.
  const unsigned = pixels > 0 ? up + down : Number.NaN;
  // The other way raises one sign and lowers the other: their differences must not cancel.
  const change = Math.abs(up - others.positiveMx) + Math.abs(down - others.negativeMx);
  const unsignedSigma = Math.hypot(noiseOf(pixels), UNIFORM_DEVIATION * change);
  const net = pixels > 0 ? up - down : Number.NaN;
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
      pixels > 0 ? up : Number.NaN,
      sigma(upPixels, up, others.positiveMx),
      'measured',
    ),
    negative_flux: withSigma(
      'negative_flux',
      pixels > 0 ? -down : Number.NaN,
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
