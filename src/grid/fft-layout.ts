// Where things lie in the memory of the compiled transforms. All addresses are in bytes.
import { type FftPlan, fftPlan } from './fft-plan.js';

/** Bytes of one point: eight real and eight imaginary parts (src/grid/kernel/scratch.ts). */
const POINT = 128;
const CACHE_PAGE = 4096;

export interface FftLayout {
  readonly nx: number;
  readonly ny: number;
  readonly even: boolean;
  readonly columns: number;
  readonly rowPlan: FftPlan;
  readonly columnPlan: FftPlan;
  /** Rows that a row kernel takes at once. */
  readonly batch: number;
  readonly rowPlanAt: number;
  readonly columnPlanAt: number;
  readonly turnAt: number;
  readonly scratchAt: readonly [a: number, b: number, c: number, row: number, odd: number];
  /** A batch of real rows, or of rows of the spectrum: real parts, and imaginary parts elsewhere. */
  readonly stagingAt: number;
  readonly imaginaryAt: number;
  /** Tiles of eight columns; with nx even, the last column lies in the imaginary parts of the first. */
  readonly tiles: number;
  readonly tiledColumns: number;
  readonly tileBytes: number;
  readonly tilesAt: number;
  readonly bytes: number;
}

/** The layout for nx * ny real values: about 16 bytes for each mode kept, and see fft-kernel.ts. */
export function layOut(nx: number, ny: number): FftLayout {
  const even = nx % 2 === 0;
  const columns = (nx >> 1) + 1;
  const rowPlan = fftPlan(even ? nx / 2 : nx);
  const columnPlan = fftPlan(ny);
  const batch = even ? 8 : 16;
  let at = 1024;
  const take = (bytes: number, offset = 0) => {
    const from = Math.ceil((at - offset) / CACHE_PAGE) * CACHE_PAGE + offset;
    at = from + bytes;
    return from;
  };
  const points = POINT * Math.max(rowPlan.points, columnPlan.points);
  const chirped = rowPlan.chirped || columnPlan.chirped;
  const tiledColumns = even ? nx / 2 : columns;
  const tiles = Math.ceil(tiledColumns / 8);
  // Whole batches of rows are written, the last perhaps past the end of the map. An odd number of
  // kilobytes from tile to tile keeps the tiles from competing for the same lines of a cache.
  const rows = Math.ceil(ny / batch) * batch;
  const tileBytes = 1024 * (Math.ceil((rows * POINT) / 1024) | 1);
  const layout = {
    nx,
    ny,
    even,
    columns,
    rowPlan,
    columnPlan,
    batch,
    rowPlanAt: take(rowPlan.bytes.length),
    columnPlanAt: take(columnPlan.bytes.length),
    turnAt: take(16 * ((nx >> 2) + 1)),
    // A pass reads one buffer and writes another, in strides that may be powers of two: half a page
    // apart, they use different lines of the first cache.
    scratchAt: [
      take(points, 2048),
      take(points),
      take(chirped ? points : 0),
      take(points + POINT),
      take(CACHE_PAGE),
    ] as const,
    stagingAt: take(8 * batch * Math.max(nx, columns)),
    imaginaryAt: take(8 * batch * columns),
    tiles,
    tiledColumns,
    tileBytes,
    tilesAt: take(tiles * tileBytes),
  };
  return { ...layout, bytes: at };
}
