import type { Grid2 } from '../grid/grid.js';

/** Least share of an output pixel that must have values for it to get one. */
const LEAST_COVER = 0.5;

/**
 * Brings a map to width x height display samples (row 0 still south): area average where it shrinks,
 * linear interpolation or, with `blocky`, nearest pixel where it grows. An average takes the
 * values that are there and is NaN when they cover less than half of the pixel; a linear one falls
 * back to the nearest pixel beside NaN.
 */
export function resampleMap(
  map: Grid2,
  width: number,
  height: number,
  blocky: boolean,
): Float64Array {
  const [ny, nx] = map.values.shape;
  const data = map.values.data;
  if (width < nx || height < ny) return areaAverage(data, nx, ny, width, height);
  return blocky ? nearest(data, nx, ny, width, height) : linear(data, nx, ny, width, height);
}

function nearest(data: Float64Array, nx: number, ny: number, width: number, height: number) {
  const out = new Float64Array(width * height);
  const columns = placesAlong(nx, width);
  const rows = placesAlong(ny, height);
  for (let y = 0; y < height; y++) {
    const row = nx * rows.near[y];
    for (let x = 0; x < width; x++) out[x + width * y] = data[columns.near[x] + row];
  }
  return out;
}

function linear(data: Float64Array, nx: number, ny: number, width: number, height: number) {
  const out = new Float64Array(width * height);
  const columns = placesAlong(nx, width);
  const rows = placesAlong(ny, height);
  for (let y = 0; y < height; y++) {
    const [south, north] = [nx * rows.low[y], nx * rows.high[y]];
    const v = rows.share[y];
    for (let x = 0; x < width; x++) {
      const [west, east, u] = [columns.low[x], columns.high[x], columns.share[x]];
      const below = data[west + south] * (1 - u) + data[east + south] * u;
      const above = data[west + north] * (1 - u) + data[east + north] * u;
      const value = below * (1 - v) + above * v;
      out[x + width * y] = Number.isNaN(value) ? data[columns.near[x] + nx * rows.near[y]] : value;
    }
  }
  return out;
}

/** Source pixels on both sides of each output sample, the share of the upper one, and the nearest. */
function placesAlong(from: number, to: number) {
  const low = new Int32Array(to);
  const high = new Int32Array(to);
  const near = new Int32Array(to);
  const share = new Float64Array(to);
  for (let i = 0; i < to; i++) {
    const at = Math.max(0, Math.min(from - 1, ((i + 0.5) * from) / to - 0.5));
    low[i] = Math.min(from - 1, Math.floor(at));
    high[i] = Math.min(from - 1, low[i] + 1);
    share[i] = at - low[i];
    near[i] = Math.round(at);
  }
  return { low, high, near, share };
}

function areaAverage(
  data: Float64Array,
  nx: number,
  ny: number,
  width: number,
  height: number,
): Float64Array {
  const out = new Float64Array(width * height);
  const [stepX, stepY] = [nx / width, ny / height];
  for (let y = 0; y < height; y++) {
    const [bottom, top] = [y * stepY, (y + 1) * stepY];
    for (let x = 0; x < width; x++) {
      const [left, right] = [x * stepX, (x + 1) * stepX];
      let sum = 0;
      let cover = 0;
      for (let j = Math.floor(bottom); j < top && j < ny; j++) {
        const tall = Math.min(top, j + 1) - Math.max(bottom, j);
        for (let i = Math.floor(left); i < right && i < nx; i++) {
          const value = data[i + nx * j];
          if (Number.isNaN(value)) continue;
          const weight = tall * (Math.min(right, i + 1) - Math.max(left, i));
          sum += weight * value;
          cover += weight;
        }
      }
      out[x + width * y] = cover < LEAST_COVER * stepX * stepY ? Number.NaN : sum / cover;
    }
  }
  return out;
}
