// The inverse of the H-transform (White, Postman & Lattanzi 1992): sums and differences over 2 x 2
// cells, level by level. Integers beyond 32 bits occur on the way, so it runs in double precision,
// where "and with a mask" becomes a floor to a multiple; all numbers stay exact below 2^53.
import { smoothCells } from './haar-smooth.js';

/**
 * Turns `a` (`width` x `height`, rows of coefficients) into pixels, in place. `smoothLimit` above 0
 * interpolates differences from neighbouring cells by at most that much.
 */
export function invertHaar(
  a: Float64Array,
  width: number,
  height: number,
  smoothLimit: number,
): void {
  const longest = Math.max(width, height);
  let levels = 0;
  while (2 ** levels < longest) levels++;
  if (levels === 0) return;
  const line = new Float64Array(longest);
  a[0] = roundTo(a[0], 2 ** (levels + 1));
  for (let level = levels - 1; level >= 0; level--) {
    const nx = Math.ceil(width / 2 ** level);
    const ny = Math.ceil(height / 2 ** level);
    for (let y = 0; y < ny; y++) interleave(a, y * width, 1, nx, line);
    for (let x = 0; x < nx; x++) interleave(a, x, width, ny, line);
    if (smoothLimit > 0) smoothCells(a, nx, ny, width, smoothLimit);
    invertLevel(a, nx, ny, width, 2 ** level, level === 0 ? 4 : 2);
  }
}

/** To a multiple of `unit`, the half away from zero. */
function roundTo(value: number, unit: number): number {
  const half = unit / 2;
  const shifted = value >= 0 ? value + half : value + Math.max(half - 1, 0);
  return Math.floor(shifted / unit) * unit;
}

/** 1 where the bit of weight `unit` is set in the two's complement of `value`. */
function bitOf(value: number, unit: number): number {
  const floor = Math.floor(value / unit);
  return floor - 2 * Math.floor(floor / 2);
}

/** First half of n numbers to the even places, second half to the odd ones. */
function interleave(
  a: Float64Array,
  start: number,
  stride: number,
  n: number,
  line: Float64Array,
): void {
  const half = (n + 1) >> 1;
  for (let i = 0; i < half; i++) line[2 * i] = a[start + i * stride];
  for (let i = half; i < n; i++) line[2 * (i - half) + 1] = a[start + i * stride];
  for (let i = 0; i < n; i++) a[start + i * stride] = line[i];
}

/**
 * One level: each cell's sum `h0` and differences along rows `hy`, columns `hx` and both `hc` become
 * its four values. The low bits that the forward transform dropped are put back from one another:
 * `hc` is a multiple of `unit`, `hx` and `hy` of twice, `h0` of four times that.
 */
function invertLevel(
  a: Float64Array,
  nx: number,
  ny: number,
  stride: number,
  unit: number,
  divisor: number,
): void {
  const unit2 = 2 * unit;
  for (let y = 0; y < ny; y += 2) {
    const bottom = y * stride;
    const top = bottom + stride;
    const tall = y + 1 < ny;
    for (let x = 0; x < nx; x += 2) {
      const wide = x + 1 < nx;
      let h0 = a[bottom + x];
      if (tall && wide) {
        const hc = roundTo(a[top + x + 1], unit);
        const low = bitOf(hc, unit) * unit;
        let hx = roundTo(a[top + x], unit2);
        let hy = roundTo(a[bottom + x + 1], unit2);
        hx = hx >= 0 ? hx - low : hx + low;
        hy = hy >= 0 ? hy - low : hy + low;
        const odd = bitOf(hc, unit2) + bitOf(hx, unit2) + bitOf(hy, unit2);
        const middle = (odd & 1) * unit2;
        if (h0 >= 0) h0 += low - middle;
        else h0 += low === 0 ? middle : low - middle;
        a[top + x + 1] = Math.floor((h0 + hx + hy + hc) / divisor);
        a[top + x] = Math.floor((h0 + hx - hy - hc) / divisor);
        a[bottom + x + 1] = Math.floor((h0 - hx + hy - hc) / divisor);
        a[bottom + x] = Math.floor((h0 - hx - hy + hc) / divisor);
      } else if (tall || wide) {
        const other = tall ? top + x : bottom + x + 1;
        const h = roundTo(a[other], unit2);
        const low = bitOf(h, unit2) * unit2;
        h0 = h0 >= 0 ? h0 - low : h0 + low;
        a[other] = Math.floor((h0 + h) / divisor);
        a[bottom + x] = Math.floor((h0 - h) / divisor);
      } else {
        a[bottom + x] = Math.floor(h0 / divisor);
      }
    }
  }
}
