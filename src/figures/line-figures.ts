import {
  type InversionLine,
  LEAST_HORIZONTAL_G,
  measureInversionLines,
  prepareInversionLine,
  traceInversionLines,
} from '../field/inversion-line.js';
import { nearLineFlux } from '../field/near-line-flux.js';
import { potentialHorizontalField, type Sides } from '../field/potential.js';
import type { Grid2 } from '../grid/grid.js';
import type { PatchNoise } from './analyse-region.js';
import { type Quantity, type QuantityKey, quantity } from './quantity.js';

/** Coarser pixels than this [Mm] cannot tell a gradient at an inversion line. */
const COARSEST_PIXEL_MM = 4;
const NEAR_LINE_THRESHOLD_G = 150;

type Quantities = Partial<Record<QuantityKey, Quantity>>;

/**
 * Inversion-line measures with intervals from moving each threshold by the noise of what it is
 * compared with; the lengths and fluxes are monotone in them.
 */
export function lineQuantities(
  radial: Grid2<'G'>,
  noise: PatchNoise,
  sides: Sides,
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
  const inputs = prepareInversionLine(radial, potentialHorizontalField(radial, sides));
  // A Gaussian of deviation s averages 4 pi s^2 pixels; its gradient has 1 / (sqrt 2 s) of the noise.
  const blurMm = inputs.blurPixels * radial.pixelMm;
  const smoothedG =
    noise.deviationG * Math.min(1, Math.sqrt(noise.cellMm2 / (4 * Math.PI * blurMm ** 2)));
  const gradientNoise = smoothedG / (Math.SQRT2 * blurMm);
  const lines = traceInversionLines(inputs, Math.max(LEAST_HORIZONTAL_G, 3 * smoothedG));
  const measured = measureInversionLines(lines, inputs);
  const fewer = measureInversionLines(lines, inputs, smoothedG, gradientNoise);
  const more = measureInversionLines(lines, inputs, -smoothedG, -gradientNoise);
  const lengthAt = (shift: number) =>
    measureInversionLines(traceInversionLines(inputs, LEAST_HORIZONTAL_G + shift), inputs).lengthMm;
  const near = (shift: number) => nearLineFlux(radial, NEAR_LINE_THRESHOLD_G + shift);
  const one = noise.pixelDeviationG;
  return {
    lines,
    quantities: {
      inversion_line_length: quantity(
        'inversion_line_length',
        measured.lengthMm,
        lengthAt(Math.max(smoothedG, 3 * smoothedG - LEAST_HORIZONTAL_G)),
        lengthAt(-Math.min(smoothedG, LEAST_HORIZONTAL_G / 2)),
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
      near_line_flux: quantity('near_line_flux', near(0), near(one), near(-one), 'measured'),
    },
    flags: [],
  };
}
