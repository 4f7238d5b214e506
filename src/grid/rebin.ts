import { bilinear } from './gradient.js';

/**
 * Mean over blocks of factor x factor pixels, ignoring NaN; a block is NaN where less than half of it
 * is known. Pixels of an incomplete last block are dropped.
 */
export function blockMean(
  values: Float64Array,
  nx: number,
  ny: number,
  factor: number,
): { readonly values: Float64Array; readonly nx: number; readonly ny: number } {
  const mx = Math.floor(nx / factor);
  const my = Math.floor(ny / factor);
  const out = new Float64Array(mx * my);
  for (let y = 0; y < my; y++) {
    for (let x = 0; x < mx; x++) {
      let sum = 0;
      let count = 0;
      for (let j = 0; j < factor; j++) {
        for (let i = 0; i < factor; i++) {
          const value = values[x * factor + i + nx * (y * factor + j)];
          if (!Number.isNaN(value)) {
            sum += value;
            count++;
          }
        }
      }
      out[x + mx * y] = 2 * count >= factor * factor ? sum / count : Number.NaN;
    }
  }
  return { values: out, nx: mx, ny: my };
}

/** A map of cells, row-major. */
export interface CellMap {
  readonly values: Float64Array;
  readonly nx: number;
  readonly ny: number;
}

/** Sums over everything south-west of each pixel corner: (nx + 1) * (ny + 1) values. */
function cornerSums(nx: number, ny: number, at: (i: number) => number): Float64Array {
  const width = nx + 1;
  const sums = new Float64Array(width * (ny + 1));
  for (let y = 0; y < ny; y++) {
    let row = 0;
    for (let x = 0; x < nx; x++) {
      row += at(x + nx * y);
      sums[x + 1 + width * (y + 1)] = sums[x + 1 + width * y] + row;
    }
  }
  return sums;
}

/**
 * Means over square cells of `cell` pixels (1 or more, not whole), one map for each of `offsets`: how many
 * cells the first lies from the south-west corner. Each pixel by the share of it that lies in the cell; NaN is left out, and a cell is
 * NaN where less than half of it is known. Cells that leave the map are dropped.
 */
export function cellMeans(
  values: Float64Array,
  nx: number,
  ny: number,
  cell: number,
  offsets: readonly (readonly [number, number])[],
): CellMap[] {
  const sums = cornerSums(nx, ny, (i) => (Number.isNaN(values[i]) ? 0 : values[i]));
  const known = cornerSums(nx, ny, (i) => (Number.isNaN(values[i]) ? 0 : 1));
  return offsets.map((offset) => cellMean(sums, known, nx, ny, cell, offset));
}

function cellMean(
  sums: Float64Array,
  known: Float64Array,
  nx: number,
  ny: number,
  cell: number,
  offset: readonly [number, number],
): CellMap {
  const mx = Math.max(0, Math.floor(nx / cell - offset[0] + 1e-9));
  const my = Math.max(0, Math.floor(ny / cell - offset[1] + 1e-9));
  const edge = (k: number, start: number, n: number) => Math.min(n, (k + start) * cell);
  const inside = (map: Float64Array, i: number, j: number): number => {
    const [west, east] = [edge(i, offset[0], nx), edge(i + 1, offset[0], nx)];
    const [south, north] = [edge(j, offset[1], ny), edge(j + 1, offset[1], ny)];
    const corner = (x: number, y: number) => bilinear(map, nx + 1, ny + 1, x, y);
    return corner(east, north) - corner(west, north) - corner(east, south) + corner(west, south);
  };
  const out = new Float64Array(mx * my);
  for (let j = 0; j < my; j++) {
    for (let i = 0; i < mx; i++) {
      const weight = inside(known, i, j);
      out[i + mx * j] = 2 * weight >= cell * cell - 1e-9 ? inside(sums, i, j) / weight : Number.NaN;
    }
  }
  return { values: out, nx: mx, ny: my };
}
