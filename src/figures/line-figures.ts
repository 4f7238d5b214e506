import {
  type InversionLine,
  inversionLines,
  LEAST_HORIZONTAL_G,
  measureInversionLine,
  SMOOTHING_WIDTH_MM,
  traceZeroLine,
} from '../field/inversion-line.js';
import { nearLineFlux } from '../field/near-line-flux.js';
import { potentialHorizontalField, type Sides } from '../field/potential.js';
import type { Spectrum2 } from '../grid/fft.js';
import type { Grid2 } from '../grid/grid.js';
import { WIDTH_PER_DEVIATION } from '../grid/smooth.js';
import type { PatchNoise } from './patch-noise.js';
import { type Quantities, quantity } from './quantity.js';

/** Coarser pixels than this [Mm] cannot tell a gradient at an inversion line. */
const COARSEST_PIXEL_MM = 4;
const COARSEST_NEAR_LINE_MM = 1.6;

/** Noise [G] of the field smoothed for its zero line: a Gaussian of deviation s averages 4 pi s^2. */
function smoothedNoise(pixelMm: number, noise: PatchNoise): number {
  const blurMm = Math.max(SMOOTHING_WIDTH_MM, 1.5 * pixelMm) / WIDTH_PER_DEVIATION;
  return noise.deviationG * Math.min(1, Math.sqrt(noise.cellMm2 / (4 * Math.PI * blurMm ** 2)));
}

/**
 * Inversion-line measures with intervals from moving each threshold by the noise of what it is
 * compared with; the lengths and fluxes are monotone in them. `spectrum` is the padded spectrum of the
 * field, where the caller has it already.
 */
export function lineQuantities(
  radial: Grid2<'G'>,
  noise: PatchNoise,
  sides: Sides,
  spectrum?: Spectrum2,
): {
  readonly lines: readonly InversionLine[];
  readonly quantities: Quantities;
  readonly flags: string[];
} {
  if (radial.pixelMm > COARSEST_PIXEL_MM)
    return {
      lines: [],
      quantities: {},
      flags: [
        `inversion-line measures left out: pixels of ${radial.pixelMm.toPrecision(2)} Mm are too coarse, wanted at most ${COARSEST_PIXEL_MM} Mm`,
      ],
    };
  const horizontal = potentialHorizontalField(radial, sides, spectrum);
  const smoothedG = smoothedNoise(radial.pixelMm, noise);
  const least = Math.max(LEAST_HORIZONTAL_G, 3 * smoothedG);
  const zero = traceZeroLine(radial, horizontal, least);
  // The gradient of a Gaussian average of deviation s has 1 / (sqrt 2 s) of its noise.
  const gradientNoise = smoothedG / (Math.SQRT2 * zero.blurMm);
  const measured = measureInversionLine(zero, least);
  const fewer = measureInversionLine(zero, least + smoothedG, smoothedG, gradientNoise);
  const more = measureInversionLine(zero, least - smoothedG, -smoothedG, -gradientNoise);
  const one = noise.pixelDeviationG;
  const [near, nearFewer, nearMore] = nearLineFlux(radial, [0, one, -one]);
  return {
    lines: inversionLines(zero, least),
    quantities: {
      inversion_line_length: quantity(
        'inversion_line_length',
        measured.lengthMm,
        fewer.lengthMm,
        more.lengthMm,
        'extrapolated',
      ),
      strong_gradient_line_length: quantity(
        'strong_gradient_line_length',
        measured.strongLengthMm,
        fewer.strongLengthMm,
        more.strongLengthMm,
        'extrapolated',
      ),
      gradient_weighted_line_length: quantity(
        'gradient_weighted_line_length',
        measured.gradientWeightedG,
        fewer.gradientWeightedG,
        more.gradientWeightedG,
        'extrapolated',
      ),
      near_line_flux: quantity(
        'near_line_flux',
        near.mean,
        nearFewer.least,
        nearMore.most,
        'measured',
      ),
    },
    flags:
      radial.pixelMm > COARSEST_NEAR_LINE_MM
        ? ['near-line flux is defined on pixels of 1.44 Mm: from coarser ones it is too large']
        : [],
  };
}
