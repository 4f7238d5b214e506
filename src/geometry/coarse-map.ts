type Values = Float32Array | Float64Array;

/** Cells on a side that suffice to tell regions apart: 6 Mm each on a full disk. */
const MOST_CELLS = 256;

/** Size of the field in blocks of factor x factor pixels; NaN where less than half is known. */
export interface CoarseMap {
  readonly nx: number;
  readonly ny: number;
  readonly factor: number;
  readonly values: Float64Array;
  /** Position of a cell's centre in pixels of the map. */
  centreOf(cell: number): [number, number];
}

/**
 * Mean unsigned field of blocks without the strongest pixel of each, then limited to the strongest of
 * the eight neighbours: what lives in one pixel, or in one cell, is a spike and no region.
 */
export function binUnsigned(values: Values, width: number, height: number): CoarseMap {
  const factor = Math.max(1, Math.ceil(Math.max(width, height) / MOST_CELLS));
  const nx = Math.ceil(width / factor);
  const ny = Math.ceil(height / factor);
  const means = new Float64Array(nx * ny);
  for (let y = 0; y < ny; y++) blockRow(values, width, height, factor, y, means, nx);
  const centreOf = (cell: number): [number, number] => {
    const x = cell % nx;
    const middle = (factor - 1) / 2;
    return [x * factor + middle, ((cell - x) / nx) * factor + middle];
  };
  return { nx, ny, factor, values: limitedToNeighbours(means, nx, ny), centreOf };
}

/** One row of blocks, by running sums over the pixel rows in memory order. */
function blockRow(
  values: Values,
  width: number,
  height: number,
  factor: number,
  y: number,
  means: Float64Array,
  nx: number,
): void {
  const sums = new Float64Array(nx);
  const peaks = new Float64Array(nx);
  const counts = new Uint32Array(nx);
  const end = Math.min(height, (y + 1) * factor);
  for (let row = y * factor; row < end; row++) {
    const start = row * width;
    for (let x = 0; x < nx; x++) {
      const last = start + Math.min(width, (x + 1) * factor);
      let sum = sums[x];
      let peak = peaks[x];
      let count = counts[x];
      for (let i = start + x * factor; i < last; i++) {
        const size = Math.abs(values[i]);
        if (!(size >= 0)) continue;
        sum += size;
        count++;
        if (size > peak) peak = size;
      }
      sums[x] = sum;
      peaks[x] = peak;
      counts[x] = count;
    }
  }
  for (let x = 0; x < nx; x++) {
    const known = counts[x];
    const isEnough = 2 * known >= factor * factor;
    const mean = known > 1 ? (sums[x] - peaks[x]) / (known - 1) : peaks[x];
    means[x + nx * y] = isEnough ? mean : Number.NaN;
  }
}

function limitedToNeighbours(means: Float64Array, nx: number, ny: number): Float64Array {
  const out = new Float64Array(nx * ny);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      const at = x + nx * y;
      let highest = 0;
      for (let v = Math.max(0, y - 1); v <= Math.min(ny - 1, y + 1); v++)
        for (let u = Math.max(0, x - 1); u <= Math.min(nx - 1, x + 1); u++) {
          const near = means[u + nx * v];
          if (near > highest && u + nx * v !== at) highest = near;
        }
      out[at] = Math.min(means[at], highest);
    }
  }
  return out;
}
