import type { FieldReadings } from './ambiguous-field.js';

/**
 * The strong pixels of an ambiguous map with the reading each has at present, in arrays with a rim
 * of one missing pixel: element x + 1 + width (y + 1). Horizontal field and the vertical derivative
 * of Bz are in G and G per pixel.
 */
export interface Lattice {
  readonly width: number;
  readonly bx: Float64Array;
  readonly by: Float64Array;
  /** Transverse field of the present reading; its other reading is the negative. */
  readonly tx: Float64Array;
  readonly ty: Float64Array;
  readonly tz: Float64Array;
  readonly transverseG: Float64Array;
  readonly verticalGradient: Float64Array;
  /** 1 where a pixel takes part: known, and its transverse field reaches the threshold. */
  readonly used: Uint8Array;
  readonly pixels: Int32Array;
  /** Weight of the divergence against the current. */
  readonly lambda: number;
  /** The part of the functional that belongs to each pixel, kept in step with the readings. */
  readonly energy: Float64Array;
}

/** Lays out the pixels of at least `leastG` transverse field, read as `flips` says. */
export function makeLattice(
  readings: FieldReadings,
  flips: Uint8Array,
  verticalGradient: Float64Array,
  leastG: number,
  lambda: number,
): Lattice {
  const { nx, ny, along, transverse, transverseG, known } = readings;
  const width = nx + 2;
  const size = width * (ny + 2);
  const empty = () => new Float64Array(size);
  const used = new Uint8Array(size);
  const pixels: number[] = [];
  const [bx, by, tx, ty, tz] = [empty(), empty(), empty(), empty(), empty()];
  const [strength, gradient] = [empty(), empty()];
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      const p = x + nx * y;
      const q = x + 1 + width * (y + 1);
      if (!known[p] || transverseG[p] < leastG) continue;
      const sign = flips[p] ? -1 : 1;
      tx[q] = sign * transverse[0][p];
      ty[q] = sign * transverse[1][p];
      tz[q] = sign * transverse[2][p];
      bx[q] = along[0][p] + tx[q];
      by[q] = along[1][p] + ty[q];
      strength[q] = transverseG[p];
      gradient[q] = verticalGradient[p];
      used[q] = 1;
      pixels.push(q);
    }
  }
  const lattice: Lattice = {
    width,
    ...{ bx, by, tx, ty, tz, transverseG: strength, verticalGradient: gradient, used },
    pixels: Int32Array.from(pixels),
    lambda,
    energy: empty(),
  };
  for (const i of lattice.pixels) lattice.energy[i] = pixelEnergy(lattice, i);
  return lattice;
}

/**
 * Part of the functional at pixel `i` [G per pixel]: |Jz| + lambda |div B| summed over the four pairs
 * of one-sided derivatives along x and y that its used neighbours allow. One-sided, because central
 * differences do not see a pixel's own reading and let a chessboard of errors pass.
 */
export function pixelEnergy(lattice: Lattice, i: number): number {
  const { width, bx, by, verticalGradient, used, lambda } = lattice;
  if (!used[i]) return 0;
  const [x, y] = [bx[i], by[i]];
  const north = i + width;
  const south = i - width;
  const upX = bx[north] - x;
  const upY = by[north] - y + verticalGradient[i];
  const downX = x - bx[south];
  const downY = y - by[south] + verticalGradient[i];
  let sum = 0;
  if (used[i + 1]) {
    const alongX = bx[i + 1] - x;
    const alongY = by[i + 1] - y;
    if (used[north]) sum += Math.abs(alongY - upX) + lambda * Math.abs(alongX + upY);
    if (used[south]) sum += Math.abs(alongY - downX) + lambda * Math.abs(alongX + downY);
  }
  if (used[i - 1]) {
    const alongX = x - bx[i - 1];
    const alongY = y - by[i - 1];
    if (used[north]) sum += Math.abs(alongY - upX) + lambda * Math.abs(alongX + upY);
    if (used[south]) sum += Math.abs(alongY - downX) + lambda * Math.abs(alongX + downY);
  }
  return sum;
}

/** Turns the reading of pixel `i`; the energies are left for the caller to bring in step. */
export function turnPixel({ bx, by, tx, ty, tz }: Lattice, i: number): void {
  bx[i] -= 2 * tx[i];
  by[i] -= 2 * ty[i];
  tx[i] = -tx[i];
  ty[i] = -ty[i];
  tz[i] = -tz[i];
}

/** Number of derivative pairs in the functional: what to divide it by for a mean. */
export function countPairs({ used, pixels, width }: Lattice): number {
  let count = 0;
  for (const i of pixels)
    count += (used[i + 1] + used[i - 1]) * (used[i + width] + used[i - width]);
  return count;
}

/** The whole functional [G per pixel]. */
export function totalEnergy({ energy }: Lattice): number {
  let sum = 0;
  for (const value of energy) sum += value;
  return sum;
}

const STATE = ['bx', 'by', 'tx', 'ty', 'tz', 'energy'] as const;

/** The readings of a lattice, to return to. */
export type LatticeState = Readonly<Record<(typeof STATE)[number], Float64Array>>;

/** Copies the present readings. */
export function saveState(lattice: Lattice): LatticeState {
  const [bx, by, tx, ty, tz, energy] = STATE.map((name) => lattice[name].slice());
  return { bx, by, tx, ty, tz, energy };
}

/** Returns to saved readings. */
export function restoreState(lattice: Lattice, state: LatticeState): void {
  for (const name of STATE) lattice[name].set(state[name]);
}
