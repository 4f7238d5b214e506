import { makeVectorField, type VectorField } from '../../src/field/vector-field.js';

/**
 * A periodic linear force-free field on the plane z = 0: modes b cos(k . r + phase) of Bz with
 * Bx, By from curl B = alpha B (Nakagawa & Raadu 1972, Sol. Phys. 25, 127): for k along unit vector e and
 * l = sqrt(k^2 - alpha^2), B_along = (l / k) b sin, B_across = (alpha / k) b sin with across = z x e.
 * Lengths in Mm, alpha in 1/Mm, the two lowest modes of an n x n map and some higher ones.
 */
export function linearForceFree(
  n: number,
  pixelMm: number,
  alpha: number,
  peakG = 500,
): VectorField {
  const modes = [
    [1, 0, 1, 0.3],
    [0, 1, 0.7, 1.1],
    [1, 1, 0.5, 2.0],
    [2, -1, 0.3, 0.5],
    [-1, 2, 0.2, 2.9],
  ];
  const [x, y, z] = [0, 1, 2].map(() => new Float64Array(n * n));
  const unit = (2 * Math.PI) / (n * pixelMm);
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const p = i + n * j;
      for (const [mx, my, weight, phase] of modes) {
        const [kx, ky] = [mx * unit, my * unit];
        const k = Math.hypot(kx, ky);
        const l = Math.sqrt(k * k - alpha * alpha);
        const angle = (kx * i + ky * j) * pixelMm + phase;
        const b = peakG * weight;
        const sine = b * Math.sin(angle);
        z[p] += b * Math.cos(angle);
        // div B = 0 with d/dz = -l: k B_along' = l b cos; (curl B)_z = k B_across' = alpha b cos.
        x[p] += ((l * kx - alpha * ky) / (k * k)) * sine;
        y[p] += ((l * ky + alpha * kx) / (k * k)) * sine;
      }
    }
  }
  return makeVectorField(x, y, z, n, n, pixelMm);
}
