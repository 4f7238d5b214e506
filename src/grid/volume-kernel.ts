// Field volumes by the compiled kernels: lays out one shared memory that holds the spectrum, the
// plans, scratch space for each thread and the result, and has the threads fill it.
import type { Spectrum2 } from './spectrum.js';
import { largestWavenumbers, type ModeVolumeJob } from './volume-modes.js';
import { volumeModule } from './volume-module.js';
import { bandLength, type Precision, planWriter } from './volume-plan.js';
import { runLevels, volumeThreads } from './volume-threads.js';
import { derivativeWavenumbers, wavenumbers } from './wavenumbers.js';

const PAGE = 65536;
/** What the compiler puts at the start of the memory, such as the table of its exponential: 2 KiB. */
const STATIC_BYTES = 8192;
const LARGEST_BYTES = 65535 * PAGE;
/** Bytes of one point (src/grid/kernel/volume-passes.ts), and of a level in the job. */
const POINT = 64;
const LEVEL = 40;
/** Fewer samples than this are left to one thread: a helper would come too late. */
const LEAST_SAMPLES = 2 ** 20;

/** The three components, each a run of levels of rows of samples. */
export interface ModeVolume<A extends Float32Array | Float64Array> {
  readonly x: A;
  readonly y: A;
  readonly z: A;
}

interface Layout {
  readonly jobAt: number;
  readonly levelsAt: number;
  readonly wavesAt: readonly number[];
  readonly reAt: number;
  readonly imAt: number;
  readonly planAt: number;
  readonly planBytes: Uint8Array;
  readonly scratch: readonly number[];
  readonly sequenceBytes: number;
  readonly planeBytes: number;
  readonly rows: number;
  readonly resultAt: number;
  readonly bytes: number;
}

/** Largest frequencies and plans of one level. */
interface LevelPlan {
  readonly largest: number;
  readonly x: number;
  readonly y: number;
}

/** True where the compiled kernels can be had. */
export function volumeKernelPresent(): boolean {
  return volumeModule() !== null;
}

/**
 * The field of a job; see `modeVolume`. Throws RangeError where all of it does not fit into the
 * 4 GiB that the kernels can address.
 */
export function kernelVolume(
  job: ModeVolumeJob,
  precision: Precision,
  threads: number | undefined,
): ModeVolume<Float32Array> | ModeVolume<Float64Array> {
  const count = job.heights.length;
  const samples = job.nx * job.ny * count;
  const wanted = threads ?? (samples < LEAST_SAMPLES ? 1 : volumeThreads());
  const used = Math.max(1, Math.min(wanted, count));
  const { plans, layout } = layOut(job, precision, used);
  if (layout.bytes > LARGEST_BYTES) {
    throw new RangeError(
      `a volume of ${job.nx} x ${job.ny} x ${count} takes ${(layout.bytes / 2 ** 30).toFixed(1)} GiB, not up to 4`,
    );
  }
  const pages = Math.ceil(layout.bytes / PAGE);
  const memory = new WebAssembly.Memory({ initial: pages, maximum: pages, shared: true });
  writeJob(job, precision, layout, plans, memory.buffer);
  runLevels({
    module: volumeModule()!,
    memory,
    name: precision === 'single' ? 'runLevel32' : 'runLevel64',
    job: layout.jobAt,
    levels: count,
    scratch: layout.scratch,
  });
  const view = <A>(make: new (buffer: ArrayBufferLike, at: number, length: number) => A) => {
    const bytes = (precision === 'single' ? 4 : 8) * samples;
    const part = (i: number) => new make(memory.buffer, layout.resultAt + i * bytes, samples);
    return { x: part(0), y: part(1), z: part(2) };
  };
  return precision === 'single' ? view(Float32Array) : view(Float64Array);
}

function layOut(job: ModeVolumeJob, precision: Precision, threads: number) {
  const { nx: px, ny: py, columns, re } = job.spectrum;
  const numberBytes = precision === 'single' ? 4 : 8;
  const count = job.heights.length;
  let at = STATIC_BYTES;
  const take = (bytes: number) => {
    const from = 64 * Math.ceil(at / 64);
    at = from + bytes;
    return from;
  };
  const jobAt = take(128);
  const levelsAt = take(LEVEL * count);
  const wavesAt = [columns, columns, py, py].map((length) => take(8 * length));
  const [reAt, imAt] = [take(8 * re.length), take(8 * re.length)];
  const planAt = take(0);
  const writer = planWriter(planAt, precision);
  let widest = 0;
  const stepX = (2 * Math.PI) / (px * job.pixel);
  const stepY = (2 * Math.PI) / (py * job.pixel);
  const plans = Array.from(largestWavenumbers(job), (largest): LevelPlan => {
    const bandX = Math.min(px >> 1, Math.floor(largest / stepX));
    const bandY = Math.min(py >> 1, Math.floor(largest / stepY));
    widest = Math.max(widest, bandX + 1);
    return { largest, x: writer.plan(px, bandX), y: writer.plan(py, bandY) };
  });
  const planBytes = writer.bytes();
  take(planBytes.length);
  // A point more than the longest sequence: see gatherRows.
  const sequenceBytes = POINT * (Math.max(px, py) + 1);
  const tiles = Math.ceil(widest / (32 / numberBytes));
  const batch = 64 / numberBytes;
  const rows = batch * Math.ceil(job.ny / batch);
  const planeBytes = POINT * tiles * rows;
  const scratch = Array.from({ length: threads }, () => take(5 * sequenceBytes + 3 * planeBytes));
  const resultAt = take(3 * numberBytes * job.nx * job.ny * count);
  const layout: Layout = {
    ...{ jobAt, levelsAt, wavesAt, reAt, imAt, planAt, planBytes },
    ...{ scratch, sequenceBytes, planeBytes, rows, resultAt, bytes: at },
  };
  return { plans, layout };
}

/** Writes all that the kernels read (class Job and class Level of volume-level.ts). */
function writeJob(
  job: ModeVolumeJob,
  precision: Precision,
  layout: Layout,
  plans: readonly LevelPlan[],
  buffer: ArrayBufferLike,
): void {
  const { spectrum, pixel, heights, nx, ny } = job;
  const { nx: px, ny: py, columns } = spectrum;
  const { wavesAt, reAt, imAt } = layout;
  const waves = [
    wavenumbers(px, pixel).subarray(0, columns),
    derivativeWavenumbers(px, pixel).subarray(0, columns),
    wavenumbers(py, pixel),
    derivativeWavenumbers(py, pixel),
  ];
  waves.forEach((values, i) => {
    new Float64Array(buffer, wavesAt[i], values.length).set(values);
  });
  writeSpectrum(spectrum, buffer, reAt, imAt);
  new Uint8Array(buffer).set(layout.planBytes, layout.planAt);
  new Float64Array(buffer, layout.jobAt, 3).set([job.alpha, 1 / (px * py), job.mean]);
  const { levelsAt, sequenceBytes, planeBytes, rows } = layout;
  new Uint32Array(buffer, layout.jobAt + 24, 15).set([
    ...[columns, py, reAt, imAt, ...wavesAt],
    ...[nx, ny, job.stride, levelsAt, sequenceBytes, planeBytes, rows],
  ]);
  const levelBytes = (precision === 'single' ? 4 : 8) * nx * ny;
  plans.forEach(({ largest, x, y }, i) => {
    new Float64Array(buffer, levelsAt + LEVEL * i, 2).set([heights[i], largest]);
    const out = [0, 1, 2].map((part) => layout.resultAt + levelBytes * (part * plans.length + i));
    new Uint32Array(buffer, levelsAt + LEVEL * i + 16, 5).set([x, y, ...out]);
  });
}

function writeSpectrum(spectrum: Spectrum2, buffer: ArrayBufferLike, reAt: number, imAt: number) {
  new Float64Array(buffer, reAt, spectrum.re.length).set(spectrum.re);
  new Float64Array(buffer, imAt, spectrum.im.length).set(spectrum.im);
}

/** Length of the passes along x at each height: how much of the transforms is left. For tests. */
export function passLengths(job: ModeVolumeJob): number[] {
  const step = (2 * Math.PI) / (job.spectrum.nx * job.pixel);
  return Array.from(largestWavenumbers(job), (largest) =>
    bandLength(job.spectrum.nx, Math.min(job.spectrum.nx >> 1, Math.floor(largest / step))),
  );
}
