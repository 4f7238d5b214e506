import { truncatedNormalQuantiles } from '../grid/distribution.js';

/** Mean of alpha per degree of latitude and its scatter [1/m]: after Longcope, Fisher & Pevtsov 1998, ApJ 507, 417 (numbers from memory). */
const MEAN_PER_DEGREE = -2.7e-10;
const SCATTER = 1.3e-8;
const METRES_PER_MM = 1e6;

/** Close to the largest alpha the linear field loses its meaning (its energy diverges): stop before. */
export const USABLE_ALPHA_FRACTION = 0.9;
const SAMPLES = 801;

/**
 * What is believed of the force-free parameter of a region: equally likely values [1/Mm], ascending;
 * one value when it was given. `removed` is the probability that the cut at 0.9 alpha_max took away.
 */
export interface AlphaBelief {
  readonly basis: 'prior' | 'assumed';
  readonly perMm: Float64Array;
  readonly removed: number;
}

/** Latitude-dependent normal prior on alpha, cut at 0.9 of the largest alpha the patch allows [1/Mm]. */
export function alphaPrior(latitudeDeg: number, largestPerMm: number): AlphaBelief {
  const { values, removed } = truncatedNormalQuantiles(
    MEAN_PER_DEGREE * METRES_PER_MM * latitudeDeg,
    SCATTER * METRES_PER_MM,
    USABLE_ALPHA_FRACTION * largestPerMm,
    SAMPLES,
  );
  return { basis: 'prior', perMm: values, removed };
}

/** Alpha fixed by the user [1/Mm]. */
export function assumedAlpha(perMm: number): AlphaBelief {
  return { basis: 'assumed', perMm: Float64Array.of(perMm), removed: 0 };
}

/** Quantile `p` of equally likely values that need not be sorted. */
export function beliefQuantile(values: Float64Array, p: number): number {
  const sorted = Float64Array.from(values).sort();
  const at = Math.min(sorted.length - 1, Math.max(0, p * sorted.length - 0.5));
  const below = Math.floor(at);
  const above = Math.min(sorted.length - 1, below + 1);
  return sorted[below] + (at - below) * (sorted[above] - sorted[below]);
}
