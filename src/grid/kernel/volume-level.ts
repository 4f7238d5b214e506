// One level of a field volume: the modes of the surface field that still count there, damped with
// height, as the three components on the whole grid.
//   Bz = b exp(-l z), Bx = i gx Bz, By = i gy Bz,  l = sqrt(k^2 - alpha^2),
//   gx = (-kx l + ky alpha) / k^2,  gy = (-ky l - kx alpha) / k^2
// (Nakagawa & Raadu 1972; Alissandrakis 1981). Columns are transformed first, L at a time, to planes
// of tiles of L columns, one point for each row wanted; then rows, 2 L at a time: L as real and L as
// imaginary parts of the points.
import { gatherRows, storeRows } from './volume-rows';
import { IMAGINARY, POINT, synthesise } from './volume-passes';

/** The job as the host writes it (volume-layout.ts). */
// @ts-ignore: decorator
@unmanaged
class Job {
  alpha: f64;
  /** Factor of the spectrum: the transforms are not normalised. */
  scale: f64;
  /** The mean of the vertical field at all heights. */
  mean: f64;
  columns: u32;
  py: u32;
  /** Half spectrum, f64. */
  re: u32;
  im: u32;
  /** Wavenumbers of the columns and rows, f64, and the same with the Nyquist mode zero. */
  kx: u32;
  oddX: u32;
  ky: u32;
  oddY: u32;
  /** Samples wanted, and transform points from one to the next. */
  nx: u32;
  ny: u32;
  stride: u32;
  levels: u32;
  /** In the scratch space of a thread: bytes of the buffers of one sequence, of a plane. */
  sequenceBytes: u32;
  planeBytes: u32;
  /** Rows of a plane: ny, up to whole batches of rows. */
  rows: u32;
}

/** What one level needs. */
// @ts-ignore: decorator
@unmanaged
class Level {
  height: f64;
  /** Modes with k above this do not count. */
  largest: f64;
  planX: u32;
  planY: u32;
  /** Where its three components go. */
  x: u32;
  y: u32;
  z: u32;
  reserved: u32;
}

export function runLevel32(job: usize, level: u32, scratch: usize): void {
  runLevel<f32>(changetype<Job>(job), changetype<Level>(changetype<Job>(job).levels + level * offsetof<Level>()), scratch);
}

export function runLevel64(job: usize, level: u32, scratch: usize): void {
  runLevel<f64>(changetype<Job>(job), changetype<Level>(changetype<Job>(job).levels + level * offsetof<Level>()), scratch);
}

function runLevel<T>(job: Job, level: Level, scratch: usize): void {
  const lanes: u32 = <u32>(32 / sizeof<T>());
  const sequence: usize = job.sequenceBytes;
  const a = scratch;
  const b = scratch + sequence;
  const modes = scratch + 2 * sequence;
  const planes = scratch + 5 * sequence;
  const lastColumn = load<u32>(level.planX, 8);
  for (let column: u32 = 0; column <= lastColumn; column += lanes) {
    const count = min(lanes, lastColumn + 1 - column);
    for (let part: usize = 0; part < 3; part++) memory.fill(modes + part * sequence, 0, <usize>load<u32>(level.planY) * POINT);
    dampModes<T>(job, level, column, count, modes);
    for (let part: usize = 0; part < 3; part++) {
      const points = synthesise<T>(level.planY, modes + part * sequence, a, b);
      const tile = planes + part * job.planeBytes + <usize>(column / lanes) * job.rows * POINT;
      copyPoints(points, tile, job.ny, job.stride);
      // Rows past the last go through the transform with true ones, and must not be mixed into them.
      memory.fill(tile + <usize>job.ny * POINT, 0, <usize>(job.rows - job.ny) * POINT);
    }
  }
  writeComponent<T>(job, level, modes, a, b, planes, level.x);
  writeComponent<T>(job, level, modes, a, b, planes + job.planeBytes, level.y);
  writeComponent<T>(job, level, modes, a, b, planes + 2 * job.planeBytes, level.z);
}

/** The modes of `count` columns in the band of rows, as points of the three components. */
function dampModes<T>(job: Job, level: Level, column: u32, count: u32, modes: usize): void {
  const m = load<u32>(level.planY);
  const band = load<u32>(level.planY, 8);
  const square = level.largest * level.largest;
  for (let y: u32 = 0; y < job.py; y++) {
    if (y > band && y < job.py - band) y = job.py - band;
    if (y >= job.py) break;
    // Rows past the middle have negative frequencies: at the end of the sequence.
    const point = modes + <usize>(y + y > job.py ? m - (job.py - y) : y) * POINT;
    const ky = load<f64>(job.ky + 8 * y);
    const oddY = load<f64>(job.oddY + 8 * y);
    for (let lane: u32 = 0; lane < count; lane++) {
      const x = column + lane;
      const kx = load<f64>(job.kx + 8 * x);
      const k2 = kx * kx + ky * ky;
      if (k2 > square) break;
      const to = point + lane * sizeof<T>();
      if (k2 == 0) {
        store<T>(to + 2 * job.sequenceBytes, <T>job.mean);
        continue;
      }
      const oddX = load<f64>(job.oddX + 8 * x);
      const l = Math.sqrt(k2 - job.alpha * job.alpha);
      const damping = job.scale * Math.exp(-l * level.height);
      const at = 8 * (x + job.columns * y);
      const re = damping * load<f64>(job.re + at);
      const im = damping * load<f64>(job.im + at);
      const gx = (oddY * job.alpha - oddX * l) / k2;
      const gy = -(oddX * job.alpha + oddY * l) / k2;
      store<T>(to, <T>(-gx * im));
      store<T>(to + IMAGINARY, <T>(gx * re));
      store<T>(to + job.sequenceBytes, <T>(-gy * im));
      store<T>(to + job.sequenceBytes + IMAGINARY, <T>(gy * re));
      store<T>(to + 2 * job.sequenceBytes, <T>re);
      store<T>(to + 2 * job.sequenceBytes + IMAGINARY, <T>im);
    }
  }
}

/** Every `stride`-th point. */
function copyPoints(from: usize, to: usize, count: u32, stride: u32): void {
  if (stride == 1) {
    memory.copy(to, from, <usize>count * POINT);
    return;
  }
  const step = <usize>stride * POINT;
  for (const end = to + <usize>count * POINT; to < end; to += POINT) {
    v128.store(to, v128.load(from));
    v128.store(to, v128.load(from, 16), 16);
    v128.store(to, v128.load(from, 32), 32);
    v128.store(to, v128.load(from, 48), 48);
    from += step;
  }
}

function writeComponent<T>(job: Job, level: Level, modes: usize, a: usize, b: usize, plane: usize, out: usize): void {
  const rows: u32 = <u32>(64 / sizeof<T>());
  const tileBytes = <usize>job.rows * POINT;
  for (let row: u32 = 0; row < job.ny; row += rows) {
    gatherRows<T>(plane + <usize>row * POINT, tileBytes, level.planX, modes);
    const points = synthesise<T>(level.planX, modes, a, b);
    storeRows<T>(points, out + <usize>row * job.nx * sizeof<T>(), job.nx, min(rows, job.ny - row), job.stride);
  }
}
