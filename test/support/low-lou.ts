import { makeVectorField, type VectorField } from '../../src/field/vector-field.js';

/**
 * The force-free field of Low & Lou 1990, ApJ 352, 343, built from its equation
 * (1 - u^2) P'' + n(n+1) P + a^2 (n+1)/n P^{1+2/n} = 0 on -1 <= u <= 1, P(+-1) = 0, P'(-1) = 10,
 * for the lowest solution odd in u (m = 1).
 */
export interface LowLouSolution {
  readonly n: number;
  /** The eigenvalue a^2. */
  readonly a2: number;
  /** P / (1 - u^2) and P' at u in [-1, 1]. */
  readonly at: (u: number) => { readonly f: number; readonly slope: number };
}

const STEPS = 4000;
const SLOPE = 10;

/** Integrates from u = -1 to 0 by fourth-order Runge-Kutta; P and P' at every step. */
function shoot(n: number, a2: number): { readonly p: Float64Array; readonly q: Float64Array } {
  const p = new Float64Array(STEPS + 1);
  const q = new Float64Array(STEPS + 1);
  const h = 1 / STEPS;
  const factor = (a2 * (n + 1)) / n;
  // P'' needs P / (1 - u^2) = P / (s (2 - s)) with s = 1 + u, which is P'(-1) / 2 at s = 0.
  const bend = (s: number, value: number) => {
    const f = s === 0 ? SLOPE / 2 : value / (s * (2 - s));
    return -f * (n * (n + 1) + factor * Math.abs(value) ** (2 / n));
  };
  q[0] = SLOPE;
  for (let i = 0; i < STEPS; i++) {
    const s = i * h;
    const k1 = bend(s, p[i]);
    const p2 = p[i] + 0.5 * h * q[i];
    const q2 = q[i] + 0.5 * h * k1;
    const k2 = bend(s + 0.5 * h, p2);
    const p3 = p[i] + 0.5 * h * q2;
    const q3 = q[i] + 0.5 * h * k2;
    const k3 = bend(s + 0.5 * h, p3);
    const p4 = p[i] + h * q3;
    const q4 = q[i] + h * k3;
    const k4 = bend(s + h, p4);
    p[i + 1] = p[i] + (h / 6) * (q[i] + 2 * q2 + 2 * q3 + q4);
    q[i + 1] = q[i] + (h / 6) * (k1 + 2 * k2 + 2 * k3 + k4);
  }
  return { p, q };
}

/** Brackets of a^2 in which P(0) changes sign once. */
const BRACKETS: Readonly<Record<number, readonly [number, number]>> = { 1: [0.2, 1.5], 3: [4, 14] };

/** Solves for n = 1 or 3 by bisection on P(0) = 0. */
export function solveLowLou(n: 1 | 3): LowLouSolution {
  let [low, high] = BRACKETS[n];
  const middle = (a2: number) => shoot(n, a2).p[STEPS];
  const sign = Math.sign(middle(low));
  if (sign === Math.sign(middle(high))) throw new Error('no eigenvalue in the bracket');
  for (let i = 0; i < 50; i++) {
    const trial = 0.5 * (low + high);
    if (Math.sign(middle(trial)) === sign) low = trial;
    else high = trial;
  }
  const a2 = 0.5 * (low + high);
  const { p, q } = shoot(n, a2);
  const at = (u: number) => {
    const s = 1 - Math.abs(u);
    const i = Math.min(STEPS - 1, Math.floor(s * STEPS));
    const t = s * STEPS - i;
    const h = 1 / STEPS;
    // Cubic Hermite between the steps: P is odd in u, P' even.
    const value =
      (1 + 2 * t) * (1 - t) ** 2 * p[i] +
      t * (1 - t) ** 2 * h * q[i] +
      t * t * (3 - 2 * t) * p[i + 1] +
      t * t * (t - 1) * h * q[i + 1];
    const slope =
      (6 * t * (t - 1) * (p[i] - p[i + 1])) / h +
      (1 - t) * (1 - 3 * t) * q[i] +
      t * (3 * t - 2) * q[i + 1];
    const f = s < 1e-9 ? SLOPE / 2 : value / (s * (2 - s));
    return u > 0 ? { f: -f, slope } : { f, slope };
  };
  return { n, a2, at };
}

/** How the field is laid on the plane z = 0: source depth l and tilt phi [rad], lengths in units of the box's half width. */
export interface LowLouBox {
  readonly depth: number;
  readonly tilt: number;
}

/** The two set-ups of Schrijver et al. 2006, Sol. Phys. 235, 161: n = 1 and n = 3, m = 1. */
export const CASE_ONE: LowLouBox = { depth: 0.3, tilt: Math.PI / 4 };
export const CASE_TWO: LowLouBox = { depth: 0.3, tilt: (4 * Math.PI) / 5 };

/** Field at a point of the box, and its alpha. */
export function lowLouAt(
  { n, a2, at }: LowLouSolution,
  { depth, tilt }: LowLouBox,
  x: number,
  y: number,
  z: number,
): { readonly b: readonly [number, number, number]; readonly alpha: number } {
  const [cos, sin] = [Math.cos(tilt), Math.sin(tilt)];
  const bigX = x * cos - (z + depth) * sin;
  const bigZ = x * sin + (z + depth) * cos;
  const r = Math.hypot(bigX, y, bigZ);
  const u = bigZ / r;
  const sine = Math.sqrt(Math.max(0, 1 - u * u));
  const { f, slope } = at(u);
  const p = f * (1 - u * u);
  const a = Math.sqrt(a2);
  const scale = r ** -(n + 2);
  const radial = -slope * scale;
  const polar = n * f * sine * scale;
  const round = sine > 0 ? (a * Math.abs(p) ** (1 + 1 / n) * scale) / sine : 0;
  const distance = Math.hypot(bigX, y);
  const [cosRound, sinRound] = distance > 0 ? [bigX / distance, y / distance] : [1, 0];
  const outward = radial * sine + polar * u;
  const bX = outward * cosRound - round * sinRound;
  const bY = outward * sinRound + round * cosRound;
  const bZ = radial * u - polar * sine;
  return {
    b: [bX * cos + bZ * sin, bY, -bX * sin + bZ * cos],
    alpha: (a * (1 + 1 / n) * Math.sign(p) * Math.abs(p) ** (1 / n)) / r,
  };
}

/**
 * The plane z = 0, -half <= x, y <= half (box units) on size x size pixels, scaled so that one box
 * unit is `unitMm` and the strongest vertical field is `peakG`.
 */
export function lowLouPlane(
  solution: LowLouSolution,
  box: LowLouBox,
  size: number,
  half = 1,
  unitMm = 50,
  peakG = 2000,
): VectorField {
  const [x, y, z] = [0, 1, 2].map(() => new Float64Array(size * size));
  const step = (2 * half) / size;
  let peak = 0;
  for (let j = 0; j < size; j++) {
    for (let i = 0; i < size; i++) {
      const { b } = lowLouAt(solution, box, (i + 0.5) * step - half, (j + 0.5) * step - half, 0);
      const p = i + size * j;
      [x[p], y[p], z[p]] = b;
      peak = Math.max(peak, Math.abs(b[2]));
    }
  }
  for (const values of [x, y, z]) for (let p = 0; p < values.length; p++) values[p] *= peakG / peak;
  return makeVectorField(x, y, z, size, size, step * unitMm);
}
