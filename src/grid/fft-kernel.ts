// The compiled transforms: lays out the memory of the WebAssembly module, copies rows in and out
// and calls its kernels. Peak memory: one copy of the spectrum (16 bytes a mode) plus 400 bytes
// for each point of the longer side (for a side with a prime factor above 61, four times as much),
// within the module's memory, which is kept for the next transform up to 256 MiB.
import { type FftPlan, fftPlan, setRootOfUnity } from './fft-plan.js';
import { type FftExports, kernelModule } from './kernel-loader.js';
import type { Spectrum2 } from './spectrum.js';

const PAGE = 65536;
const KEPT_BYTES = 256 * 2 ** 20;
const LARGEST_BYTES = 65535 * PAGE;

/** Where things lie in the module's memory, in bytes. */
interface Layout {
  readonly nx: number;
  readonly ny: number;
  readonly columns: number;
  readonly rowPlan: FftPlan;
  readonly columnPlan: FftPlan;
  /** Rows the row kernel takes at once. */
  readonly batch: number;
  readonly rowPlanAt: number;
  readonly columnPlanAt: number;
  readonly turnAt: number;
  readonly scratchAt: readonly [a: number, b: number, c: number, odd: number];
  readonly valuesAt: number;
  readonly reAt: number;
  readonly imAt: number;
  readonly bytes: number;
}

interface Kernel {
  readonly exports: FftExports;
  readonly memory: WebAssembly.Memory;
}

let current: Kernel | undefined;

/** True where the compiled transforms can do a map of this size. */
export function kernelTakes(nx: number, ny: number): boolean {
  return (
    kernelModule() !== null && 16 * nx * ny < LARGEST_BYTES && layOut(nx, ny).bytes <= LARGEST_BYTES
  );
}

/** Forward transform of nx * ny real values, written to `out`. */
export function kernelRealFft2(values: Float64Array, nx: number, ny: number, out: Spectrum2): void {
  const layout = layOut(nx, ny);
  const { exports, memory } = prepare(layout, 0.5);
  const { columns, batch, rowPlanAt, turnAt, valuesAt, reAt, imAt } = layout;
  const stride = 8 * columns;
  const rows = new Float64Array(memory.buffer, valuesAt, batch * nx);
  for (let y = 0; y < ny; y += batch) {
    const count = Math.min(batch, ny - y);
    rows.set(values.subarray(y * nx, (y + count) * nx));
    const re = reAt + y * stride;
    const im = imAt + y * stride;
    if (nx % 2 === 0) exports.forwardEvenRows(rowPlanAt, nx, valuesAt, turnAt, re, im, stride);
    else exports.forwardOddRows(rowPlanAt, nx, valuesAt, re, im, stride, count);
  }
  exports.transformColumns(layout.columnPlanAt, reAt, imAt, stride, ny, 0, columns, 0);
  out.re.set(new Float64Array(memory.buffer, reAt, columns * ny));
  out.im.set(new Float64Array(memory.buffer, imAt, columns * ny));
  release();
}

/** Inverse of `kernelRealFft2`, written to `out`. */
export function kernelInverseRealFft2(spectrum: Spectrum2, out: Float64Array): void {
  const { nx, ny } = spectrum;
  const layout = layOut(nx, ny);
  const gain = 1 / (nx * ny);
  const { exports, memory } = prepare(layout, gain);
  const { columns, batch, rowPlanAt, turnAt, valuesAt, reAt, imAt } = layout;
  const stride = 8 * columns;
  new Float64Array(memory.buffer, reAt, columns * ny).set(spectrum.re);
  new Float64Array(memory.buffer, imAt, columns * ny).set(spectrum.im);
  exports.transformColumns(layout.columnPlanAt, reAt, imAt, stride, ny, 0, columns, 1);
  const rows = new Float64Array(memory.buffer, valuesAt, batch * nx);
  for (let y = 0; y < ny; y += batch) {
    const count = Math.min(batch, ny - y);
    const re = reAt + y * stride;
    const im = imAt + y * stride;
    if (nx % 2 === 0)
      exports.inverseEvenRows(rowPlanAt, nx, valuesAt, turnAt, gain, re, im, stride);
    else exports.inverseOddRows(rowPlanAt, nx, valuesAt, gain, re, im, stride, count);
    out.set(count === batch ? rows : rows.subarray(0, count * nx), y * nx);
  }
  release();
}

function layOut(nx: number, ny: number): Layout {
  const even = nx % 2 === 0;
  const columns = (nx >> 1) + 1;
  const rowPlan = fftPlan(even ? nx / 2 : nx);
  const columnPlan = fftPlan(ny);
  const batch = even ? 8 : 16;
  let at = 1024;
  const take = (bytes: number) => {
    const from = at;
    at = Math.ceil((at + bytes) / 64) * 64;
    return from;
  };
  const points = Math.max(rowPlan.points, columnPlan.points) + 1;
  const plane = 8 * columns * (ny + batch);
  const layout = {
    nx,
    ny,
    columns,
    rowPlan,
    columnPlan,
    batch,
    rowPlanAt: take(rowPlan.bytes.length),
    columnPlanAt: take(columnPlan.bytes.length),
    turnAt: take(16 * ((nx >> 2) + 2)),
    scratchAt: [take(128 * points), take(128 * points), take(128 * points), take(4096)] as const,
    valuesAt: take(8 * batch * nx),
    // Whole batches of rows are written: the last may pass the end of the map.
    reAt: take(plane),
    imAt: take(plane),
  };
  return { ...layout, bytes: at };
}

/** Makes room and writes what the kernels need to know; `gain` goes into the factors of the rows. */
function prepare(layout: Layout, gain: number): Kernel {
  current ??= instantiate();
  const missing = layout.bytes - current.memory.buffer.byteLength;
  if (missing > 0) current.memory.grow(Math.ceil(missing / PAGE));
  const { buffer } = current.memory;
  const bytes = new Uint8Array(buffer);
  bytes.set(layout.rowPlan.bytes, layout.rowPlanAt);
  bytes.set(layout.columnPlan.bytes, layout.columnPlanAt);
  if (layout.nx % 2 === 0) {
    const turn = new Float64Array(buffer, layout.turnAt, 2 * ((layout.nx >> 2) + 2));
    for (let k = 0; k <= layout.nx >> 2; k++) setRootOfUnity(turn, 2 * k, k, layout.nx, gain);
  }
  current.exports.setScratch(...layout.scratchAt);
  return current;
}

function instantiate(): Kernel {
  const memory = new WebAssembly.Memory({ initial: 1, maximum: 65536 });
  const instance = new WebAssembly.Instance(kernelModule()!, { env: { memory } });
  return { exports: instance.exports as unknown as FftExports, memory };
}

/** A module's memory cannot shrink: a large one is let go. */
function release(): void {
  if (current && current.memory.buffer.byteLength > KEPT_BYTES) current = undefined;
}
