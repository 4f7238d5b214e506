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
  readonly jobAt: number;
  readonly rowPlanAt: number;
  readonly columnPlanAt: number;
  readonly turnAt: number;
  /** For each thread. */
  readonly scratchAt: readonly (readonly [
    a: number,
    b: number,
    c: number,
    row: number,
    odd: number,
  ])[];
  /** One flag, an i32, for each unit of work. */
  readonly flagsAt: number;
  /** A batch of real rows, or of rows of the spectrum: all real parts, then all imaginary parts. */
  readonly stagingAt: number;
  /** From one batch in staging to the next; 0 for one thread, which needs but one. */
  readonly slotBytes: number;
  /** From the real to the imaginary parts in staging. */
  readonly imaginaryBytes: number;
  /** Batches of rows. */
  readonly batches: number;
  /** Tiles of eight columns; with nx even, the last column lies in the imaginary parts of the first. */
  readonly tiles: number;
  readonly tiledColumns: number;
  readonly tileBytes: number;
  readonly tilesAt: number;
  readonly bytes: number;
}

/** The layout for nx * ny real values and a number of threads; for its size see fft-kernel.ts. */
export function layOut(nx: number, ny: number, threads: number): FftLayout {
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
  const batches = Math.ceil(ny / batch);
  const tileBytes = 1024 * (Math.ceil((batches * batch * POINT) / 1024) | 1);
  const imaginaryBytes = 8 * batch * columns;
  const slot = CACHE_PAGE * Math.ceil((2 * imaginaryBytes) / CACHE_PAGE);
  const slotBytes = threads > 1 ? slot : 0;
  const layout = {
    nx,
    ny,
    even,
    columns,
    rowPlan,
    columnPlan,
    batch,
    jobAt: take(128),
    rowPlanAt: take(rowPlan.bytes.length),
    columnPlanAt: take(columnPlan.bytes.length),
    turnAt: take(16 * ((nx >> 2) + 1)),
    // A pass reads one buffer and writes another, in strides that may be powers of two: half a page
    // apart, they use different lines of the first cache.
    scratchAt: Array.from(
      { length: threads },
      () =>
        [
          take(points, 2048),
          take(points),
          take(chirped ? points : 0),
          take(points + POINT),
          take(CACHE_PAGE),
        ] as const,
    ),
    flagsAt: take(4 * Math.max(tiles, batches)),
    stagingAt: take(slot * (threads > 1 ? batches : 1)),
    slotBytes,
    imaginaryBytes,
    batches,
    tiles,
    tiledColumns,
    tileBytes,
    tilesAt: take(tiles * tileBytes),
  };
  return { ...layout, bytes: at };
}

/** The numbers of a job as kernel/units.ts reads them. */
export function jobNumbers(layout: FftLayout): number[] {
  return [
    layout.nx,
    layout.ny,
    layout.even ? 1 : 0,
    layout.columns,
    layout.tiledColumns,
    layout.batch,
    layout.rowPlanAt,
    layout.columnPlanAt,
    layout.turnAt,
    layout.stagingAt,
    layout.slotBytes,
    layout.imaginaryBytes,
    layout.tilesAt,
    layout.tileBytes,
  ];
}
