// One pass of the Stockham transform (decimation in frequency, forward sign) for radix 2, 3, 4, 5
// and 8, over eight interleaved transforms ("lanes") at once. A point is 128 bytes: eight real parts,
// then eight imaginary parts, which four f64x2 vectors each hold.
//
// A pass takes a sequence of r * m * s points, seen as x[leg j][p][q] with p < m and q < s, to
//   y[p][k][q] = w^(p k) * sum over j of x[j][p][q] exp(-2 pi i j k / r),  w = exp(-2 pi i / (r m)).
// `src` and `dst` are the addresses of the first points (not the same), `tw` that of the twiddle
// factors (real, imaginary) of p = 1 .. m - 1, with k = 1 .. r - 1 running fastest.
import { At0, At16, At32, At48, IMAGINARY, POINT } from './scratch';

const HALF: f64 = 0.5;
const SQRT_HALF: f64 = 0.7071067811865475244;
const SIN_60: f64 = 0.8660254037844386468;
const COS_72: f64 = 0.3090169943749474241;
const COS_144: f64 = -0.8090169943749474241;
const SIN_72: f64 = 0.9510565162951535721;
const SIN_144: f64 = 0.5877852522924731292;

// @ts-ignore: decorator
@inline
function add(a: v128, b: v128): v128 {
  return f64x2.add(a, b);
}

// @ts-ignore: decorator
@inline
function sub(a: v128, b: v128): v128 {
  return f64x2.sub(a, b);
}

// @ts-ignore: decorator
@inline
function mul(a: v128, b: v128): v128 {
  return f64x2.mul(a, b);
}

/** Stores (yr + i yi) times the twiddle factor at `tw`, or the value itself where there is none. */
// @ts-ignore: decorator
@inline
function put<O>(yr: v128, yi: v128, dst: usize, tw: usize, twiddled: bool): void {
  if (twiddled) {
    const wr = v128.load_splat<f64>(tw);
    const wi = v128.load_splat<f64>(tw, 8);
    v128.store(dst, sub(mul(yr, wr), mul(yi, wi)), offsetof<O>());
    v128.store(dst, add(mul(yr, wi), mul(yi, wr)), offsetof<O>() + IMAGINARY);
  } else {
    v128.store(dst, yr, offsetof<O>());
    v128.store(dst, yi, offsetof<O>() + IMAGINARY);
  }
}

// @ts-ignore: decorator
@inline
function two<O>(src: usize, sj: usize, dst: usize, dk: usize, tw: usize, twiddled: bool): void {
  const ar = v128.load(src, offsetof<O>());
  const ai = v128.load(src, offsetof<O>() + IMAGINARY);
  const br = v128.load(src + sj, offsetof<O>());
  const bi = v128.load(src + sj, offsetof<O>() + IMAGINARY);
  put<O>(add(ar, br), add(ai, bi), dst, 0, false);
  put<O>(sub(ar, br), sub(ai, bi), dst + dk, tw, twiddled);
}

// @ts-ignore: decorator
@inline
function three<O>(src: usize, sj: usize, dst: usize, dk: usize, tw: usize, twiddled: bool): void {
  const ar = v128.load(src, offsetof<O>());
  const ai = v128.load(src, offsetof<O>() + IMAGINARY);
  const br = v128.load(src + sj, offsetof<O>());
  const bi = v128.load(src + sj, offsetof<O>() + IMAGINARY);
  const cr = v128.load(src + 2 * sj, offsetof<O>());
  const ci = v128.load(src + 2 * sj, offsetof<O>() + IMAGINARY);
  const tr = add(br, cr);
  const ti = add(bi, ci);
  const half = f64x2.splat(HALF);
  const sine = f64x2.splat(SIN_60);
  const ur = sub(ar, mul(half, tr));
  const ui = sub(ai, mul(half, ti));
  const vr = mul(sine, sub(br, cr));
  const vi = mul(sine, sub(bi, ci));
  put<O>(add(ar, tr), add(ai, ti), dst, 0, false);
  put<O>(add(ur, vi), sub(ui, vr), dst + dk, tw, twiddled);
  put<O>(sub(ur, vi), add(ui, vr), dst + 2 * dk, tw + 16, twiddled);
}

// @ts-ignore: decorator
@inline
function four<O>(src: usize, sj: usize, dst: usize, dk: usize, tw: usize, twiddled: bool): void {
  const ar = v128.load(src, offsetof<O>());
  const ai = v128.load(src, offsetof<O>() + IMAGINARY);
  const cr = v128.load(src + 2 * sj, offsetof<O>());
  const ci = v128.load(src + 2 * sj, offsetof<O>() + IMAGINARY);
  const pr = add(ar, cr);
  const pi = add(ai, ci);
  const mr = sub(ar, cr);
  const mi = sub(ai, ci);
  const br = v128.load(src + sj, offsetof<O>());
  const bi = v128.load(src + sj, offsetof<O>() + IMAGINARY);
  const er = v128.load(src + 3 * sj, offsetof<O>());
  const ei = v128.load(src + 3 * sj, offsetof<O>() + IMAGINARY);
  const qr = add(br, er);
  const qi = add(bi, ei);
  const nr = sub(br, er);
  const ni = sub(bi, ei);
  put<O>(add(pr, qr), add(pi, qi), dst, 0, false);
  put<O>(add(mr, ni), sub(mi, nr), dst + dk, tw, twiddled);
  put<O>(sub(pr, qr), sub(pi, qi), dst + 2 * dk, tw + 16, twiddled);
  put<O>(sub(mr, ni), add(mi, nr), dst + 3 * dk, tw + 32, twiddled);
}

// @ts-ignore: decorator
@inline
function five<O>(src: usize, sj: usize, dst: usize, dk: usize, tw: usize, twiddled: bool): void {
  const ar = v128.load(src, offsetof<O>());
  const ai = v128.load(src, offsetof<O>() + IMAGINARY);
  const br = v128.load(src + sj, offsetof<O>());
  const bi = v128.load(src + sj, offsetof<O>() + IMAGINARY);
  const er = v128.load(src + 4 * sj, offsetof<O>());
  const ei = v128.load(src + 4 * sj, offsetof<O>() + IMAGINARY);
  const cr = v128.load(src + 2 * sj, offsetof<O>());
  const ci = v128.load(src + 2 * sj, offsetof<O>() + IMAGINARY);
  const gr = v128.load(src + 3 * sj, offsetof<O>());
  const gi = v128.load(src + 3 * sj, offsetof<O>() + IMAGINARY);
  const pr = add(br, er);
  const pi = add(bi, ei);
  const qr = add(cr, gr);
  const qi = add(ci, gi);
  const mr = sub(br, er);
  const mi = sub(bi, ei);
  const nr = sub(cr, gr);
  const ni = sub(ci, gi);
  put<O>(add(ar, add(pr, qr)), add(ai, add(pi, qi)), dst, 0, false);
  const c1 = f64x2.splat(COS_72);
  const c2 = f64x2.splat(COS_144);
  const s1 = f64x2.splat(SIN_72);
  const s2 = f64x2.splat(SIN_144);
  const t1r = add(ar, add(mul(c1, pr), mul(c2, qr)));
  const t1i = add(ai, add(mul(c1, pi), mul(c2, qi)));
  const u1r = add(mul(s1, mr), mul(s2, nr));
  const u1i = add(mul(s1, mi), mul(s2, ni));
  put<O>(add(t1r, u1i), sub(t1i, u1r), dst + dk, tw, twiddled);
  put<O>(sub(t1r, u1i), add(t1i, u1r), dst + 4 * dk, tw + 48, twiddled);
  const t2r = add(ar, add(mul(c2, pr), mul(c1, qr)));
  const t2i = add(ai, add(mul(c2, pi), mul(c1, qi)));
  const u2r = sub(mul(s2, mr), mul(s1, nr));
  const u2i = sub(mul(s2, mi), mul(s1, ni));
  put<O>(add(t2r, u2i), sub(t2i, u2r), dst + 2 * dk, tw + 16, twiddled);
  put<O>(sub(t2r, u2i), add(t2i, u2r), dst + 3 * dk, tw + 32, twiddled);
}

// @ts-ignore: decorator
@inline
function eight<O>(src: usize, sj: usize, dst: usize, dk: usize, tw: usize, twiddled: bool): void {
  // Odd outputs first: differences of opposite legs, turned by eighths of a circle.
  const a0r = v128.load(src, offsetof<O>());
  const a0i = v128.load(src, offsetof<O>() + IMAGINARY);
  const a4r = v128.load(src + 4 * sj, offsetof<O>());
  const a4i = v128.load(src + 4 * sj, offsetof<O>() + IMAGINARY);
  const b0r = add(a0r, a4r);
  const b0i = add(a0i, a4i);
  const c0r = sub(a0r, a4r);
  const c0i = sub(a0i, a4i);
  const a2r = v128.load(src + 2 * sj, offsetof<O>());
  const a2i = v128.load(src + 2 * sj, offsetof<O>() + IMAGINARY);
  const a6r = v128.load(src + 6 * sj, offsetof<O>());
  const a6i = v128.load(src + 6 * sj, offsetof<O>() + IMAGINARY);
  const b2r = add(a2r, a6r);
  const b2i = add(a2i, a6i);
  const c2r = sub(a2r, a6r);
  const c2i = sub(a2i, a6i);
  const a1r = v128.load(src + sj, offsetof<O>());
  const a1i = v128.load(src + sj, offsetof<O>() + IMAGINARY);
  const a5r = v128.load(src + 5 * sj, offsetof<O>());
  const a5i = v128.load(src + 5 * sj, offsetof<O>() + IMAGINARY);
  const b1r = add(a1r, a5r);
  const b1i = add(a1i, a5i);
  const c1r = sub(a1r, a5r);
  const c1i = sub(a1i, a5i);
  const a3r = v128.load(src + 3 * sj, offsetof<O>());
  const a3i = v128.load(src + 3 * sj, offsetof<O>() + IMAGINARY);
  const a7r = v128.load(src + 7 * sj, offsetof<O>());
  const a7i = v128.load(src + 7 * sj, offsetof<O>() + IMAGINARY);
  const b3r = add(a3r, a7r);
  const b3i = add(a3i, a7i);
  const c3r = sub(a3r, a7r);
  const c3i = sub(a3i, a7i);
  const h = f64x2.splat(SQRT_HALF);
  // exp(-i pi/4) c1 and exp(-3 i pi/4) c3, their sum and difference.
  const d1r = add(c1r, c1i);
  const d1i = sub(c1i, c1r);
  const d3r = sub(c3i, c3r);
  const d3i = add(c3r, c3i);
  const e1r = mul(h, add(d1r, d3r));
  const e1i = mul(h, sub(d1i, d3i));
  const e3r = mul(h, sub(d1r, d3r));
  const e3i = mul(h, add(d1i, d3i));
  const pr = add(c0r, c2i);
  const pi = sub(c0i, c2r);
  const mr = sub(c0r, c2i);
  const mi = add(c0i, c2r);
  put<O>(add(pr, e1r), add(pi, e1i), dst + dk, tw, twiddled);
  put<O>(sub(pr, e1r), sub(pi, e1i), dst + 5 * dk, tw + 64, twiddled);
  put<O>(add(mr, e3i), sub(mi, e3r), dst + 3 * dk, tw + 32, twiddled);
  put<O>(sub(mr, e3i), add(mi, e3r), dst + 7 * dk, tw + 96, twiddled);
  const fr = add(b0r, b2r);
  const fi = add(b0i, b2i);
  const gr = sub(b0r, b2r);
  const gi = sub(b0i, b2i);
  const kr = add(b1r, b3r);
  const ki = add(b1i, b3i);
  const lr = sub(b1r, b3r);
  const li = sub(b1i, b3i);
  put<O>(add(fr, kr), add(fi, ki), dst, 0, false);
  put<O>(sub(fr, kr), sub(fi, ki), dst + 4 * dk, tw + 48, twiddled);
  put<O>(add(gr, li), sub(gi, lr), dst + 2 * dk, tw + 16, twiddled);
  put<O>(sub(gr, li), add(gi, lr), dst + 6 * dk, tw + 80, twiddled);
}

// @ts-ignore: decorator
@inline
function butterfly<O>(radix: i32, src: usize, sj: usize, dst: usize, dk: usize, tw: usize, twiddled: bool): void {
  if (radix == 8) eight<O>(src, sj, dst, dk, tw, twiddled);
  else if (radix == 5) five<O>(src, sj, dst, dk, tw, twiddled);
  else if (radix == 4) four<O>(src, sj, dst, dk, tw, twiddled);
  else if (radix == 3) three<O>(src, sj, dst, dk, tw, twiddled);
  else two<O>(src, sj, dst, dk, tw, twiddled);
}

/** All q of one p: the twiddle factors stay the same. */
// @ts-ignore: decorator
@inline
function group(radix: i32, src: usize, dst: usize, m: usize, s: usize, tw: usize, twiddled: bool): void {
  const sj = m * s * POINT;
  const dk = s * POINT;
  const end = src + dk;
  while (src < end) {
    butterfly<At0>(radix, src, sj, dst, dk, tw, twiddled);
    butterfly<At16>(radix, src, sj, dst, dk, tw, twiddled);
    butterfly<At32>(radix, src, sj, dst, dk, tw, twiddled);
    butterfly<At48>(radix, src, sj, dst, dk, tw, twiddled);
    src += POINT;
    dst += POINT;
  }
}

// @ts-ignore: decorator
@inline
function pass(radix: i32, src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  group(radix, src, dst, m, s, 0, false);
  for (let p: usize = 1; p < m; p++) {
    src += s * POINT;
    dst += <usize>radix * s * POINT;
    group(radix, src, dst, m, s, tw, true);
    tw += 16 * <usize>(radix - 1);
  }
}

export function pass2(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  pass(2, src, dst, m, s, tw);
}

export function pass3(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  pass(3, src, dst, m, s, tw);
}

export function pass4(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  pass(4, src, dst, m, s, tw);
}

export function pass5(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  pass(5, src, dst, m, s, tw);
}

export function pass8(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  pass(8, src, dst, m, s, tw);
}
