// Sums over the modes of a padded map for energies in free space, by the compiled kernels
// (src/grid/kernel/open-sums.ts).
import { type VolumeExports, volumeModule } from './volume-module.js';
import { planWriter } from './volume-plan.js';

const PAGE = 65536;
/** What the compiler puts at the start of the memory. */
const STATIC_BYTES = 8192;
const POINT = 64;
/** A memory is kept for the next map of the same size up to this, as is the kernel's spectrum in it. */
const KEPT_BYTES = 128 * 2 ** 20;
const LARGEST_BYTES = 2 ** 31;

/** Over all modes: sum of G |F|^2, of G^2 |F|^2 and of G. */
export interface OpenSums {
  readonly energy: number;
  readonly slope: number;
  readonly trace: number;
}

interface Prepared {
  readonly key: string;
  readonly memory: WebAssembly.Memory;
  readonly exports: VolumeExports;
  readonly jobAt: number;
  readonly mapAt: number;
}

let kept: Prepared | undefined;

/**
 * With F the spectrum of an nx x ny map padded with zeros to px x py (each at least twice as many), and G
 * that of 1/r + 1/(12 r^3) in pixels, where `near` (n x n numbers, row-major) replaces it for offsets up
 * to n - 1 both ways. NaN counts as zero. Undefined where the compiled kernels cannot do it.
 */
export function openPlaneSums(
  values: Float64Array,
  nx: number,
  ny: number,
  px: number,
  py: number,
  near: Float64Array,
): OpenSums | undefined {
  if (values.length !== nx * ny || px < 2 * nx || py < 2 * ny) {
    throw new RangeError(
      `a map of ${nx} x ${ny} does not fit into ${px} x ${py} with as much beside`,
    );
  }
  const module = volumeModule();
  if (!module) return undefined;
  const key = `${nx} ${ny} ${px} ${py} ${near.join(' ')}`;
  const prepared = kept?.key === key ? kept : prepare(module, key, nx, ny, px, py, near);
  if (!prepared) return undefined;
  const { memory, exports, jobAt, mapAt } = prepared;
  const map = new Float64Array(memory.buffer, mapAt, nx * ny);
  for (let i = 0; i < map.length; i++) map[i] = Number.isNaN(values[i]) ? 0 : values[i];
  exports.openSums(jobAt);
  kept = memory.buffer.byteLength <= KEPT_BYTES ? prepared : undefined;
  const [energy, slope, trace] = new Float64Array(memory.buffer, jobAt + 64, 3);
  return { energy, slope, trace };
}

function prepare(
  module: WebAssembly.Module,
  key: string,
  nx: number,
  ny: number,
  px: number,
  py: number,
  near: Float64Array,
): Prepared | undefined {
  let at = STATIC_BYTES;
  const take = (bytes: number) => {
    const from = 64 * Math.ceil(at / 64);
    at = from + bytes;
    return from;
  };
  const jobAt = take(128);
  const nearAt = take(8 * near.length);
  const planAt = take(0);
  const writer = planWriter(planAt, 'double');
  const plans = [
    ...[writer.padded(px, nx), writer.padded(py, ny)],
    ...[writer.plan(px, px >> 1), writer.plan(py, py >> 1)],
  ];
  const planBytes = writer.bytes();
  take(planBytes.length);
  const sequenceBytes = POINT * Math.max(px, py);
  const scratchAt = take(3 * sequenceBytes);
  const mapAt = take(8 * nx * ny);
  const gainAt = take(POINT * ((px >> 4) + 1) * ((py >> 1) + 1));
  // Tiles of four columns of complex numbers, ny padded to its plan's length; of eight real columns first.
  const padded = py % 2 === 0 ? py / 2 : py;
  const tilesAt = take(POINT * Math.max(((px >> 3) + 1) * padded, ((px >> 4) + 1) * py));
  if (at > LARGEST_BYTES) return undefined;
  const pages = Math.ceil(at / PAGE);
  const memory = new WebAssembly.Memory({ initial: pages, maximum: pages, shared: true });
  const instance = new WebAssembly.Instance(module, { env: { memory } });
  const exports = instance.exports as unknown as VolumeExports;
  new Uint8Array(memory.buffer).set(planBytes, planAt);
  new Float64Array(memory.buffer, nearAt, near.length).set(near);
  new Uint32Array(memory.buffer, jobAt, 16).set([
    ...[nx, ny, px, py, ...plans],
    ...[mapAt, nearAt, Math.sqrt(near.length), gainAt, tilesAt, scratchAt, sequenceBytes],
  ]);
  exports.openGain(jobAt);
  return { key, memory, exports, jobAt, mapAt };
}
