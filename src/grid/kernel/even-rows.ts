// Real rows of even length nx, eight at once, as complex transforms of length h = nx / 2:
// z(j) = f(2 j) + i f(2 j + 1). With Z its transform and W = exp(-2 pi i / nx),
//   E(k) = (Z(k) + conj Z(h - k)) / 2,  O(k) = (Z(k) - conj Z(h - k)) / 2i,
//   F(k) = E(k) + W^k O(k),  F(h - k) = conj(E(k) - W^k O(k)).
// `values` addresses eight dense rows of nx numbers; `re, im` eight rows of `stride` bytes with
// h + 1 numbers each. `turn` points to g W^k, k = 0 .. h / 2, with g = 1/2 forward and
// g = 1 / (nx ny), also given as `gain`, backward.
import { IMAGINARY, POINT, scratch } from './scratch';
import { transformScratch } from './transform';

/** (a0, b0) of two vectors (a0, a1), (b0, b1). */
// @ts-ignore: decorator
@inline
function lows(a: v128, b: v128): v128 {
  return v128.shuffle<f64>(a, b, 0, 2);
}

/** (a1, b1). */
// @ts-ignore: decorator
@inline
function highs(a: v128, b: v128): v128 {
  return v128.shuffle<f64>(a, b, 1, 3);
}

export function forwardEvenRows(plan: usize, nx: usize, values: usize, turn: usize, re: usize, im: usize, stride: usize): void {
  const h = nx >> 1;
  gatherPairs(values, 8 * nx, h, scratch.a);
  const z = transformScratch(plan, false);
  firstForward(z, h, re, im, stride);
  let k: usize = 1;
  for (; k + 1 <= h >> 1; k += 2) {
    for (let lane: usize = 0; lane < 8; lane += 2) {
      const to = lane * stride;
      untangleTwo(z + 8 * lane, h, k, turn, re + to, im + to, stride);
    }
  }
  if (k <= h >> 1) {
    for (let lane: usize = 0; lane < 8; lane += 2) {
      untangleOne(z + 8 * lane, h, k, turn, re + lane * stride, im + lane * stride, stride);
    }
  }
}

/** Rows of pairs to points: lane r of point j is row r at 2 j (real) and 2 j + 1 (imaginary). */
function gatherPairs(values: usize, rowBytes: usize, h: usize, to: usize): void {
  for (let lane: usize = 0; lane < 8; lane += 2) {
    let v = values + lane * rowBytes;
    let t = to + 8 * lane;
    const end = v + 16 * h;
    while (v < end) {
      const p = v128.load(v);
      const q = v128.load(v + rowBytes);
      v128.store(t, lows(p, q));
      v128.store(t, highs(p, q), 64);
      v += 16;
      t += POINT;
    }
  }
}

/** F(0) and F(h), both real. */
function firstForward(z: usize, h: usize, re: usize, im: usize, stride: usize): void {
  for (let lane: usize = 0; lane < 8; lane++) {
    const zr = load<f64>(z + 8 * lane);
    const zi = load<f64>(z + 8 * lane, 64);
    const to = lane * stride;
    store<f64>(re + to, zr + zi);
    store<f64>(im + to, 0);
    store<f64>(re + to + 8 * h, zr - zi);
    store<f64>(im + to + 8 * h, 0);
  }
}

/** Modes k, k + 1 and their mirrors h - k, h - k - 1, of two rows. */
// @ts-ignore: decorator
@inline
function untangleTwo(z: usize, h: usize, k: usize, turn: usize, re: usize, im: usize, stride: usize): void {
  const half = f64x2.splat(0.5);
  const z0 = z + k * POINT;
  const y0 = z + (h - k) * POINT;
  const y1 = y0 - POINT;
  const w = turn + 16 * k;
  const zr0 = v128.load(z0);
  const yr0 = v128.load(y0);
  const zi0 = v128.load(z0, 64);
  const yi0 = v128.load(y0, 64);
  const er0 = f64x2.mul(half, f64x2.add(zr0, yr0));
  const ei0 = f64x2.mul(half, f64x2.sub(zi0, yi0));
  const or0 = f64x2.add(zi0, yi0);
  const oi0 = f64x2.sub(yr0, zr0);
  const wr0 = v128.load_splat<f64>(w);
  const wi0 = v128.load_splat<f64>(w, 8);
  const tr0 = f64x2.sub(f64x2.mul(wr0, or0), f64x2.mul(wi0, oi0));
  const ti0 = f64x2.add(f64x2.mul(wr0, oi0), f64x2.mul(wi0, or0));
  const zr1 = v128.load(z0, 128);
  const yr1 = v128.load(y1);
  const zi1 = v128.load(z0, 192);
  const yi1 = v128.load(y1, 64);
  const er1 = f64x2.mul(half, f64x2.add(zr1, yr1));
  const ei1 = f64x2.mul(half, f64x2.sub(zi1, yi1));
  const or1 = f64x2.add(zi1, yi1);
  const oi1 = f64x2.sub(yr1, zr1);
  const wr1 = v128.load_splat<f64>(w, 16);
  const wi1 = v128.load_splat<f64>(w, 24);
  const tr1 = f64x2.sub(f64x2.mul(wr1, or1), f64x2.mul(wi1, oi1));
  const ti1 = f64x2.add(f64x2.mul(wr1, oi1), f64x2.mul(wi1, or1));
  const fr0 = f64x2.add(er0, tr0);
  const fr1 = f64x2.add(er1, tr1);
  const r = re + 8 * k;
  v128.store(r, lows(fr0, fr1));
  v128.store(r + stride, highs(fr0, fr1));
  const fi0 = f64x2.add(ei0, ti0);
  const fi1 = f64x2.add(ei1, ti1);
  const i = im + 8 * k;
  v128.store(i, lows(fi0, fi1));
  v128.store(i + stride, highs(fi0, fi1));
  const mr0 = f64x2.sub(er0, tr0);
  const mr1 = f64x2.sub(er1, tr1);
  const mirrorR = re + 8 * (h - k - 1);
  v128.store(mirrorR, lows(mr1, mr0));
  v128.store(mirrorR + stride, highs(mr1, mr0));
  const mi0 = f64x2.sub(ti0, ei0);
  const mi1 = f64x2.sub(ti1, ei1);
  const mirrorI = im + 8 * (h - k - 1);
  v128.store(mirrorI, lows(mi1, mi0));
  v128.store(mirrorI + stride, highs(mi1, mi0));
}

/** Mode k and its mirror h - k (perhaps the same), of two rows. */
function untangleOne(z: usize, h: usize, k: usize, turn: usize, re: usize, im: usize, stride: usize): void {
  const half = f64x2.splat(0.5);
  const z0 = z + k * POINT;
  const y0 = z + (h - k) * POINT;
  const zr = v128.load(z0);
  const yr = v128.load(y0);
  const zi = v128.load(z0, 64);
  const yi = v128.load(y0, 64);
  const er = f64x2.mul(half, f64x2.add(zr, yr));
  const ei = f64x2.mul(half, f64x2.sub(zi, yi));
  const or = f64x2.add(zi, yi);
  const oi = f64x2.sub(yr, zr);
  const wr = v128.load_splat<f64>(turn + 16 * k);
  const wi = v128.load_splat<f64>(turn + 16 * k, 8);
  const tr = f64x2.sub(f64x2.mul(wr, or), f64x2.mul(wi, oi));
  const ti = f64x2.add(f64x2.mul(wr, oi), f64x2.mul(wi, or));
  storeLanes(re + 8 * k, stride, f64x2.add(er, tr));
  storeLanes(im + 8 * k, stride, f64x2.add(ei, ti));
  storeLanes(re + 8 * (h - k), stride, f64x2.sub(er, tr));
  storeLanes(im + 8 * (h - k), stride, f64x2.sub(ti, ei));
}

// @ts-ignore: decorator
@inline
function storeLanes(to: usize, stride: usize, v: v128): void {
  v128.store_lane<f64>(to, v, 0);
  v128.store_lane<f64>(to + stride, v, 1);
}

/** The way back: overwrites the eight rows at `values`. Imaginary parts of F(0), F(h) are ignored. */
export function inverseEvenRows(plan: usize, nx: usize, values: usize, turn: usize, gain: f64, re: usize, im: usize, stride: usize): void {
  const h = nx >> 1;
  const z = scratch.a;
  firstInverse(z, h, gain, re, im, stride);
  let k: usize = 1;
  for (; k + 1 <= h >> 1; k += 2) {
    for (let lane: usize = 0; lane < 8; lane += 2) {
      const from = lane * stride;
      tangleTwo(z + 8 * lane, h, k, turn, gain, re + from, im + from, stride);
    }
  }
  if (k <= h >> 1) {
    for (let lane: usize = 0; lane < 8; lane += 2) {
      tangleOne(z + 8 * lane, h, k, turn, gain, re + lane * stride, im + lane * stride, stride);
    }
  }
  scatterPairs(transformScratch(plan, true), h, values, 8 * nx);
}

function firstInverse(z: usize, h: usize, gain: f64, re: usize, im: usize, stride: usize): void {
  for (let lane: usize = 0; lane < 8; lane++) {
    const f = gain * load<f64>(re + lane * stride);
    const g = gain * load<f64>(re + lane * stride + 8 * h);
    store<f64>(z + 8 * lane, f + g);
    store<f64>(z + 8 * lane, f - g, 64);
  }
}

// @ts-ignore: decorator
@inline
function tangleTwo(z: usize, h: usize, k: usize, turn: usize, gain: f64, re: usize, im: usize, stride: usize): void {
  const r = re + 8 * k;
  const i = im + 8 * k;
  const mirrorR = re + 8 * (h - k - 1);
  const mirrorI = im + 8 * (h - k - 1);
  const ra = v128.load(r);
  const rb = v128.load(r + stride);
  const ia = v128.load(i);
  const ib = v128.load(i + stride);
  const sa = v128.load(mirrorR);
  const sb = v128.load(mirrorR + stride);
  const ja = v128.load(mirrorI);
  const jb = v128.load(mirrorI + stride);
  const z0 = z + k * POINT;
  const y0 = z + (h - k) * POINT;
  const w = turn + 16 * k;
  tangle(lows(ra, rb), lows(ia, ib), highs(sa, sb), highs(ja, jb), gain, w, z0, y0);
  tangle(highs(ra, rb), highs(ia, ib), lows(sa, sb), lows(ja, jb), gain, w + 16, z0 + POINT, y0 - POINT);
}

function tangleOne(z: usize, h: usize, k: usize, turn: usize, gain: f64, re: usize, im: usize, stride: usize): void {
  const fr = loadLanes(re + 8 * k, stride);
  const fi = loadLanes(im + 8 * k, stride);
  const gr = loadLanes(re + 8 * (h - k), stride);
  const gi = loadLanes(im + 8 * (h - k), stride);
  tangle(fr, fi, gr, gi, gain, turn + 16 * k, z + k * POINT, z + (h - k) * POINT);
}

// @ts-ignore: decorator
@inline
function loadLanes(from: usize, stride: usize): v128 {
  return v128.load_lane<f64>(from + stride, v128.load_zero<f64>(from), 1);
}

/**
 * Z(k) = E + i O and Z(h - k) = conj E + i conj O with E = g (F + conj G), O = g conj(W^k) (F - conj G),
 * where F = F(k) and G = F(h - k).
 */
// @ts-ignore: decorator
@inline
function tangle(fr: v128, fi: v128, gr: v128, gi: v128, gain: f64, w: usize, z: usize, y: usize): void {
  const g = f64x2.splat(gain);
  const er = f64x2.mul(g, f64x2.add(fr, gr));
  const ei = f64x2.mul(g, f64x2.sub(fi, gi));
  const dr = f64x2.sub(fr, gr);
  const di = f64x2.add(fi, gi);
  const wr = v128.load_splat<f64>(w);
  const wi = v128.load_splat<f64>(w, 8);
  const or = f64x2.add(f64x2.mul(wr, dr), f64x2.mul(wi, di));
  const oi = f64x2.sub(f64x2.mul(wr, di), f64x2.mul(wi, dr));
  v128.store(z, f64x2.sub(er, oi));
  v128.store(z, f64x2.add(ei, or), 64);
  v128.store(y, f64x2.add(er, oi));
  v128.store(y, f64x2.sub(or, ei), 64);
}

function scatterPairs(z: usize, h: usize, values: usize, rowBytes: usize): void {
  for (let lane: usize = 0; lane < 8; lane += 2) {
    let v = values + lane * rowBytes;
    let t = z + 8 * lane;
    const end = v + 16 * h;
    while (v < end) {
      const p = v128.load(t);
      const q = v128.load(t, 64);
      v128.store(v, lows(p, q));
      v128.store(v + rowBytes, highs(p, q));
      v += 16;
      t += POINT;
    }
  }
}
