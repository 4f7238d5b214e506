// The compiled transforms: copies rows in and out of the module's memory and calls its kernels.
// Peak memory: one copy of the spectrum (16 bytes a mode), about 500 bytes for each point of the
// longer side (four times as much for a side with a prime factor above 61) and a batch of rows, in
// the module's memory. That is kept for the next transform up to 256 MiB and let go above.
import { type FftLayout, layOut } from './fft-layout.js';
import { setRootOfUnity } from './fft-plan.js';
import { type FftExports, kernelModule } from './kernel-loader.js';
import type { Spectrum2 } from './spectrum.js';

const PAGE = 65536;
const KEPT_BYTES = 256 * 2 ** 20;
const LARGEST_BYTES = 65535 * PAGE;

interface Kernel {
  readonly exports: FftExports;
  readonly memory: WebAssembly.Memory;
}

let current: Kernel | undefined;

/** True where the compiled transforms can do a map of this size. */
export function kernelTakes(nx: number, ny: number): boolean {
  if (kernelModule() === null || 8 * nx * ny > LARGEST_BYTES) return false;
  return layOut(nx, ny).bytes <= LARGEST_BYTES;
}

/** Forward transform of nx * ny real values, written to `out`. */
export function kernelRealFft2(values: Float64Array, nx: number, ny: number, out: Spectrum2): void {
  const layout = layOut(nx, ny);
  const kernel = prepare(layout, 0.5);
  forwardRows(kernel, layout, values);
  const { columnPlanAt, tilesAt, tileBytes, tiles } = layout;
  kernel.exports.transformTiles(columnPlanAt, tilesAt, tileBytes, 0, tiles);
  readSpectrum(kernel, layout, out);
  release();
}

/** Inverse of `kernelRealFft2`, written to `out`. */
export function kernelInverseRealFft2(spectrum: Spectrum2, out: Float64Array): void {
  const { nx, ny } = spectrum;
  const layout = layOut(nx, ny);
  const kernel = prepare(layout, 1 / (nx * ny));
  writeSpectrum(kernel, layout, spectrum);
  const { columnPlanAt, tilesAt, tileBytes, tiles } = layout;
  kernel.exports.transformTiles(columnPlanAt, tilesAt, tileBytes, 0, tiles);
  inverseRows(kernel, layout, out);
  release();
}

function forwardRows({ exports, memory }: Kernel, layout: FftLayout, values: Float64Array): void {
  const { nx, ny, even, batch, rowPlanAt, turnAt, stagingAt, tilesAt, tileBytes } = layout;
  const staging = new Float64Array(memory.buffer, stagingAt, batch * nx);
  for (let y = 0; y < ny; y += batch) {
    staging.set(values.subarray(y * nx, Math.min(y + batch, ny) * nx));
    // Rows of odd length are transformed in pairs: what an earlier batch left would be mixed in.
    if (y + batch > ny) staging.fill(0, (ny - y) * nx);
    const to = tilesAt + 128 * y;
    if (even) exports.forwardEvenRows(rowPlanAt, nx, stagingAt, turnAt, to, tileBytes);
    else exports.forwardOddRows(rowPlanAt, nx, stagingAt, to, tileBytes);
  }
}

function inverseRows({ exports, memory }: Kernel, layout: FftLayout, out: Float64Array): void {
  const { nx, ny, even, batch, rowPlanAt, turnAt, stagingAt, tilesAt, tileBytes } = layout;
  const gain = 1 / (nx * ny);
  const staging = new Float64Array(memory.buffer, stagingAt, batch * nx);
  for (let y = 0; y < ny; y += batch) {
    const from = tilesAt + 128 * y;
    if (even) exports.inverseEvenRows(rowPlanAt, nx, stagingAt, turnAt, gain, from, tileBytes);
    else exports.inverseOddRows(rowPlanAt, nx, stagingAt, gain, from, tileBytes);
    out.set(y + batch <= ny ? staging : staging.subarray(0, (ny - y) * nx), y * nx);
  }
}

/** The transformed tiles as rows of the half spectrum. */
function readSpectrum({ exports, memory }: Kernel, layout: FftLayout, out: Spectrum2): void {
  const { ny, even, columns, batch, stagingAt, imaginaryAt, tilesAt, tileBytes } = layout;
  const { tiledColumns } = layout;
  const pitch = 8 * columns;
  const re = new Float64Array(memory.buffer, stagingAt, batch * columns);
  const im = new Float64Array(memory.buffer, imaginaryAt, batch * columns);
  for (let y = 0; y < ny; y += batch) {
    const count = Math.min(batch, ny - y);
    const from = tilesAt + 128 * y;
    exports.readRows(from, tileBytes, count, tiledColumns, pitch, stagingAt, imaginaryAt);
    if (even) exports.readEdges(tilesAt, y, count, ny, columns - 1, pitch, stagingAt, imaginaryAt);
    out.re.set(count === batch ? re : re.subarray(0, count * columns), y * columns);
    out.im.set(count === batch ? im : im.subarray(0, count * columns), y * columns);
  }
}

/** Rows of the half spectrum as tiles, real and imaginary parts in each other's place. */
function writeSpectrum({ exports, memory }: Kernel, layout: FftLayout, spectrum: Spectrum2): void {
  const { ny, even, columns, batch, stagingAt, imaginaryAt, tilesAt, tileBytes } = layout;
  const { tiledColumns } = layout;
  const re = new Float64Array(memory.buffer, stagingAt, batch * columns);
  const im = new Float64Array(memory.buffer, imaginaryAt, batch * columns);
  for (let y = 0; y < ny; y += batch) {
    const end = Math.min(y + batch, ny) * columns;
    re.set(spectrum.re.subarray(y * columns, end));
    im.set(spectrum.im.subarray(y * columns, end));
    if (y + batch > ny) {
      re.fill(0, (ny - y) * columns);
      im.fill(0, (ny - y) * columns);
    }
    const to = tilesAt + 128 * y;
    exports.writeRowsSwapped(
      to,
      tileBytes,
      batch,
      tiledColumns,
      8 * columns,
      stagingAt,
      imaginaryAt,
    );
  }
  if (even) writeEdges(new Float64Array(memory.buffer, tilesAt, 16 * ny), spectrum);
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

/** Makes room and writes what the kernels need to know; `gain` goes into the factors of the rows. */
function prepare(layout: FftLayout, gain: number): Kernel {
  current ??= instantiate();
  const missing = layout.bytes - current.memory.buffer.byteLength;
  if (missing > 0) current.memory.grow(Math.ceil(missing / PAGE));
  const { buffer } = current.memory;
  const bytes = new Uint8Array(buffer);
  bytes.set(layout.rowPlan.bytes, layout.rowPlanAt);
  bytes.set(layout.columnPlan.bytes, layout.columnPlanAt);
  if (layout.even) {
    const turn = new Float64Array(buffer, layout.turnAt, 2 * ((layout.nx >> 2) + 1));
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
