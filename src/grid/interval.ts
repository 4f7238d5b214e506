/** A figure with its 16 and 84 % limits. */
export interface Interval {
  readonly value: number;
  readonly low: number;
  readonly high: number;
}

/** Quantile `p` of values that need not be sorted; NaN among them is left out. */
function quantile(values: readonly number[], p: number): number {
  const sorted = Float64Array.from(values.filter((value) => !Number.isNaN(value))).sort();
  if (sorted.length === 0) return Number.NaN;
  const at = Math.min(sorted.length - 1, Math.max(0, p * sorted.length - 0.5));
  const below = Math.floor(at);
  const above = Math.min(sorted.length - 1, below + 1);
  return sorted[below] + (at - below) * (sorted[above] - sorted[below]);
}

/**
 * Interval of `value` from repeated draws of it under noise: the draws scatter about their own
 * median as the value scatters about the truth, so their 84 % side tells how far the truth may lie
 * below the value and their 16 % side how far above (the basic bootstrap; Davison & Hinkley 1997, ch. 5).
 */
export function intervalFromDraws(value: number, draws: readonly number[]): Interval {
  const middle = quantile(draws, 0.5);
  return {
    value,
    low: value - (quantile(draws, 0.84) - middle),
    high: value + (middle - quantile(draws, 0.16)),
  };
}

/** Interval of one standard deviation to each side. */
export function symmetricInterval(value: number, sigma: number): Interval {
  return { value, low: value - sigma, high: value + sigma };
}
