// A two-dimensional transform as independent units of work, which any thread may do in any order
// within a phase. The job they belong to lies in memory as the host wrote it (fft-layout.ts).
import { forwardEvenRows, inverseEvenRows } from './even-rows';
import { forwardOddRows, inverseOddRows } from './odd-rows';
import { POINT } from './scratch';
import { readEdges, readRows, writeRowsSwapped } from './tiles';
import { transform } from './transform';

/** The numbers of a job, in the order of `jobNumbers` in fft-layout.ts; then `gain`, at 64. */
// @ts-ignore: decorator
@unmanaged
class Job {
  nx: u32;
  ny: u32;
  even: u32;
  columns: u32;
  tiledColumns: u32;
  batch: u32;
  rowPlan: u32;
  columnPlan: u32;
  turn: u32;
  staging: u32;
  /** From the staging of one unit to that of the next: 0 where units share it. */
  slotBytes: u32;
  /** From the real parts in staging to the imaginary parts. */
  imaginary: u32;
  tiles: u32;
  tileBytes: u32;
  reserved0: u32;
  reserved1: u32;
  gain: f64;
}

/** Rows of real values in staging to the tiles. */
const FORWARD_ROWS = 0;
/** One tile, down its columns. */
const TILE = 1;
/** Transformed tiles to rows of the spectrum in staging. */
const READ_SPECTRUM = 2;
/** Rows of the spectrum in staging to tiles, parts swapped. */
const WRITE_SPECTRUM = 3;
/** Tiles to rows of real values in staging. */
const INVERSE_ROWS = 4;

export function runUnit(at: usize, phase: i32, unit: u32): void {
  const job = changetype<Job>(at);
  if (phase == TILE) {
    transform(job.columnPlan, job.tiles + unit * job.tileBytes);
    return;
  }
  const y = unit * job.batch;
  const tiles = job.tiles + y * <u32>POINT;
  const staging = job.staging + unit * job.slotBytes;
  const imaginary = staging + job.imaginary;
  const pitch = 8 * job.columns;
  if (phase == FORWARD_ROWS) {
    if (job.even) forwardEvenRows(job.rowPlan, job.nx, staging, job.turn, tiles, job.tileBytes);
    else forwardOddRows(job.rowPlan, job.nx, staging, tiles, job.tileBytes);
  } else if (phase == INVERSE_ROWS) {
    if (job.even) inverseEvenRows(job.rowPlan, job.nx, staging, job.turn, job.gain, tiles, job.tileBytes);
    else inverseOddRows(job.rowPlan, job.nx, staging, job.gain, tiles, job.tileBytes);
  } else if (phase == READ_SPECTRUM) {
    const count = min(job.batch, job.ny - y);
    readRows(tiles, job.tileBytes, count, job.tiledColumns, pitch, staging, imaginary);
    if (job.even) readEdges(job.tiles, y, count, job.ny, job.columns - 1, pitch, staging, imaginary);
  } else if (phase == WRITE_SPECTRUM) {
    writeRowsSwapped(tiles, job.tileBytes, job.batch, job.tiledColumns, pitch, staging, imaginary);
  }
}
