import { errorFunction } from 'simple-statistics';

/** Probability that a standard normal variate lies below `x`; good to 2e-7 (the error function's series). */
export function normalCumulative(x: number): number {
  return 0.5 * (1 + errorFunction(x / Math.SQRT2));
}

/**
 * Quantiles of a normal distribution cut to [-limit, limit]: `count` equally likely values at the
 * mid-probabilities (i + 1/2) / count, ascending, so that no random numbers are needed. Also the
 * probability that the cut removed.
 */
export function truncatedNormalQuantiles(
  mean: number,
  deviation: number,
  limit: number,
  count: number,
): { readonly values: Float64Array; readonly removed: number } {
  const lowest = normalCumulative((-limit - mean) / deviation);
  const kept = normalCumulative((limit - mean) / deviation) - lowest;
  const values = new Float64Array(count);
  for (let i = 0; i < count; i++) {
    const target = lowest + (kept * (i + 0.5)) / count;
    let low = -limit;
    let high = limit;
    for (let step = 0; step < 50; step++) {
      const middle = 0.5 * (low + high);
      if (normalCumulative((middle - mean) / deviation) < target) low = middle;
      else high = middle;
    }
    values[i] = 0.5 * (low + high);
  }
  return { values, removed: 1 - kept };
}
