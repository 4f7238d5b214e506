import type { FieldReadings } from './ambiguous-field.js';

const MOST_PASSES = 20;

/**
 * Chooses the reading of the pixels below `leastG` transverse field by their neighbours: the one
 * whose transverse field has the larger sum of products with the eight around it, pass after pass,
 * the strongest first, until nothing changes. Changes `flips` in place; stronger pixels stay.
 */
export function settleWeakPixels(readings: FieldReadings, flips: Uint8Array, leastG: number): void {
  const { nx, ny, known, transverse, transverseG } = readings;
  const [tx, ty, tz] = transverse;
  const weak: number[] = [];
  for (let i = 0; i < known.length; i++) if (known[i] && transverseG[i] < leastG) weak.push(i);
  weak.sort((a, b) => transverseG[b] - transverseG[a] || a - b);
  for (let pass = 0; pass < MOST_PASSES; pass++) {
    let changes = 0;
    for (const i of weak) {
      const x = i % nx;
      const y = (i - x) / nx;
      let product = 0;
      for (let v = Math.max(0, y - 1); v <= Math.min(ny - 1, y + 1); v++) {
        for (let u = Math.max(0, x - 1); u <= Math.min(nx - 1, x + 1); u++) {
          const j = u + nx * v;
          if (j === i) continue;
          const part = tx[i] * tx[j] + ty[i] * ty[j] + tz[i] * tz[j];
          product += flips[j] ? -part : part;
        }
      }
      const turned = product < 0 ? 1 : 0;
      if (product === 0 || flips[i] === turned) continue;
      flips[i] = turned;
      changes++;
    }
    if (changes === 0) return;
  }
}
