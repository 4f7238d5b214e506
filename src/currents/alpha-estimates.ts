import { VACUUM_PERMEABILITY } from '../constants.js';
import { USABLE_ALPHA_FRACTION } from '../field/alpha.js';
import { fieldArrays, noiseAt, type VectorField, type VectorNoise } from '../field/vector-field.js';
import { realFft2, type Spectrum2 } from '../grid/fft.js';
import { padWithZeros } from '../grid/padding.js';
import { columnWeight, derivativeWavenumbers, wavenumbers } from '../grid/wavenumbers.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS } from '../units.js';

/** alpha [1/Mm] of 1 mA/m^2 in 1 G: mu0 Jz / Bz. */
const ALPHA_PER_DENSITY_PER_GAUSS =
  (1e-3 * VACUUM_PERMEABILITY * METRES_PER_MEGAMETRE) / TESLA_PER_GAUSS;

/**
 * Flux-weighted alpha [1/Mm], mu0 sum Jz Bz / sum Bz^2 (Hagino & Sakurai 2004, PASJ 56, 831), over
 * the pixels of at least `leastG` vertical field [G]; `density` in mA/m^2. NaN without pixels.
 */
export function fluxWeightedAlpha(density: Float64Array, bz: Float64Array, leastG: number): number {
  let product = 0;
  let square = 0;
  for (let i = 0; i < density.length; i++) {
    if (Number.isNaN(density[i]) || !(Math.abs(bz[i]) >= leastG)) continue;
    product += density[i] * bz[i];
    square += bz[i] * bz[i];
  }
  return (ALPHA_PER_DENSITY_PER_GAUSS * product) / square;
}

/** Median [1/Mm] of mu0 Jz / Bz over the pixels of at least `leastG` vertical field; NaN without pixels. */
export function medianAlpha(density: Float64Array, bz: Float64Array, leastG: number): number {
  const all = new Float64Array(density.length);
  let count = 0;
  for (let i = 0; i < density.length; i++)
    if (!Number.isNaN(density[i]) && Math.abs(bz[i]) >= leastG) all[count++] = density[i] / bz[i];
  if (count === 0) return Number.NaN;
  const ratios = all.subarray(0, count).sort();
  const middle = count >> 1;
  const median = count % 2 === 1 ? ratios[middle] : 0.5 * (ratios[middle - 1] + ratios[middle]);
  return ALPHA_PER_DENSITY_PER_GAUSS * median;
}

/** A fitted alpha [1/Mm] with its 1-sigma error. */
export interface FittedAlpha {
  readonly perMm: number;
  readonly sigmaPerMm: number;
  /** The fit ran into the largest alpha that the patch allows. */
  readonly atLimit: boolean;
}

/** What every mode contributes to the misfit. */
interface Modes {
  /** Wavenumber squared, |b|^2 / k^2 and the two products with the horizontal field, mode by mode. */
  readonly square: Float64Array;
  readonly power: Float64Array;
  readonly potentialPart: Float64Array;
  /** Sum of the part that goes with alpha, and of the horizontal field squared. */
  readonly twist: number;
  readonly total: number;
  readonly largestAlpha: number;
}

/**
 * Alpha [1/Mm] of the linear force-free field of Bz whose horizontal components fit the measured ones
 * best (Pevtsov, Canfield & Metcalf 1995, ApJ 440, L109), by least squares over the whole patch with
 * periodic sides, mode by mode: with t = (kx By - ky Bx) / k and p = (kx Bx + ky By) / k the field has
 * t = -i alpha b / k, p = -i l b / k, l = sqrt(k^2 - alpha^2). Missing pixels count as no field.
 * The error is that of least squares with the larger of the noise and the scatter about the fit.
 */
export function fittedAlpha(field: VectorField, noise: VectorNoise): FittedAlpha {
  const { nx, ny } = fieldArrays(field);
  const modes = collectModes(field);
  const limit = USABLE_ALPHA_FRACTION * modes.largestAlpha;
  const perMm = leastMisfit((alpha) => misfit(modes, alpha), limit);
  let slope = 0;
  for (let i = 0; i < modes.power.length; i++) {
    const l2 = modes.square[i] - perMm * perMm;
    if (modes.power[i] > 0) slope += modes.power[i] * (1 + (perMm * perMm) / l2);
  }
  // By Parseval the sums over modes are nx ny times those over pixels.
  const pixels = nx * ny;
  const scatter = Math.max(0, misfit(modes, perMm)) / (2 * pixels * pixels);
  const variance = Math.max(scatter, meanVariance(noise, pixels));
  return {
    perMm,
    sigmaPerMm: Math.sqrt((variance * pixels) / slope),
    atLimit: Math.abs(perMm) > 0.999 * limit,
  };
}

function meanVariance(noise: VectorNoise, pixels: number): number {
  let sum = 0;
  for (let i = 0; i < pixels; i++) {
    const value = noiseAt(noise.x, i) ** 2 + noiseAt(noise.y, i) ** 2;
    if (!Number.isNaN(value)) sum += value;
  }
  return sum / (2 * pixels);
}

function collectModes(field: VectorField): Modes {
  const { nx, ny, pixelMm, bx, by, bz } = fieldArrays(field);
  const [x, y, z] = [bx, by, bz].map(
    (part): Spectrum2 => realFft2(padWithZeros(part, nx, ny, nx, ny), nx, ny),
  );
  const { columns } = z;
  const kx = wavenumbers(nx, pixelMm);
  const ky = wavenumbers(ny, pixelMm);
  const oddX = derivativeWavenumbers(nx, pixelMm);
  const oddY = derivativeWavenumbers(ny, pixelMm);
  const [square, power, potentialPart] = [0, 1, 2].map(() => new Float64Array(columns * ny));
  let twist = 0;
  let total = 0;
  for (let v = 0; v < ny; v++) {
    for (let u = 0; u < columns; u++) {
      const i = u + columns * v;
      const k2 = kx[u] * kx[u] + ky[v] * ky[v];
      if (k2 === 0) continue;
      const weight = columnWeight(u, nx);
      const [ex, ey] = [oddX[u] / k2, oddY[v] / k2];
      // t / k and p / k; their real products with -i b are re(.) im(b) - im(.) re(b).
      const reT = ex * y.re[i] - ey * x.re[i];
      const imT = ex * y.im[i] - ey * x.im[i];
      const reP = ex * x.re[i] + ey * y.re[i];
      const imP = ex * x.im[i] + ey * y.im[i];
      square[i] = k2;
      power[i] = (weight * (z.re[i] * z.re[i] + z.im[i] * z.im[i])) / k2;
      twist += weight * (reT * z.im[i] - imT * z.re[i]);
      potentialPart[i] = weight * (reP * z.im[i] - imP * z.re[i]);
      total += weight * (x.re[i] ** 2 + x.im[i] ** 2 + y.re[i] ** 2 + y.im[i] ** 2);
    }
  }
  const largestAlpha = (2 * Math.PI) / (Math.max(nx, ny) * pixelMm);
  return { square, power, potentialPart, twist, total, largestAlpha };
}

/** Sum over modes of the squared difference of the horizontal fields. */
function misfit(modes: Modes, alpha: number): number {
  const { square, power, potentialPart, twist, total } = modes;
  let sum = total - 2 * alpha * twist;
  for (let i = 0; i < power.length; i++) {
    // (alpha^2 + l^2) |b|^2 / k^2 = |b|^2: only the products depend on alpha.
    if (square[i] === 0) continue;
    sum += power[i] * square[i] - 2 * Math.sqrt(square[i] - alpha * alpha) * potentialPart[i];
  }
  return sum;
}

/** Place of the least value between -limit and limit: the best of a few, then golden sections. */
function leastMisfit(misfitAt: (alpha: number) => number, limit: number): number {
  const steps = 8;
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let i = -steps; i <= steps; i++) {
    const value = misfitAt((limit * i) / steps);
    if (value < least) {
      least = value;
      best = i;
    }
  }
  let low = limit * Math.max(-1, (best - 1) / steps);
  let high = limit * Math.min(1, (best + 1) / steps);
  const golden = (Math.sqrt(5) - 1) / 2;
  let [a, b] = [high - golden * (high - low), low + golden * (high - low)];
  let [fa, fb] = [misfitAt(a), misfitAt(b)];
  for (let step = 0; step < 40; step++) {
    if (fa < fb) {
      high = b;
      [b, fb] = [a, fa];
      a = high - golden * (high - low);
      fa = misfitAt(a);
    } else {
      low = a;
      [a, fa] = [b, fb];
      b = low + golden * (high - low);
      fb = misfitAt(b);
    }
  }
  return 0.5 * (low + high);
}
