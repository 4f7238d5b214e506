import {
  fieldArrays,
  makeVectorField,
  type VectorField,
  type VectorNoise,
} from '../field/vector-field.js';
import type { Grid2 } from '../grid/grid.js';
import { type Interval, intervalFromDraws, symmetricInterval } from '../grid/interval.js';
import { seededNormalFill } from '../grid/random.js';
import {
  type FittedAlpha,
  fittedAlpha,
  fluxWeightedAlpha,
  medianAlpha,
} from './alpha-estimates.js';
import {
  type CurrentBudget,
  type CurrentSums,
  currentBudget,
  currentsAboveNoise,
  sumCurrents,
} from './current-budget.js';
import { type CurrentHelicity, currentHelicity } from './current-helicity.js';
import { type CurlMethod, currentNoise, drawErrors, verticalCurrent } from './vertical-current.js';

export interface CurrentOptions {
  /** Vertical field [G] from which a pixel belongs to a polarity. */
  readonly leastG: number;
  readonly method?: CurlMethod;
  /** How many draws of noise make the intervals, and the seed that makes them the same again. */
  readonly draws?: number;
  readonly seed?: number;
  /** Noise of the current map [mA/m^2] where it is known better than from the noise of the field. */
  readonly currentSigma?: Float64Array;
}

/** Everything that one vector map tells about its currents. */
export interface MeasuredCurrents {
  readonly density: Grid2<'mA/m^2'>;
  readonly sigma: Float64Array;
  readonly budget: CurrentBudget;
  /** alpha [1/Mm] by flux weight, by the fit of the horizontal field and as median. */
  readonly alpha: {
    readonly fluxWeighted: Interval;
    readonly fitted: Interval;
    readonly median: Interval;
    readonly fit: FittedAlpha;
  };
  /** Current helicity [G^2/m; total G^2 m]. */
  readonly helicity: Readonly<Record<keyof CurrentHelicity, Interval>>;
}

const DRAWS = 48;

interface Draw {
  readonly sums: CurrentSums;
  readonly weighted: number;
  readonly median: number;
  readonly helicity: CurrentHelicity;
}

/**
 * Currents, alpha and current helicity of a vector map with 16/84 % intervals from seeded draws of
 * its noise. The curl is linear, so each draw adds the curl of drawn errors to the measured currents;
 * for the unsigned sums to those above noise only, lest the noise already in the map counts twice.
 */
export function measureCurrents(
  field: VectorField,
  noise: VectorNoise,
  options: CurrentOptions,
): MeasuredCurrents {
  const { method = 'central', leastG, draws = DRAWS, seed = 1 } = options;
  const { nx, ny, pixelMm, bz } = fieldArrays(field);
  const density = verticalCurrent(field, method);
  const predicted = currentNoise(field, noise, method).values.data;
  const sigma = options.currentSigma ?? predicted;
  const measured = density.values.data;
  const value: Draw = {
    sums: sumCurrents(measured, sigma, bz, leastG, pixelMm),
    weighted: fluxWeightedAlpha(measured, bz, leastG),
    median: medianAlpha(measured, bz, leastG),
    helicity: currentHelicity(measured, bz, leastG, pixelMm),
  };
  const clean = currentsAboveNoise(measured, sigma);
  const fill = seededNormalFill(seed);
  const [ex, ey, noisyBz] = [0, 1, 2].map(() => new Float64Array(nx * ny));
  const errorField = makeVectorField(ex, ey, noisyBz, nx, ny, pixelMm);
  const noisySums = new Float64Array(nx * ny);
  const results: Draw[] = [];
  for (let k = 0; k < draws; k++) {
    drawErrors(noise.x, fill, ex);
    drawErrors(noise.y, fill, ey);
    drawErrors(noise.z, fill, noisyBz);
    const noisy = verticalCurrent(errorField, method).values.data;
    for (let i = 0; i < noisy.length; i++) {
      // Noise known better than from the field: the draws are scaled to it.
      const error = sigma === predicted ? noisy[i] : (noisy[i] * sigma[i]) / predicted[i];
      noisySums[i] = error + clean[i];
      noisy[i] = error + measured[i];
      noisyBz[i] += bz[i];
    }
    results.push({
      sums: sumCurrents(noisySums, sigma, bz, leastG, pixelMm),
      weighted: fluxWeightedAlpha(noisy, noisyBz, leastG),
      median: medianAlpha(noisy, noisyBz, leastG),
      helicity: currentHelicity(noisy, noisyBz, leastG, pixelMm),
    });
  }
  const interval = (of: (draw: Draw) => number) => intervalFromDraws(of(value), results.map(of));
  const fit = fittedAlpha(field, noise);
  return {
    density,
    sigma,
    budget: currentBudget(
      value.sums,
      results.map(({ sums }) => sums),
    ),
    alpha: {
      fluxWeighted: interval(({ weighted }) => weighted),
      fitted: symmetricInterval(fit.perMm, fit.sigmaPerMm),
      median: interval(({ median }) => median),
      fit,
    },
    helicity: {
      mean: interval(({ helicity }) => helicity.mean),
      positive: interval(({ helicity }) => helicity.positive),
      negative: interval(({ helicity }) => helicity.negative),
      total: interval(({ helicity }) => helicity.total),
    },
  };
}
