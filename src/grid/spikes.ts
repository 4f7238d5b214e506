/** A lone pixel this many noise deviations above all eight neighbours is no solar structure. */
const SPIKE_DEVIATIONS = 20;
/** Field that no unresolved quiet-Sun element shows in one pixel alone [G]; common practice, no source. */
const SPIKE_FLOOR = 500;

/**
 * Indices of isolated single-pixel spikes (cosmic-ray hits, telemetry errors) in an nx x ny map [G]:
 * pixels of at least 500 G and 20 `noise` whose eight neighbours all stay below a fifth of them.
 * NaN neighbours do not count against a spike; the outermost pixels are not tested.
 */
export function findSpikes(
  values: Float32Array | Float64Array,
  nx: number,
  ny: number,
  noise: number,
): number[] {
  const least = Math.max(SPIKE_FLOOR, SPIKE_DEVIATIONS * (noise || 0));
  const neighbours = [-nx - 1, -nx, -nx + 1, -1, 1, nx - 1, nx, nx + 1];
  const spikes: number[] = [];
  for (let y = 1; y < ny - 1; y++) {
    for (let i = y * nx + 1; i < (y + 1) * nx - 1; i++) {
      const size = Math.abs(values[i]);
      if (size >= least && !neighbours.some((step) => Math.abs(values[i + step]) > size / 5))
        spikes.push(i);
    }
  }
  return spikes;
}
