/** Ratio of a normal deviation to its median absolute deviation. */
const DEVIATION_PER_MEDIAN = 1.4826;
const LARGEST_SAMPLE = 20_000;
/**
 * Distance in pixels of the second difference. Far enough that neighbours which share noise through
 * an instrument's blur or an earlier resampling count as independent, near enough that smooth field
 * cancels.
 */
const LAG = 3;

type Values = Float32Array | Float64Array;

function median(sample: Float64Array): number {
  if (sample.length === 0) return Number.NaN;
  sample.sort();
  const middle = sample.length >> 1;
  return sample.length % 2 === 1 ? sample[middle] : 0.5 * (sample[middle - 1] + sample[middle]);
}

/** Collects at most LARGEST_SAMPLE finite results of `probe` over evenly spread indices below `length`. */
function collect(length: number, probe: (index: number) => number): Float64Array {
  const stride = Math.max(1, Math.floor(length / (2 * LARGEST_SAMPLE)));
  const sample = new Float64Array(Math.ceil(length / stride));
  let used = 0;
  for (let i = 0; i < length; i += stride) {
    const value = probe(i);
    if (Number.isFinite(value)) sample[used++] = value;
  }
  return sample.subarray(0, used);
}

/**
 * Pixel noise (1 sigma, in the unit of `values`) of an nx x ny row-major map from its own quiet
 * pixels: the median absolute second difference x[i] - (x[i - lag] + x[i + lag]) / 2 along rows and
 * columns where all three lie in the core of the distribution, over sqrt(1.5). Smooth field cancels
 * in the difference, so a noise-free map gives nearly zero. NaN is skipped; NaN where fewer than 30
 * triples are found.
 */
export function estimateNoise(values: Values, nx: number, ny: number): number {
  const core = median(collect(values.length, (i) => Math.abs(values[i])));
  const quiet = 3 * DEVIATION_PER_MEDIAN * core;
  const difference = (i: number, step: number): number => {
    const a = values[i - step];
    const b = values[i + step];
    const isQuiet = Math.abs(values[i]) <= quiet && Math.abs(a) <= quiet && Math.abs(b) <= quiet;
    return isQuiet ? Math.abs(values[i] - 0.5 * (a + b)) : Number.NaN;
  };
  const along = collect(values.length, (i) => {
    const x = i % nx;
    return x >= LAG && x < nx - LAG ? difference(i, LAG) : Number.NaN;
  });
  const across = collect(values.length, (i) =>
    i >= LAG * nx && i < (ny - LAG) * nx ? difference(i, LAG * nx) : Number.NaN,
  );
  const all = new Float64Array(along.length + across.length);
  all.set(along);
  all.set(across, along.length);
  if (all.length < 30) return Number.NaN;
  return (DEVIATION_PER_MEDIAN * median(all)) / Math.sqrt(1.5);
}
