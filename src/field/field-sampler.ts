import type { FieldVolume } from './volume.js';

/** The box of a volume [Mm], from its first to its last sample in each direction. */
export interface FieldBox {
  readonly widthMm: number;
  readonly depthMm: number;
  readonly bottomMm: number;
  readonly topMm: number;
}

/** Writes the field [G] at a place (x west, y north of the first sample; height; all in Mm) to `out`. */
export type FieldSampler = (x: number, y: number, height: number, out: Float64Array) => void;

/** The box in which a volume can be sampled. Throws RangeError for fewer than two samples a side. */
export function fieldBox({ nx, ny, stepMm, heightsMm }: FieldVolume): FieldBox {
  if (nx < 2 || ny < 2 || heightsMm.length < 2) {
    throw new RangeError(`${nx} x ${ny} x ${heightsMm.length} samples are no volume`);
  }
  return {
    widthMm: (nx - 1) * stepMm,
    depthMm: (ny - 1) * stepMm,
    bottomMm: heightsMm[0],
    topMm: heightsMm[heightsMm.length - 1],
  };
}

/**
 * Trilinear interpolation in a volume whose heights ascend; places outside take the field of the
 * nearest one inside. Keeps the level of the last call as a first guess, so neighbouring calls are cheap.
 */
export function fieldSampler(volume: FieldVolume): FieldSampler {
  const { nx, ny, stepMm, heightsMm: heights, x: bx, y: by, z: bz } = volume;
  fieldBox(volume);
  const perMm = 1 / stepMm;
  const plane = nx * ny;
  const lastLevel = heights.length - 2;
  const [lastX, lastY] = [nx - 2, ny - 2];
  let level = 0;
  return (x, y, height, out) => {
    while (level < lastLevel && height >= heights[level + 1]) level++;
    while (level > 0 && height < heights[level]) level--;
    const u = x * perMm;
    const v = y * perMm;
    const i = u <= 0 ? 0 : u >= lastX ? lastX : Math.floor(u);
    const j = v <= 0 ? 0 : v >= lastY ? lastY : Math.floor(v);
    const fx = unit(u - i);
    const fy = unit(v - j);
    const fz = unit((height - heights[level]) / (heights[level + 1] - heights[level]));
    const a = i + nx * j + plane * level;
    // Weights of the lower corners, then of the upper ones.
    const w11 = fx * fy;
    const w10 = fx - w11;
    const w01 = fy - w11;
    const w00 = 1 - fx - w01;
    out[0] = cell(bx, a, nx, plane, fz, w00, w10, w01, w11);
    out[1] = cell(by, a, nx, plane, fz, w00, w10, w01, w11);
    out[2] = cell(bz, a, nx, plane, fz, w00, w10, w01, w11);
  };
}

function unit(fraction: number): number {
  return fraction < 0 ? 0 : Math.min(fraction, 1);
}

function cell(
  b: Float32Array | Float64Array,
  a: number,
  nx: number,
  plane: number,
  fz: number,
  w00: number,
  w10: number,
  w01: number,
  w11: number,
): number {
  const low = w00 * b[a] + w10 * b[a + 1] + w01 * b[a + nx] + w11 * b[a + nx + 1];
  const c = a + plane;
  const high = w00 * b[c] + w10 * b[c + 1] + w01 * b[c + nx] + w11 * b[c + nx + 1];
  return low + fz * (high - low);
}
