// Inverse transforms (sign +, not normalised) of a band of modes, over the lanes of a point at once,
// in single or double precision T. A point is 64 bytes: two vectors of real parts, then two of
// imaginary parts; so it has L = 8 (f32) or 4 (f64) lanes.
//
// A length n = r m of which only the frequencies -k .. k count, 2 k + 1 <= m, is done as a spread,
//   y[p][v] = x[p] exp(2 pi i f(p) v / n), v < r, f(p) = p or p - m,
// and the passes of length m over the r sequences of v (Stockham, decimation in frequency).
//
// A plan as the host writes it (volume-plan.ts), u32: m, r, k, spread factors, number of passes, then
// for each pass radix, m, s, twiddle factors. Addresses are absolute; factors are pairs (re, im) of T.

/** Bytes of one point, and from its real to its imaginary parts. */
export const POINT: usize = 64;
export const IMAGINARY: usize = 32;

// @ts-ignore: decorator
@inline
const SIN_60: f64 = 0.8660254037844386468;
// @ts-ignore: decorator
@inline
const COS_72: f64 = 0.3090169943749474241;
// @ts-ignore: decorator
@inline
const COS_144: f64 = -0.8090169943749474241;
// @ts-ignore: decorator
@inline
const SIN_72: f64 = 0.9510565162951535721;
// @ts-ignore: decorator
@inline
const SIN_144: f64 = 0.5877852522924731292;

// @ts-ignore: decorator
@inline
function add<T>(a: v128, b: v128): v128 {
  return v128.add<T>(a, b);
}

// @ts-ignore: decorator
@inline
function sub<T>(a: v128, b: v128): v128 {
  return v128.sub<T>(a, b);
}

// @ts-ignore: decorator
@inline
function mul<T>(a: v128, b: v128): v128 {
  return v128.mul<T>(a, b);
}

// @ts-ignore: decorator
@inline
function splat<T>(x: f64): v128 {
  return v128.splat<T>(<T>x);
}

/** Stores (re + i im) (wr + i wi). */
// @ts-ignore: decorator
@inline
function put<T>(to: usize, re: v128, im: v128, wr: v128, wi: v128): void {
  v128.store(to, sub<T>(mul<T>(re, wr), mul<T>(im, wi)));
  v128.store(to, add<T>(mul<T>(re, wi), mul<T>(im, wr)), IMAGINARY);
}

/** Transforms the m points at `from`, and gives where its n points are: in a, in b, or in place. */
export function synthesise<T>(plan: usize, from: usize, a: usize, b: usize): usize {
  const count = load<u32>(plan, 16);
  let src = from;
  let dst = a;
  if (load<u32>(plan, 4) > 1) {
    spread<T>(plan, src, dst);
    src = a;
    dst = b;
  }
  for (let i: u32 = 0; i < count; i++) {
    const pass = plan + 20 + 16 * i;
    const radix = load<u32>(pass);
    const m: usize = load<u32>(pass, 4);
    const s: usize = load<u32>(pass, 8);
    const factors: usize = load<u32>(pass, 12);
    if (radix == 4) pass4<T>(src, dst, m, s, factors);
    else if (radix == 2) pass2<T>(src, dst, m, s, factors);
    else if (radix == 3) pass3<T>(src, dst, m, s, factors);
    else pass5<T>(src, dst, m, s, factors);
    src = dst;
    dst = src == a ? b : a;
  }
  return src;
}

function spread<T>(plan: usize, src: usize, dst: usize): void {
  const m: usize = load<u32>(plan);
  const r: usize = load<u32>(plan, 4);
  const k: usize = load<u32>(plan, 8);
  let w: usize = load<u32>(plan, 12);
  for (let p: usize = 0; p < m; p++) {
    if (p == k + 1) {
      const gap = m - 2 * k - 1;
      memory.fill(dst + p * r * POINT, 0, gap * r * POINT);
      w += 2 * gap * r * sizeof<T>();
      p += gap;
      if (p == m) break;
    }
    const from = src + p * POINT;
    const r0 = v128.load(from);
    const r1 = v128.load(from, 16);
    const i0 = v128.load(from, IMAGINARY);
    const i1 = v128.load(from, IMAGINARY + 16);
    let to = dst + p * r * POINT;
    for (const end = to + r * POINT; to < end; to += POINT) {
      const wr = v128.load_splat<T>(w);
      const wi = v128.load_splat<T>(w + sizeof<T>());
      put<T>(to, r0, i0, wr, wi);
      put<T>(to + 16, r1, i1, wr, wi);
      w += 2 * sizeof<T>();
    }
  }
}

function pass2<T>(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  const leg = m * s * POINT;
  const step = s * POINT;
  let wr = splat<T>(1);
  let wi = splat<T>(0);
  for (let p: usize = 0; p < m; p++) {
    if (p > 0) {
      wr = v128.load_splat<T>(tw);
      wi = v128.load_splat<T>(tw + sizeof<T>());
      tw += 2 * sizeof<T>();
    }
    let to = dst + 2 * p * step;
    for (const end = src + step; src < end; src += POINT) {
      for (let o: usize = 0; o < 32; o += 16) {
        const ar = v128.load(src + o);
        const ai = v128.load(src + o, IMAGINARY);
        const br = v128.load(src + o + leg);
        const bi = v128.load(src + o + leg, IMAGINARY);
        v128.store(to + o, add<T>(ar, br));
        v128.store(to + o, add<T>(ai, bi), IMAGINARY);
        put<T>(to + o + step, sub<T>(ar, br), sub<T>(ai, bi), wr, wi);
      }
      to += POINT;
    }
  }
}

function pass4<T>(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  const leg = m * s * POINT;
  const step = s * POINT;
  const unit = sizeof<T>();
  for (let p: usize = 0; p < m; p++) {
    let to = dst + 4 * p * step;
    const end = src + step;
    if (p == 0) {
      for (; src < end; src += POINT) {
        plain4<T>(src, leg, to, step);
        plain4<T>(src + 16, leg, to + 16, step);
        to += POINT;
      }
      continue;
    }
    const w1r = v128.load_splat<T>(tw);
    const w1i = v128.load_splat<T>(tw + unit);
    const w2r = v128.load_splat<T>(tw + 2 * unit);
    const w2i = v128.load_splat<T>(tw + 3 * unit);
    const w3r = v128.load_splat<T>(tw + 4 * unit);
    const w3i = v128.load_splat<T>(tw + 5 * unit);
    tw += 6 * unit;
    for (; src < end; src += POINT) {
      turned4<T>(src, leg, to, step, w1r, w1i, w2r, w2i, w3r, w3i);
      turned4<T>(src + 16, leg, to + 16, step, w1r, w1i, w2r, w2i, w3r, w3i);
      to += POINT;
    }
  }
}

// @ts-ignore: decorator
@inline
function plain4<T>(src: usize, leg: usize, to: usize, step: usize): void {
  const ar = v128.load(src);
  const ai = v128.load(src, IMAGINARY);
  const br = v128.load(src + leg);
  const bi = v128.load(src + leg, IMAGINARY);
  const cr = v128.load(src + 2 * leg);
  const ci = v128.load(src + 2 * leg, IMAGINARY);
  const dr = v128.load(src + 3 * leg);
  const di = v128.load(src + 3 * leg, IMAGINARY);
  const sr = add<T>(ar, cr);
  const si = add<T>(ai, ci);
  const tr = add<T>(br, dr);
  const ti = add<T>(bi, di);
  v128.store(to, add<T>(sr, tr));
  v128.store(to, add<T>(si, ti), IMAGINARY);
  v128.store(to + 2 * step, sub<T>(sr, tr));
  v128.store(to + 2 * step, sub<T>(si, ti), IMAGINARY);
  const ur = sub<T>(ar, cr);
  const ui = sub<T>(ai, ci);
  const vr = sub<T>(br, dr);
  const vi = sub<T>(bi, di);
  v128.store(to + step, sub<T>(ur, vi));
  v128.store(to + step, add<T>(ui, vr), IMAGINARY);
  v128.store(to + 3 * step, add<T>(ur, vi));
  v128.store(to + 3 * step, sub<T>(ui, vr), IMAGINARY);
}

// @ts-ignore: decorator
@inline
function turned4<T>(src: usize, leg: usize, to: usize, step: usize, w1r: v128, w1i: v128, w2r: v128, w2i: v128, w3r: v128, w3i: v128): void {
  const ar = v128.load(src);
  const ai = v128.load(src, IMAGINARY);
  const br = v128.load(src + leg);
  const bi = v128.load(src + leg, IMAGINARY);
  const cr = v128.load(src + 2 * leg);
  const ci = v128.load(src + 2 * leg, IMAGINARY);
  const dr = v128.load(src + 3 * leg);
  const di = v128.load(src + 3 * leg, IMAGINARY);
  const sr = add<T>(ar, cr);
  const si = add<T>(ai, ci);
  const tr = add<T>(br, dr);
  const ti = add<T>(bi, di);
  v128.store(to, add<T>(sr, tr));
  v128.store(to, add<T>(si, ti), IMAGINARY);
  put<T>(to + 2 * step, sub<T>(sr, tr), sub<T>(si, ti), w2r, w2i);
  const ur = sub<T>(ar, cr);
  const ui = sub<T>(ai, ci);
  const vr = sub<T>(br, dr);
  const vi = sub<T>(bi, di);
  put<T>(to + step, sub<T>(ur, vi), add<T>(ui, vr), w1r, w1i);
  put<T>(to + 3 * step, add<T>(ur, vi), sub<T>(ui, vr), w3r, w3i);
}

/** Loads factor k of a butterfly, or 1 where p is 0. */
// @ts-ignore: decorator
@inline
function factor<T>(tw: usize, k: usize, p: usize, part: usize): v128 {
  if (p == 0) return splat<T>(part == 0 ? 1 : 0);
  return v128.load_splat<T>(tw + (2 * k + part) * sizeof<T>());
}

function pass3<T>(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  const leg = m * s * POINT;
  const step = s * POINT;
  const half = splat<T>(0.5);
  const sin = splat<T>(SIN_60);
  for (let p: usize = 0; p < m; p++) {
    const w1r = factor<T>(tw, 0, p, 0);
    const w1i = factor<T>(tw, 0, p, 1);
    const w2r = factor<T>(tw, 1, p, 0);
    const w2i = factor<T>(tw, 1, p, 1);
    if (p > 0) tw += 4 * sizeof<T>();
    let to = dst + 3 * p * step;
    for (const end = src + step; src < end; src += POINT) {
      for (let o: usize = 0; o < 32; o += 16) {
        const ar = v128.load(src + o);
        const ai = v128.load(src + o, IMAGINARY);
        const br = v128.load(src + o + leg);
        const bi = v128.load(src + o + leg, IMAGINARY);
        const cr = v128.load(src + o + 2 * leg);
        const ci = v128.load(src + o + 2 * leg, IMAGINARY);
        const tr = add<T>(br, cr);
        const ti = add<T>(bi, ci);
        v128.store(to + o, add<T>(ar, tr));
        v128.store(to + o, add<T>(ai, ti), IMAGINARY);
        const ur = sub<T>(ar, mul<T>(half, tr));
        const ui = sub<T>(ai, mul<T>(half, ti));
        const vr = mul<T>(sin, sub<T>(br, cr));
        const vi = mul<T>(sin, sub<T>(bi, ci));
        put<T>(to + o + step, sub<T>(ur, vi), add<T>(ui, vr), w1r, w1i);
        put<T>(to + o + 2 * step, add<T>(ur, vi), sub<T>(ui, vr), w2r, w2i);
      }
      to += POINT;
    }
  }
}

function pass5<T>(src: usize, dst: usize, m: usize, s: usize, tw: usize): void {
  const leg = m * s * POINT;
  const step = s * POINT;
  const c1 = splat<T>(COS_72);
  const c2 = splat<T>(COS_144);
  const s1 = splat<T>(SIN_72);
  const s2 = splat<T>(SIN_144);
  for (let p: usize = 0; p < m; p++) {
    let to = dst + 5 * p * step;
    for (const end = src + step; src < end; src += POINT) {
      for (let o: usize = 0; o < 32; o += 16) {
        const ar = v128.load(src + o);
        const ai = v128.load(src + o, IMAGINARY);
        const br = v128.load(src + o + leg);
        const bi = v128.load(src + o + leg, IMAGINARY);
        const cr = v128.load(src + o + 2 * leg);
        const ci = v128.load(src + o + 2 * leg, IMAGINARY);
        const dr = v128.load(src + o + 3 * leg);
        const di = v128.load(src + o + 3 * leg, IMAGINARY);
        const er = v128.load(src + o + 4 * leg);
        const ei = v128.load(src + o + 4 * leg, IMAGINARY);
        const pr = add<T>(br, er);
        const pi = add<T>(bi, ei);
        const qr = add<T>(cr, dr);
        const qi = add<T>(ci, di);
        const mr = sub<T>(br, er);
        const mi = sub<T>(bi, ei);
        const nr = sub<T>(cr, dr);
        const ni = sub<T>(ci, di);
        v128.store(to + o, add<T>(ar, add<T>(pr, qr)));
        v128.store(to + o, add<T>(ai, add<T>(pi, qi)), IMAGINARY);
        const ur = add<T>(ar, add<T>(mul<T>(c1, pr), mul<T>(c2, qr)));
        const ui = add<T>(ai, add<T>(mul<T>(c1, pi), mul<T>(c2, qi)));
        const vr = add<T>(mul<T>(s1, mr), mul<T>(s2, nr));
        const vi = add<T>(mul<T>(s1, mi), mul<T>(s2, ni));
        put<T>(to + o + step, sub<T>(ur, vi), add<T>(ui, vr), factor<T>(tw, 0, p, 0), factor<T>(tw, 0, p, 1));
        put<T>(to + o + 4 * step, add<T>(ur, vi), sub<T>(ui, vr), factor<T>(tw, 3, p, 0), factor<T>(tw, 3, p, 1));
        const xr = add<T>(ar, add<T>(mul<T>(c2, pr), mul<T>(c1, qr)));
        const xi = add<T>(ai, add<T>(mul<T>(c2, pi), mul<T>(c1, qi)));
        const yr = sub<T>(mul<T>(s2, mr), mul<T>(s1, nr));
        const yi = sub<T>(mul<T>(s2, mi), mul<T>(s1, ni));
        put<T>(to + o + 2 * step, sub<T>(xr, yi), add<T>(xi, yr), factor<T>(tw, 1, p, 0), factor<T>(tw, 1, p, 1));
        put<T>(to + o + 3 * step, add<T>(xr, yi), sub<T>(xi, yr), factor<T>(tw, 2, p, 0), factor<T>(tw, 2, p, 1));
      }
      to += POINT;
    }
    if (p > 0) tw += 8 * sizeof<T>();
  }
}
