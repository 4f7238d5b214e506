// The compiled transforms: copies rows in and out of the module's memory and has its kernels run,
// by this thread alone or with others. Peak memory: one copy of the spectrum (16 bytes a mode),
// about 500 bytes for each point of the longer side (four times as much for a side with a prime
// factor above 83) and a batch of rows, in the module's memory. That is kept for the next transform
// up to 256 MiB and let go above. With threads there is a second copy of the spectrum, and the
// memory stays until setTransformThreads(1).
import { type FftLayout, jobNumbers, layOut } from './fft-layout.js';
import { setRootOfUnity } from './fft-plan.js';
import { runShared, sharedKernel, threadsFor } from './fft-threads.js';
import { type FftExports, kernelModule } from './kernel-loader.js';
import type { Spectrum2 } from './spectrum.js';

const PAGE = 65536;
const KEPT_BYTES = 256 * 2 ** 20;
const LARGEST_BYTES = 65535 * PAGE;

/** The phases of kernel/units.ts. */
const FORWARD_ROWS = 0;
const TILE = 1;
const READ_SPECTRUM = 2;
const WRITE_SPECTRUM = 3;
const INVERSE_ROWS = 4;

/** An instance of the module with its memory. */
export interface Kernel {
  readonly exports: FftExports;
  readonly memory: WebAssembly.Memory;
}

/** One phase of a transform: units of work, and what this thread copies before or after each. */
export interface Phase {
  readonly phase: number;
  readonly units: number;
  readonly copyIn?: (unit: number) => void;
  readonly copyOut?: (unit: number) => void;
}

let own: Kernel | undefined;

/** True where the compiled transforms can do a map of this size. */
export function kernelTakes(nx: number, ny: number): boolean {
  if (kernelModule() === null || 8 * nx * ny > LARGEST_BYTES) return false;
  return layOut(nx, ny, 1).bytes <= LARGEST_BYTES;
}

/** Forward transform of nx * ny real values, written to `out`. */
export function kernelRealFft2(values: Float64Array, nx: number, ny: number, out: Spectrum2): void {
  const { layout, kernel } = prepare(nx, ny, 0.5);
  const { batch, batches, tiles, columns } = layout;
  const { real, re, im } = slots(layout, kernel);
  run(kernel, layout, {
    phase: FORWARD_ROWS,
    units: batches,
    copyIn: (unit) => copyRows(values, real(unit), unit * batch, ny, nx),
  });
  run(kernel, layout, { phase: TILE, units: tiles });
  run(kernel, layout, {
    phase: READ_SPECTRUM,
    units: batches,
    copyOut: (unit) => {
      const count = Math.min(batch, ny - unit * batch) * columns;
      setStart(out.re, unit * batch * columns, re(unit), count);
      setStart(out.im, unit * batch * columns, im(unit), count);
    },
  });
  release();
}

/** Inverse of `kernelRealFft2`, written to `out`. */
export function kernelInverseRealFft2(spectrum: Spectrum2, out: Float64Array): void {
  const { nx, ny, columns } = spectrum;
  const { layout, kernel } = prepare(nx, ny, 1 / (nx * ny));
  const { batch, batches, tiles } = layout;
  const { real, re, im } = slots(layout, kernel);
  run(kernel, layout, {
    phase: WRITE_SPECTRUM,
    units: batches,
    copyIn: (unit) => {
      copyRows(spectrum.re, re(unit), unit * batch, ny, columns);
      copyRows(spectrum.im, im(unit), unit * batch, ny, columns);
    },
  });
  if (layout.even) {
    writeEdges(new Float64Array(kernel.memory.buffer, layout.tilesAt, 16 * ny), spectrum);
  }
  run(kernel, layout, { phase: TILE, units: tiles });
  run(kernel, layout, {
    phase: INVERSE_ROWS,
    units: batches,
    copyOut: (unit) => {
      const count = Math.min(batch, ny - unit * batch) * nx;
      setStart(out, unit * batch * nx, real(unit), count);
    },
  });
  release();
}

/** The staging of a unit, seen as rows of real values or as parts of rows of the spectrum. */
function slots(layout: FftLayout, { memory }: Kernel) {
  const { nx, batch, batches, columns, stagingAt, slotBytes, imaginaryBytes } = layout;
  // One view for all units where they share one place: views are not cheap to make.
  const views = (from: number, length: number) => {
    const count = slotBytes > 0 ? batches : 1;
    const each = Array.from(
      { length: count },
      (_, i) => new Float64Array(memory.buffer, stagingAt + from + i * slotBytes, length),
    );
    return (unit: number) => (count > 1 ? each[unit] : each[0]);
  };
  return {
    real: views(0, batch * nx),
    re: views(0, batch * columns),
    im: views(imaginaryBytes, batch * columns),
  };
}

/**
 * A batch of rows from row `y` on. Past the last row, zeros: rows of odd length are transformed in
 * pairs, and what an earlier batch left there would be mixed in.
 */
function copyRows(from: Float64Array, to: Float64Array, y: number, ny: number, length: number) {
  const end = y * length + to.length;
  to.set(from.subarray(y * length, end));
  if (end > ny * length) to.fill(0, (ny - y) * length);
}

function setStart(out: Float64Array, at: number, from: Float64Array, count: number): void {
  out.set(count === from.length ? from : from.subarray(0, count), at);
}

/**
 * Column 0 of the tiles as A + i B, parts swapped, where A and B are the columns kx = 0 and nx / 2,
 * each made the transform of a real column: what is not self-conjugate in them does not count.
 */
function writeEdges(tile: Float64Array, { ny, columns, re, im }: Spectrum2): void {
  for (let y = 0; y < ny; y++) {
    const a = columns * y;
    const c = columns * ((ny - y) % ny);
    const b = a + columns - 1;
    const d = c + columns - 1;
    tile[16 * y] = 0.5 * (im[a] - im[c] + re[b] + re[d]);
    tile[16 * y + 8] = 0.5 * (re[a] + re[c] - im[b] + im[d]);
  }
}

function run(kernel: Kernel, layout: FftLayout, work: Phase): void {
  if (kernel !== own) {
    runShared(kernel, layout, work);
    return;
  }
  const { runUnit } = kernel.exports;
  for (let unit = 0; unit < work.units; unit++) {
    work.copyIn?.(unit);
    runUnit(layout.jobAt, work.phase, unit);
    work.copyOut?.(unit);
  }
}

/** Makes room and writes what the kernels need to know; `gain` goes into the factors of the rows. */
function prepare(nx: number, ny: number, gain: number) {
  let threads = threadsFor(nx, ny);
  if (threads > 1 && layOut(nx, ny, threads).bytes > LARGEST_BYTES) threads = 1;
  const layout = layOut(nx, ny, threads);
  if (threads === 1) own ??= instantiate();
  const kernel = threads > 1 ? sharedKernel() : own!;
  const missing = layout.bytes - kernel.memory.buffer.byteLength;
  if (missing > 0) kernel.memory.grow(Math.ceil(missing / PAGE));
  const { buffer } = kernel.memory;
  const bytes = new Uint8Array(buffer);
  bytes.set(layout.rowPlan.bytes, layout.rowPlanAt);
  bytes.set(layout.columnPlan.bytes, layout.columnPlanAt);
  if (layout.even) {
    const turn = new Float64Array(buffer, layout.turnAt, 2 * ((nx >> 2) + 1));
    for (let k = 0; k <= nx >> 2; k++) setRootOfUnity(turn, 2 * k, k, nx, gain);
  }
  new Int32Array(buffer, layout.jobAt, 16).set(jobNumbers(layout));
  new Float64Array(buffer, layout.jobAt + 64, 1)[0] = gain;
  kernel.exports.setScratch(...layout.scratchAt[0]);
  return { layout, kernel };
}

function instantiate(): Kernel {
  const memory = new WebAssembly.Memory({ initial: 1, maximum: 65536 });
  const instance = new WebAssembly.Instance(kernelModule()!, { env: { memory } });
  return { exports: instance.exports as unknown as FftExports, memory };
}

/** A module's memory cannot shrink: a large one is let go. */
function release(): void {
  if (own && own.memory.buffer.byteLength > KEPT_BYTES) own = undefined;
}
