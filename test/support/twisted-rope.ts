import { makeVectorField, type VectorField } from '../../src/field/vector-field.js';
import { type Charge, chargeVector } from './charges.js';

/**
 * A twisted tube bent into a ring that stands upright in the surface, after the analytic field that
 * Fan & Gibson 2003, ApJ 589, L105 let rise: with R the radius of the ring, a that of the tube and
 * s the distance from its axis, B = curl(A phi / w) + T phi, A = q a^2 Bt exp(-s^2/a^2) / 2 (times
 * R), T = R Bt exp(-s^2/a^2) / w, in cylindrical coordinates (w, phi) about the ring's own axis.
 * Free of divergence by construction; its current is all inside the tube. Lengths in Mm.
 */
export interface TwistedRope {
  /** Field on the tube's axis [G], negative for the other direction. */
  readonly axisG: number;
  readonly ringRadius: number;
  readonly tubeRadius: number;
  /** Turns of field about the tube over one tube radius of length: tan of the pitch at s = a, signed. */
  readonly twist: number;
  /** How far the ring's centre lies below the surface. */
  readonly depth: number;
  /** Where the ring's centre lies and how its plane is turned from the x axis [rad]. */
  readonly x: number;
  readonly y: number;
  readonly turn: number;
}

/** Field [G] of the rope at a point [Mm]. */
export function ropeVector(
  rope: TwistedRope,
  x: number,
  y: number,
  z: number,
): [number, number, number] {
  const { axisG, ringRadius, tubeRadius, twist, depth, turn } = rope;
  const [cos, sin] = [Math.cos(turn), Math.sin(turn)];
  // u lies in the ring's plane, v along its axis, w' = z + depth upwards.
  const u = (x - rope.x) * cos + (y - rope.y) * sin;
  const v = -(x - rope.x) * sin + (y - rope.y) * cos;
  const h = z + depth;
  const w = Math.hypot(u, h) || 1e-9;
  const square = (w - ringRadius) ** 2 + v * v;
  const core = Math.exp(-square / tubeRadius ** 2);
  const toroidal = (axisG * ringRadius * core) / w;
  // Poloidal field (1/w) grad(psi) x phi with psi = -(twist axisG R a / 2) core: its size at s is
  // twist axisG R s / (w a) core.
  const pull = (twist * axisG * ringRadius * core) / (w * tubeRadius);
  const outward = pull * v;
  const along = -pull * (w - ringRadius);
  const [eu, eh] = [u / w, h / w];
  const bu = toroidal * eh + outward * eu;
  const bh = -toroidal * eu + outward * eh;
  return [bu * cos - along * sin, bu * sin + along * cos, bh];
}

/** Field of ropes and charges on the plane z = 0 of n x n pixels centred on the origin. */
export function ropePlane(
  ropes: readonly TwistedRope[],
  charges: readonly Charge[],
  n: number,
  pixelMm: number,
): VectorField {
  const out = [0, 1, 2].map(() => new Float64Array(n * n));
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const x = (i + 0.5 - n / 2) * pixelMm;
      const y = (j + 0.5 - n / 2) * pixelMm;
      const parts = ropes.map((rope) => ropeVector(rope, x, y, 0));
      parts.push(chargeVector(charges, x, y, 0));
      for (let c = 0; c < 3; c++) out[c][i + n * j] = parts.reduce((sum, part) => sum + part[c], 0);
    }
  }
  return makeVectorField(out[0], out[1], out[2], n, n, pixelMm);
}
