// Complex forward transforms of eight lanes, following a plan the host wrote to memory (fft-plan.ts):
//   i32 kind (0 passes, 1 convolution), i32 length, then
//   kind 0: i32 number of passes, i32 unused, and for each pass i32 radix, m, s, offset of its
//           twiddle factors from the start of the plan;
//   kind 1: i32 length of the convolution, i32 offset of the chirp (length factors), i32 offset of
//           the transformed filter, i32 offset of the plan of the convolution's transform.
// An inverse transform is a forward one of points whose real and imaginary parts have changed places.
import { oddPass } from './odd-pass';
import { pass2, pass3, pass4, pass5, pass8 } from './passes';
import { IMAGINARY, POINT, scratch } from './scratch';

/** Transforms the points at `at` in place. */
export function transform(plan: usize, at: usize): void {
  if (load<i32>(plan) == 1) convolve(plan, at);
  else runPasses(plan, at);
}

function runPasses(plan: usize, at: usize): void {
  const count = load<i32>(plan, 8);
  const copied = count == 1;
  if (copied) memory.copy(scratch.a, at, <usize>load<u32>(plan, 4) * POINT);
  let src = copied ? scratch.a : at;
  for (let i = 0; i < count; i++) {
    // To a and back to `at` by turns; an odd number of passes goes through b once to end there.
    const home = copied || ((i & 1) == (count & 1 ? 0 : 1) && i > 0);
    const dst = home ? at : i == 1 ? scratch.b : scratch.a;
    const pass = plan + 16 + 16 * i;
    const r = load<i32>(pass);
    const m: usize = load<u32>(pass, 4);
    const s: usize = load<u32>(pass, 8);
    const tw = plan + load<u32>(pass, 12);
    if (r == 4) pass4(src, dst, m, s, tw);
    else if (r == 8) pass8(src, dst, m, s, tw);
    else if (r == 2) pass2(src, dst, m, s, tw);
    else if (r == 3) pass3(src, dst, m, s, tw);
    else if (r == 5) pass5(src, dst, m, s, tw);
    else oddPass(r, src, dst, m, s, tw);
    src = dst;
  }
}

/**
 * Any length as a convolution with a chirp (L. I. Bluestein 1970, IEEE Trans. Audio Electroacoust.
 * 18, 451): jk = (j^2 + k^2 - (k - j)^2) / 2, so that
 * X(k) = w(k) sum over j of x(j) w(j) conj(w(k - j)) with w(j) = exp(-i pi j^2 / n).
 */
function convolve(plan: usize, at: usize): void {
  const n: usize = load<u32>(plan, 4);
  const length: usize = load<u32>(plan, 8);
  const chirp = plan + load<u32>(plan, 12);
  const filter = plan + load<u32>(plan, 16);
  const inner = plan + load<u32>(plan, 20);
  const c = scratch.c;
  multiply(at, c, chirp, n, false);
  memory.fill(c + n * POINT, 0, (length - n) * POINT);
  runPasses(inner, c);
  multiply(c, c, filter, length, true);
  runPasses(inner, c);
  swapParts(c, n);
  multiply(c, at, chirp, n, false);
}

/** `count` points times as many complex factors; with `swap`, their parts then change places. */
function multiply(src: usize, dst: usize, factors: usize, count: usize, swap: bool): void {
  for (let i: usize = 0; i < count; i++) {
    const wr = v128.load_splat<f64>(factors + 16 * i);
    const wi = v128.load_splat<f64>(factors + 16 * i, 8);
    const from = src + i * POINT;
    const to = dst + i * POINT;
    for (let o: usize = 0; o < IMAGINARY; o += 16) {
      const xr = v128.load(from + o);
      const xi = v128.load(from + o, IMAGINARY);
      const yr = f64x2.sub(f64x2.mul(xr, wr), f64x2.mul(xi, wi));
      const yi = f64x2.add(f64x2.mul(xr, wi), f64x2.mul(xi, wr));
      v128.store(to + o, swap ? yi : yr);
      v128.store(to + o, swap ? yr : yi, IMAGINARY);
    }
  }
}

function swapParts(at: usize, count: usize): void {
  for (let end = at + count * POINT; at < end; at += POINT) {
    for (let o: usize = 0; o < IMAGINARY; o += 16) {
      const re = v128.load(at + o);
      v128.store(at + o, v128.load(at + o, IMAGINARY));
      v128.store(at + o, re, IMAGINARY);
    }
  }
}
