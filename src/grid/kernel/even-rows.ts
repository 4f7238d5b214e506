// Real rows of even length nx, eight at once, as complex transforms of length h = nx / 2:
// z(j) = f(2 j) + i f(2 j + 1). With Z its transform and W = exp(-2 pi i / nx),
//   E(k) = (Z(k) + conj Z(h - k)) / 2,  O(k) = (Z(k) - conj Z(h - k)) / 2i,
//   F(k) = E(k) + W^k O(k),  F(h - k) = conj(E(k) - W^k O(k)).
// F(0) and F(h) are real and share column 0, as its real and imaginary parts.
// `values` addresses eight dense rows of nx numbers; `tiles` and `tileBytes` are those of tiles.ts.
// `turn` points to g W^k, k = 0 .. h / 2, with g = 1/2 forward and g = 1 / (nx ny), also given as
// `gain`, backward.
import { At0, At16, At32, At48, IMAGINARY, POINT, scratch } from './scratch';
import { transform } from './transform';

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

export function forwardEvenRows(plan: usize, nx: usize, values: usize, turn: usize, tiles: usize, tileBytes: usize): void {
  const h = nx >> 1;
  const z = scratch.row;
  gatherPairs(values, 8 * nx, h, z);
  transform(plan, z);
  for (let lane: usize = 0; lane < 8; lane++) {
    const zr = load<f64>(z + 8 * lane);
    const zi = load<f64>(z + 8 * lane, IMAGINARY);
    store<f64>(tiles + POINT * lane, zr + zi);
    store<f64>(tiles + POINT * lane, zr - zi, IMAGINARY);
  }
  for (let k: usize = 1; k <= h >> 1; k++) {
    const near = z + k * POINT;
    const far = z + (h - k) * POINT;
    const to = tiles + (k >> 3) * tileBytes + 8 * (k & 7);
    const mirror = tiles + ((h - k) >> 3) * tileBytes + 8 * ((h - k) & 7);
    untangle<At0>(near, far, turn + 16 * k, to, mirror);
    untangle<At16>(near, far, turn + 16 * k, to, mirror);
    untangle<At32>(near, far, turn + 16 * k, to, mirror);
    untangle<At48>(near, far, turn + 16 * k, to, mirror);
  }
}

/** Rows of pairs to points: lane r of point j is row r at 2 j (real) and 2 j + 1 (imaginary). */
function gatherPairs(values: usize, rowBytes: usize, h: usize, to: usize): void {
  const end = values + 16 * h;
  while (values < end) {
    gatherTwo<At0>(values, rowBytes, to);
    gatherTwo<At16>(values + 2 * rowBytes, rowBytes, to);
    gatherTwo<At32>(values + 4 * rowBytes, rowBytes, to);
    gatherTwo<At48>(values + 6 * rowBytes, rowBytes, to);
    values += 16;
    to += POINT;
  }
}

// @ts-ignore: decorator
@inline
function gatherTwo<O>(row: usize, rowBytes: usize, to: usize): void {
  const p = v128.load(row);
  const q = v128.load(row + rowBytes);
  v128.store(to, lows(p, q), offsetof<O>());
  v128.store(to, highs(p, q), offsetof<O>() + IMAGINARY);
}

/** F(k) and F(h - k) of two rows, from Z(k) at `near` and Z(h - k) at `far`. */
// @ts-ignore: decorator
@inline
function untangle<O>(near: usize, far: usize, w: usize, to: usize, mirror: usize): void {
  const half = f64x2.splat(0.5);
  const zr = v128.load(near, offsetof<O>());
  const yr = v128.load(far, offsetof<O>());
  const zi = v128.load(near, offsetof<O>() + IMAGINARY);
  const yi = v128.load(far, offsetof<O>() + IMAGINARY);
  const er = f64x2.mul(half, f64x2.add(zr, yr));
  const ei = f64x2.mul(half, f64x2.sub(zi, yi));
  const or = f64x2.add(zi, yi);
  const oi = f64x2.sub(yr, zr);
  const wr = v128.load_splat<f64>(w);
  const wi = v128.load_splat<f64>(w, 8);
  const tr = f64x2.sub(f64x2.mul(wr, or), f64x2.mul(wi, oi));
  const ti = f64x2.add(f64x2.mul(wr, oi), f64x2.mul(wi, or));
  storeTwo<O>(to, f64x2.add(er, tr), f64x2.add(ei, ti));
  storeTwo<O>(mirror, f64x2.sub(er, tr), f64x2.sub(ti, ei));
}

/** The numbers of two neighbouring rows to one column: rows are a point apart. */
// @ts-ignore: decorator
@inline
function storeTwo<O>(to: usize, re: v128, im: v128): void {
  v128.store_lane<f64>(to, re, 0, 16 * offsetof<O>());
  v128.store_lane<f64>(to, re, 1, 16 * offsetof<O>() + POINT);
  v128.store_lane<f64>(to, im, 0, 16 * offsetof<O>() + IMAGINARY);
  v128.store_lane<f64>(to, im, 1, 16 * offsetof<O>() + POINT + IMAGINARY);
}

/**
 * The way back, times `gain`, from tiles whose real and imaginary parts have changed places to the
 * eight rows at `values`.
 */
export function inverseEvenRows(plan: usize, nx: usize, values: usize, turn: usize, gain: f64, tiles: usize, tileBytes: usize): void {
  const h = nx >> 1;
  const z = scratch.row;
  for (let lane: usize = 0; lane < 8; lane++) {
    const f = gain * load<f64>(tiles + POINT * lane, IMAGINARY);
    const g = gain * load<f64>(tiles + POINT * lane);
    store<f64>(z + 8 * lane, f + g, IMAGINARY);
    store<f64>(z + 8 * lane, f - g);
  }
  for (let k: usize = 1; k <= h >> 1; k++) {
    const near = z + k * POINT;
    const far = z + (h - k) * POINT;
    const from = tiles + (k >> 3) * tileBytes + 8 * (k & 7);
    const mirror = tiles + ((h - k) >> 3) * tileBytes + 8 * ((h - k) & 7);
    tangle<At0>(from, mirror, gain, turn + 16 * k, near, far);
    tangle<At16>(from, mirror, gain, turn + 16 * k, near, far);
    tangle<At32>(from, mirror, gain, turn + 16 * k, near, far);
    tangle<At48>(from, mirror, gain, turn + 16 * k, near, far);
  }
  transform(plan, z);
  scatterPairs(z, h, values, 8 * nx);
}

/**
 * Z(k) = E + i O and Z(h - k) = conj E + i conj O with E = g (F + conj G), O = g conj(W^k) (F - conj G),
 * where F = F(k) and G = F(h - k). Parts have changed places on both sides.
 */
// @ts-ignore: decorator
@inline
function tangle<O>(from: usize, mirror: usize, gain: f64, w: usize, near: usize, far: usize): void {
  const g = f64x2.splat(gain);
  const fr = loadTwo(from, 16 * offsetof<O>() + IMAGINARY);
  const fi = loadTwo(from, 16 * offsetof<O>());
  const gr = loadTwo(mirror, 16 * offsetof<O>() + IMAGINARY);
  const gi = loadTwo(mirror, 16 * offsetof<O>());
  const er = f64x2.mul(g, f64x2.add(fr, gr));
  const ei = f64x2.mul(g, f64x2.sub(fi, gi));
  const dr = f64x2.sub(fr, gr);
  const di = f64x2.add(fi, gi);
  const wr = v128.load_splat<f64>(w);
  const wi = v128.load_splat<f64>(w, 8);
  const or = f64x2.add(f64x2.mul(wr, dr), f64x2.mul(wi, di));
  const oi = f64x2.sub(f64x2.mul(wr, di), f64x2.mul(wi, dr));
  v128.store(near, f64x2.sub(er, oi), offsetof<O>() + IMAGINARY);
  v128.store(near, f64x2.add(ei, or), offsetof<O>());
  v128.store(far, f64x2.add(er, oi), offsetof<O>() + IMAGINARY);
  v128.store(far, f64x2.sub(or, ei), offsetof<O>());
}

/** The numbers of one column in two neighbouring rows. */
// @ts-ignore: decorator
@inline
function loadTwo(from: usize, offset: usize): v128 {
  return v128.load_lane<f64>(from + offset + POINT, v128.load_zero<f64>(from + offset), 1);
}

function scatterPairs(z: usize, h: usize, values: usize, rowBytes: usize): void {
  const end = values + 16 * h;
  while (values < end) {
    scatterTwo<At0>(z, values, rowBytes);
    scatterTwo<At16>(z, values + 2 * rowBytes, rowBytes);
    scatterTwo<At32>(z, values + 4 * rowBytes, rowBytes);
    scatterTwo<At48>(z, values + 6 * rowBytes, rowBytes);
    values += 16;
    z += POINT;
  }
}

// @ts-ignore: decorator
@inline
function scatterTwo<O>(z: usize, row: usize, rowBytes: usize): void {
  const p = v128.load(z, offsetof<O>() + IMAGINARY);
  const q = v128.load(z, offsetof<O>());
  v128.store(row, lows(p, q));
  v128.store(row + rowBytes, highs(p, q));
}
