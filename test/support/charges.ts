import type { Grid2 } from '../../src/grid/grid.js';
import { makeGrid } from '../../src/grid/grid.js';

/** A point charge below the surface: strength [G Mm^2], position and depth [Mm] from the map's centre. */
export interface Charge {
  readonly strength: number;
  readonly x: number;
  readonly y: number;
  readonly depth: number;
}

const MU0 = 4e-7 * Math.PI;
/** 1 G Mm^2 = 1e-4 T x 1e12 m^2. */
const T_M2 = 1e8;

/**
 * Vertical field [G] of submerged charges on the plane, each pixel the mean over the pixel (closed
 * form: the flux of a charge through a rectangle), so that the map holds exactly the flux it covers.
 */
export function chargeField(charges: readonly Charge[], n: number, pixelMm: number): Grid2<'G'> {
  const data = new Float64Array(n * n);
  const corner = (u: number, v: number, d: number) =>
    Math.atan((u * v) / (d * Math.sqrt(u * u + v * v + d * d)));
  for (const { strength, x, y, depth } of charges) {
    for (let j = 0; j < n; j++) {
      const v0 = (j - n / 2) * pixelMm - y;
      for (let i = 0; i < n; i++) {
        const u0 = (i - n / 2) * pixelMm - x;
        const [u1, v1] = [u0 + pixelMm, v0 + pixelMm];
        const flux =
          corner(u1, v1, depth) -
          corner(u0, v1, depth) -
          corner(u1, v0, depth) +
          corner(u0, v0, depth);
        data[i + n * j] += (strength * flux) / pixelMm ** 2;
      }
    }
  }
  return makeGrid(data, n, n, 'G', pixelMm);
}

/**
 * Energy [J] of the field of charges in the half space above: (pi / mu0) sum of q_i q_j /
 * sqrt(L_ij^2 + (d_i + d_j)^2) with q in T m^2 (method of images; exact).
 */
export function chargeEnergy(charges: readonly Charge[]): number {
  let sum = 0;
  for (const a of charges) {
    for (const b of charges) {
      const distance = 1e6 * Math.hypot(a.x - b.x, a.y - b.y, a.depth + b.depth);
      sum += (a.strength * b.strength * T_M2 * T_M2) / distance;
    }
  }
  return (Math.PI / MU0) * sum;
}

/** Flux [Mx] of one polarity of an equal bipole: 4 q atan(L / 2d) (exact). */
export function bipoleFlux(strength: number, separation: number, depth: number): number {
  return 1e16 * 4 * strength * Math.atan(separation / (2 * depth));
}

/** Field [G] of charges at a point above the plane, x, y and height in Mm. */
export function chargeVector(
  charges: readonly Charge[],
  x: number,
  y: number,
  z: number,
): [number, number, number] {
  const sum: [number, number, number] = [0, 0, 0];
  for (const q of charges) {
    const d = [x - q.x, y - q.y, z + q.depth];
    const r3 = Math.hypot(...d) ** 3;
    for (let i = 0; i < 3; i++) sum[i] += (q.strength * d[i]) / r3;
  }
  return sum;
}

/** A bipole of 2.4e22 Mx unsigned with 1600 G peaks, in a 512-pixel map of half a megametre. */
export const BIPOLE: readonly Charge[] = [
  { strength: 1.6e5, x: -20, y: 0, depth: 10 },
  { strength: -1.6e5, x: 20, y: 0, depth: 10 },
];
