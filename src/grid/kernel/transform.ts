// One complex transform of eight lanes, following a plan the host wrote to memory (fft-plan.ts):
//   i32 kind (0 passes, 1 convolution), i32 length, then
//   kind 0: i32 number of passes, i32 unused, and for each pass i32 radix, m, s, offset of its
//           twiddle factors from the start of the plan;
//   kind 1: i32 length of the convolution, i32 offset of the chirp (length factors), i32 offset of
//           the transformed filter, i32 offset of the plan of the convolution's transform.
import { oddPass } from './odd-pass';
import { pass2, pass3, pass4, pass5, pass8 } from './passes';
import { IMAGINARY, POINT, scratch } from './scratch';

/** Transforms `sr, si` to `dr, di` (addresses and strides as in passes.ts), which may be the same. */
export function transform(plan: usize, sr: usize, si: usize, ss: usize, dr: usize, di: usize, ds: usize): void {
  transformVia(plan, sr, si, ss, dr, di, ds, scratch.a, scratch.b);
}

/**
 * Transforms the points of buffer `scratch.a` in the forward or, with the parts swapped, the inverse
 * sense, and returns the address of the buffer that holds the result: a or b.
 */
export function transformScratch(plan: usize, inverse: bool): usize {
  // The last pass reads a or b, whichever the number of passes says, so the other takes its result.
  const even = load<i32>(plan) == 0 && (load<i32>(plan, 8) & 1) == 0;
  const to = even ? scratch.a : scratch.b;
  const re: usize = inverse ? IMAGINARY : 0;
  const im: usize = inverse ? 0 : IMAGINARY;
  transformVia(plan, scratch.a + re, scratch.a + im, POINT, to + re, to + im, POINT, scratch.b, scratch.a);
  return to;
}

function transformVia(plan: usize, sr: usize, si: usize, ss: usize, dr: usize, di: usize, ds: usize, first: usize, second: usize): void {
  if (load<i32>(plan) == 1) {
    convolve(plan, sr, si, ss, dr, di, ds);
    return;
  }
  // Whichever address is lower holds the real or, in an inverse transform, the imaginary parts:
  // intermediate points do not care.
  const count = load<i32>(plan, 8);
  if (count == 0) copyPoint(sr, si, dr, di);
  for (let i = 0; i < count; i++) {
    const pass = plan + 16 + 16 * i;
    const last = i == count - 1;
    const buffer = i & 1 ? second : first;
    const tr = last ? dr : buffer;
    const ti = last ? di : buffer + IMAGINARY;
    const ts = last ? ds : POINT;
    const r = load<i32>(pass);
    const m: usize = load<u32>(pass, 4);
    const s: usize = load<u32>(pass, 8);
    const tw = plan + load<u32>(pass, 12);
    if (r == 8) pass8(sr, si, ss, tr, ti, ts, m, s, tw);
    else if (r == 4) pass4(sr, si, ss, tr, ti, ts, m, s, tw);
    else if (r == 2) pass2(sr, si, ss, tr, ti, ts, m, s, tw);
    else if (r == 3) pass3(sr, si, ss, tr, ti, ts, m, s, tw);
    else if (r == 5) pass5(sr, si, ss, tr, ti, ts, m, s, tw);
    else oddPass(r, sr, si, ss, tr, ti, ts, m, s, tw);
    sr = tr;
    si = ti;
    ss = ts;
  }
}

function copyPoint(sr: usize, si: usize, dr: usize, di: usize): void {
  for (let o: usize = 0; o < 64; o += 16) {
    const re = v128.load(sr + o);
    const im = v128.load(si + o);
    v128.store(dr + o, re);
    v128.store(di + o, im);
  }
}

/**
 * Any length as a convolution with a chirp (L. I. Bluestein 1970, IEEE Trans. Audio Electroacoust.
 * 18, 451): jk = (j^2 + k^2 - (k - j)^2) / 2, so that
 * X(k) = w(k) sum over j of x(j) w(j) conj(w(k - j)) with w(j) = exp(-i pi j^2 / n).
 */
function convolve(plan: usize, sr: usize, si: usize, ss: usize, dr: usize, di: usize, ds: usize): void {
  const n: usize = load<u32>(plan, 4);
  const length: usize = load<u32>(plan, 8);
  const chirp = plan + load<u32>(plan, 12);
  const filter = plan + load<u32>(plan, 16);
  const inner = plan + load<u32>(plan, 20);
  const c = scratch.c;
  for (let j: usize = 0; j < n; j++) multiply(sr + j * ss, si + j * ss, c + j * POINT, c + j * POINT + IMAGINARY, chirp + 16 * j);
  memory.fill(c + n * POINT, 0, (length - n) * POINT);
  transformVia(inner, c, c + IMAGINARY, POINT, c, c + IMAGINARY, POINT, scratch.a, scratch.b);
  for (let j: usize = 0; j < length; j++) multiply(c + j * POINT, c + j * POINT + IMAGINARY, c + j * POINT, c + j * POINT + IMAGINARY, filter + 16 * j);
  transformVia(inner, c + IMAGINARY, c, POINT, c + IMAGINARY, c, POINT, scratch.a, scratch.b);
  for (let j: usize = 0; j < n; j++) multiply(c + j * POINT, c + j * POINT + IMAGINARY, dr + j * ds, di + j * ds, chirp + 16 * j);
}

/** One point times a complex factor. */
function multiply(sr: usize, si: usize, dr: usize, di: usize, factor: usize): void {
  const wr = v128.load_splat<f64>(factor);
  const wi = v128.load_splat<f64>(factor, 8);
  for (let o: usize = 0; o < 64; o += 16) {
    const xr = v128.load(sr + o);
    const xi = v128.load(si + o);
    v128.store(dr + o, f64x2.sub(f64x2.mul(xr, wr), f64x2.mul(xi, wi)));
    v128.store(di + o, f64x2.add(f64x2.mul(xr, wi), f64x2.mul(xi, wr)));
  }
}
