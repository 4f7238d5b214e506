// Sums over the modes of a map with nothing beyond its sides, for energies in free space: with F the
// spectrum of the map padded to px x py and G that of the mean inverse distance of pixels (real and
// even), over all modes sum of G |F|^2, of G^2 |F|^2 and of G. Neither spectrum is ever written out
// whole: both are made in tiles of columns, G only for one quarter of the plane.
import { IMAGINARY, POINT, synthesise } from './volume-passes';

/** The job as the host writes it (src/grid/open-sums.ts). */
// @ts-ignore: decorator
@unmanaged
class OpenJob {
  nx: u32;
  ny: u32;
  px: u32;
  py: u32;
  /** Plans that pad nx and ny points with zeros to px and py, and plans of px and py points. */
  padX: u32;
  padY: u32;
  planX: u32;
  planY: u32;
  /** nx * ny numbers. */
  map: u32;
  /** Mean inverse distances of near pixels, reach * reach numbers. */
  near: u32;
  reach: u32;
  /** G: tiles of eight columns, a point of eight numbers for each row 0 .. py / 2. */
  gain: u32;
  /** Tiles of columns: four complex numbers a point for the map, eight real ones for the kernel. */
  tiles: u32;
  /** Three sequences. */
  scratch: u32;
  sequenceBytes: u32;
  reserved: u32;
  energy: f64;
  slope: f64;
  trace: f64;
}

/** Fills `gain` and `trace`. */
export function openGain(at: usize): void {
  const job = changetype<OpenJob>(at);
  const a: usize = job.scratch;
  const b = a + job.sequenceBytes;
  const modes = b + job.sequenceBytes;
  const halfX = job.px >> 1;
  const halfY = job.py >> 1;
  const tileBytes = <usize>job.py * POINT;
  // Columns past the last share a transform with true ones: nothing of old may stand there.
  memory.fill(<usize>job.tiles + <usize>(halfX >> 3) * tileBytes, 0, tileBytes);
  for (let y: u32 = 0; y <= halfY; y += 8) {
    for (let x: u32 = 0; x <= halfX; x++) {
      const to = modes + <usize>x * POINT;
      inverseDistances(job, x, y, to);
      if (x > 0) copyPoint(to, modes + <usize>(job.px - x) * POINT);
    }
    // Transforms of even rows are real: real parts belong to rows y .. y + 3, imaginary ones to the next.
    const points = synthesise<f64>(job.planX, modes, a, b);
    const count: u32 = min<u32>(8, halfY + 1 - y);
    for (let k: u32 = 0; k <= halfX; k++) {
      const from = points + <usize>k * POINT;
      let to = <usize>job.tiles + <usize>(k >> 3) * tileBytes + <usize>y * POINT + 8 * <usize>(k & 7);
      for (let row: u32 = 0; row < count; row++) {
        store<f64>(to, load<f64>(from + 8 * <usize>row));
        to += POINT;
      }
    }
  }
  let trace: f64 = 0;
  const gainBytes = <usize>(halfY + 1) * POINT;
  for (let tile: u32 = 0; tile <= halfX >> 3; tile++) {
    const column = <usize>job.tiles + <usize>tile * tileBytes;
    for (let y: u32 = 1; y <= halfY; y++) copyPoint(column + <usize>y * POINT, column + <usize>(job.py - y) * POINT);
    const points = synthesise<f64>(job.planY, column, a, b);
    const gain = <usize>job.gain + <usize>tile * gainBytes;
    memory.copy(gain, points, gainBytes);
    for (let lane: u32 = 0; lane < 8; lane++) {
      const weight = columnWeight(8 * tile + lane, job.px);
      if (weight == 0) break;
      for (let y: u32 = 0; y <= halfY; y++) {
        const g = load<f64>(gain + <usize>y * POINT + 8 * <usize>lane);
        trace += weight * rowWeight(y, job.py) * g;
      }
    }
  }
  job.trace = trace;
}

/** How often a column of half a spectrum occurs in the whole: 0 past the last. */
function columnWeight(column: u32, px: u32): f64 {
  if (column + column > px) return 0;
  return column == 0 || column + column == px ? 1 : 2;
}

function rowWeight(row: u32, py: u32): f64 {
  return row == 0 || row + row == py ? 1 : 2;
}

/** The kernel at column x in eight rows from y on. */
function inverseDistances(job: OpenJob, x: u32, y: u32, to: usize): void {
  const xx = f64x2.splat(<f64>x * <f64>x);
  const one = f64x2.splat(1);
  const twelfth = f64x2.splat(1.0 / 12.0);
  for (let i: u32 = 0; i < 8; i += 2) {
    const row = <f64>(y + i);
    const rows = f64x2.replace_lane(f64x2.splat(row), 1, row + 1);
    const square = f64x2.add(xx, f64x2.mul(rows, rows));
    const inverse = f64x2.div(one, f64x2.sqrt(square));
    const correction = f64x2.mul(twelfth, f64x2.mul(inverse, inverse));
    v128.store(to + 8 * <usize>i, f64x2.add(inverse, f64x2.mul(inverse, correction)));
  }
  if (x >= job.reach || y >= job.reach) return;
  for (let i: u32 = 0; i < 8 && y + i < job.reach; i++) {
    store<f64>(to + 8 * <usize>i, load<f64>(job.near + 8 * (x + job.reach * (y + i))));
  }
}

function copyPoint(from: usize, to: usize): void {
  v128.store(to, v128.load(from));
  v128.store(to, v128.load(from, 16), 16);
  v128.store(to, v128.load(from, 32), 32);
  v128.store(to, v128.load(from, 48), 48);
}

/** Fills `energy` and `slope` from the map and the gain. */
export function openSums(at: usize): void {
  const job = changetype<OpenJob>(at);
  const a: usize = job.scratch;
  const b = a + job.sequenceBytes;
  const modes = b + job.sequenceBytes;
  // A tile is as long as the sequence that the padding plan starts from; its end stays zero.
  const lengthY: usize = load<u32>(job.padY);
  const tileBytes = lengthY * POINT;
  const tiles: u32 = (job.px >> 3) + 1;
  for (let tile: u32 = 0; tile < tiles; tile++) {
    memory.fill(<usize>job.tiles + <usize>tile * tileBytes + <usize>job.ny * POINT, 0, (lengthY - <usize>job.ny) * POINT);
  }
  const lengthX: usize = load<u32>(job.padX);
  for (let y: u32 = 0; y < job.ny; y += 8) {
    const count: u32 = min<u32>(8, job.ny - y);
    gatherMap(<usize>job.map + 8 * <usize>job.nx * <usize>y, job.nx, count, modes);
    memory.fill(modes + <usize>job.nx * POINT, 0, (lengthX - <usize>job.nx) * POINT);
    const points = synthesise<f64>(job.padX, modes, a, b);
    splitRows(job, points, y, count, tileBytes);
  }
  let energy: f64 = 0;
  let slope: f64 = 0;
  const gainBytes = <usize>((job.py >> 1) + 1) * POINT;
  for (let tile: u32 = 0; tile < tiles; tile++) {
    const points = synthesise<f64>(job.padY, <usize>job.tiles + <usize>tile * tileBytes, a, b);
    const gain = <usize>job.gain + <usize>(tile >> 1) * gainBytes + 32 * <usize>(tile & 1);
    for (let pair: u32 = 0; pair < 2; pair++) {
      let sum = f64x2.splat(0);
      let square = f64x2.splat(0);
      for (let y: u32 = 0; y < job.py; y++) {
        const from = points + <usize>y * POINT + 16 * <usize>pair;
        const re = v128.load(from);
        const im = v128.load(from, IMAGINARY);
        const row = y + y > job.py ? job.py - y : y;
        const g = v128.load(gain + <usize>row * POINT + 16 * <usize>pair);
        const part = f64x2.mul(g, f64x2.add(f64x2.mul(re, re), f64x2.mul(im, im)));
        sum = f64x2.add(sum, part);
        square = f64x2.add(square, f64x2.mul(g, part));
      }
      const column = 4 * tile + 2 * pair;
      const w0 = columnWeight(column, job.px);
      const w1 = columnWeight(column + 1, job.px);
      if (w0 > 0) energy += w0 * f64x2.extract_lane(sum, 0);
      if (w1 > 0) energy += w1 * f64x2.extract_lane(sum, 1);
      if (w0 > 0) slope += w0 * f64x2.extract_lane(square, 0);
      if (w1 > 0) slope += w1 * f64x2.extract_lane(square, 1);
    }
  }
  job.energy = energy;
  job.slope = slope;
}

/** Rows of the map to points: four rows as real parts, the next four as imaginary parts. */
function gatherMap(from: usize, nx: u32, count: u32, to: usize): void {
  const pitch: usize = <usize>nx << 3;
  for (let x: u32 = 0; x < nx; x++) {
    let value = from + 8 * <usize>x;
    for (let row: u32 = 0; row < 8; row++) {
      store<f64>(to + 8 * <usize>row, row < count ? load<f64>(value) : 0);
      value += pitch;
    }
    to += POINT;
  }
}

/**
 * With A and B the transforms of two real rows and Z = A + i B, A(k) = (Z(k) + conj Z(-k)) / 2 and
 * B(k) = (Z(k) - conj Z(-k)) / 2i; to tiles of four columns.
 */
function splitRows(job: OpenJob, points: usize, y: u32, count: u32, tileBytes: usize): void {
  const half = f64x2.splat(0.5);
  const last = job.px >> 1;
  for (let k: u32 = 0; k <= last; k++) {
    const near = points + <usize>k * POINT;
    const far = k == 0 ? points : points + <usize>(job.px - k) * POINT;
    const to = <usize>job.tiles + <usize>(k >> 2) * tileBytes + <usize>y * POINT + 8 * <usize>(k & 3);
    for (let pair: u32 = 0; pair < 2; pair++) {
      const zr = v128.load(near + 16 * <usize>pair);
      const zi = v128.load(near + 16 * <usize>pair, IMAGINARY);
      const yr = v128.load(far + 16 * <usize>pair);
      const yi = v128.load(far + 16 * <usize>pair, IMAGINARY);
      const row = 2 * pair;
      storeTwo(to, row, count, f64x2.mul(half, f64x2.add(zr, yr)), f64x2.mul(half, f64x2.sub(zi, yi)));
      storeTwo(to, row + 4, count, f64x2.mul(half, f64x2.add(zi, yi)), f64x2.mul(half, f64x2.sub(yr, zr)));
    }
  }
}

// @ts-ignore: decorator
@inline
function storeTwo(tile: usize, row: u32, count: u32, re: v128, im: v128): void {
  if (row >= count) return;
  const to = tile + <usize>row * POINT;
  v128.store_lane<f64>(to, re, 0);
  v128.store_lane<f64>(to, im, 0, IMAGINARY);
  if (row + 1 >= count) return;
  v128.store_lane<f64>(to, re, 1, POINT);
  v128.store_lane<f64>(to, im, 1, POINT + IMAGINARY);
}
