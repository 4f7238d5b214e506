// A pass as in passes.ts for any odd radix r, by the sums themselves: work grows as r per point.
import { IMAGINARY, POINT, scratch } from './scratch';

/**
 * `tw` points to r pairs (cos, sin) of 2 pi j / r, then to the twiddle factors of the pass.
 * The scratch space must hold (r - 1) / 2 points.
 */
export function oddPass(r: usize, src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  const table = tw;
  let factors = tw + 16 * r;
  for (let p: usize = 0; p < m; p++) {
    for (let q: usize = 0; q < s; q++) {
      const from = (p * s + q) * POINT;
      const to = (p * s * r + q) * POINT;
      for (let o: usize = 0; o < 64; o += 16) {
        oddButterfly(r, src + from + o, m * s * POINT, dst + to + o, s * POINT, table, factors, p > 0);
      }
    }
    if (p > 0) factors += 16 * (r - 1);
  }
}

function oddButterfly(r: usize, src: usize, sj: usize, dst: usize, dk: usize, table: usize, tw: usize, twiddled: bool): void {
  const half = r >> 1;
  const ar = v128.load(src);
  const ai = v128.load(src, IMAGINARY);
  let sumR = ar;
  let sumI = ai;
  // Sums and differences of the legs j and r - j.
  for (let j: usize = 1; j <= half; j++) {
    const br = v128.load(src + j * sj);
    const bi = v128.load(src + j * sj, IMAGINARY);
    const cr = v128.load(src + (r - j) * sj);
    const ci = v128.load(src + (r - j) * sj, IMAGINARY);
    const to = scratch.odd + 64 * j;
    const tr = f64x2.add(br, cr);
    const ti = f64x2.add(bi, ci);
    v128.store(to, tr);
    v128.store(to, ti, 16);
    v128.store(to, f64x2.sub(br, cr), 32);
    v128.store(to, f64x2.sub(bi, ci), 48);
    sumR = f64x2.add(sumR, tr);
    sumI = f64x2.add(sumI, ti);
  }
  v128.store(dst, sumR);
  v128.store(dst, sumI, IMAGINARY);
  for (let k: usize = 1; k <= half; k++) {
    let evenR = ar;
    let evenI = ai;
    let oddR = f64x2.splat(0);
    let oddI = f64x2.splat(0);
    let turn = k;
    for (let j: usize = 1; j <= half; j++) {
      const at = scratch.odd + 64 * j;
      const cos = v128.load_splat<f64>(table + 16 * turn);
      const sin = v128.load_splat<f64>(table + 16 * turn, 8);
      evenR = f64x2.add(evenR, f64x2.mul(cos, v128.load(at)));
      evenI = f64x2.add(evenI, f64x2.mul(cos, v128.load(at, 16)));
      oddR = f64x2.add(oddR, f64x2.mul(sin, v128.load(at, 32)));
      oddI = f64x2.add(oddI, f64x2.mul(sin, v128.load(at, 48)));
      turn += k;
      if (turn >= r) turn -= r;
    }
    putOdd(f64x2.add(evenR, oddI), f64x2.sub(evenI, oddR), dst + k * dk, tw + 16 * (k - 1), twiddled);
    putOdd(f64x2.sub(evenR, oddI), f64x2.add(evenI, oddR), dst + (r - k) * dk, tw + 16 * (r - k - 1), twiddled);
  }
}

function putOdd(yr: v128, yi: v128, dst: usize, tw: usize, twiddled: bool): void {
  if (twiddled) {
    const wr = v128.load_splat<f64>(tw);
    const wi = v128.load_splat<f64>(tw, 8);
    v128.store(dst, f64x2.sub(f64x2.mul(yr, wr), f64x2.mul(yi, wi)));
    v128.store(dst, f64x2.add(f64x2.mul(yr, wi), f64x2.mul(yi, wr)), IMAGINARY);
  } else {
    v128.store(dst, yr);
    v128.store(dst, yi, IMAGINARY);
  }
}
