import { fieldArrays, noiseAt, type VectorField, type VectorNoise } from '../field/vector-field.js';

/** A share of the magnetic pressure with its 1-sigma error by noise. */
export interface Fraction {
  readonly value: number;
  readonly sigma: number;
}

/** Net Maxwell forces and torques on the field above the surface, as shares of the pressure. */
export interface ForceBalance {
  /** Forces (Low 1985) over F0, the integral of B^2 / 2 mu0. */
  readonly x: Fraction;
  readonly y: Fraction;
  readonly z: Fraction;
  /** Torques about the three axes through the centre of the map, over F0 times the mean distance. */
  readonly torqueX: Fraction;
  readonly torqueY: Fraction;
  readonly torqueZ: Fraction;
  /** Net flux over unsigned flux. */
  readonly flux: number;
  /** Sums of the sizes of forces and of torques over the pressure (Wiegelmann et al. 2006). */
  readonly force: number;
  readonly torque: number;
  readonly verdict: ForceVerdict;
  readonly words: string;
}

export type ForceVerdict = 'force-free' | 'not force-free' | 'undecided';

/** A map is called force-free when no net force exceeds this share of F0: Metcalf et al. 1995, ApJ 439, 474. */
export const FORCE_FREE_LIMIT = 0.1;

/**
 * Net forces -(1/mu0) integral of BxBz, ByBz and -(1/2 mu0) integral of Bz^2 - Bx^2 - By^2 over
 * F0 = (1/2 mu0) integral of B^2 (Low 1985), and the torques (Molodensky 1974; Aly 1989). What noise adds
 * to the squares is taken off; sigma is the linear propagation. Missing pixels count as no field.
 */
export function forceBalance(field: VectorField, noise: VectorNoise): ForceBalance {
  const { nx, ny, bx, by, bz } = fieldArrays(field);
  const sums = new Float64Array(6);
  const variances = new Float64Array(6);
  const derivatives = new Float64Array(18);
  let [pressure, moment, net, unsigned] = [0, 0, 0, 0];
  for (let j = 0; j < ny; j++) {
    const y = j - 0.5 * (ny - 1);
    for (let i = 0; i < nx; i++) {
      const p = i + nx * j;
      const x = i - 0.5 * (nx - 1);
      const [u, v, w] = [bx[p], by[p], bz[p]];
      if (Number.isNaN(u * v * w)) continue;
      const [su, sv, sw] = [noiseAt(noise.x, p), noiseAt(noise.y, p), noiseAt(noise.z, p)];
      const up = w * w - sw * sw - u * u - v * v + su * su + sv * sv;
      const size = w * w - sw * sw + u * u + v * v - su * su - sv * sv;
      pressure += size;
      moment += size * Math.hypot(x, y);
      net += w;
      unsigned += Math.abs(w);
      sums[0] -= 2 * u * w;
      sums[1] -= 2 * v * w;
      sums[2] -= up;
      sums[3] -= y * up;
      sums[4] += x * up;
      sums[5] += 2 * (y * u - x * v) * w;
      setDerivatives(derivatives, u, v, w, x, y);
      for (let k = 0; k < 6; k++)
        variances[k] +=
          (derivatives[3 * k] * su) ** 2 +
          (derivatives[3 * k + 1] * sv) ** 2 +
          (derivatives[3 * k + 2] * sw) ** 2;
    }
  }
  const fraction = (k: number): Fraction => {
    const whole = k < 3 ? pressure : moment;
    return { value: sums[k] / whole, sigma: Math.sqrt(variances[k]) / whole };
  };
  const [fx, fy, fz, tx, ty, tz] = [0, 1, 2, 3, 4, 5].map(fraction);
  const total = (...parts: readonly Fraction[]) =>
    parts.reduce((sum, { value }) => sum + Math.abs(value), 0);
  return {
    ...{ x: fx, y: fy, z: fz, torqueX: tx, torqueY: ty, torqueZ: tz },
    flux: net / unsigned,
    // The published sums have BxBz and ByBz without the factor 2 of the forces over F0.
    force: 0.5 * total(fx, fy) + total(fz),
    torque: total(tx, ty) + 0.5 * total(tz),
    ...judge(fx, fy, fz),
  };
}

/** Derivatives of the six sums with respect to the components of one pixel. */
function setDerivatives(
  out: Float64Array,
  u: number,
  v: number,
  w: number,
  x: number,
  y: number,
): void {
  out.set([-2 * w, 0, -2 * u, 0, -2 * w, -2 * v, 2 * u, 2 * v, -2 * w]);
  out.set([2 * y * u, 2 * y * v, -2 * y * w, -2 * x * u, -2 * x * v, 2 * x * w], 9);
  out.set([2 * y * w, -2 * x * w, 2 * (y * u - x * v)], 15);
}

function judge(x: Fraction, y: Fraction, z: Fraction) {
  const parts = [
    { ...x, name: x.value < 0 ? 'east' : 'west' },
    { ...y, name: y.value < 0 ? 'south' : 'north' },
    { ...z, name: z.value < 0 ? 'down' : 'up' },
  ];
  const worst = parts.reduce((a, b) => (Math.abs(b.value) > Math.abs(a.value) ? b : a));
  const share = `${(100 * Math.abs(worst.value)).toFixed(1)} % of the magnetic pressure`;
  // A part is past the limit, or within it, when one sigma of noise does not change that.
  if (parts.some(({ value, sigma }) => Math.abs(value) - sigma > FORCE_FREE_LIMIT))
    return {
      verdict: 'not force-free' as const,
      words: `not force-free: the net force is ${share}, ${worst.name}`,
    };
  if (parts.every(({ value, sigma }) => Math.abs(value) + sigma <= FORCE_FREE_LIMIT))
    return {
      verdict: 'force-free' as const,
      words: `force-free within ${100 * FORCE_FREE_LIMIT} %: the largest net force is ${share}, ${worst.name}`,
    };
  return {
    verdict: 'undecided' as const,
    words: `force-free or not cannot be told from noise: the largest net force is ${share}, ${worst.name}`,
  };
}
