// The half spectrum while it is being made: tiles of eight neighbouring columns, each a run of
// points, one point for each row. A tile is transformed where it lies; rows are written to it and
// read from it eight at a time, in runs of a kilobyte.
// `tiles` is the address of the first tile's first row wanted, `tileBytes` the way from tile to tile.
import { IMAGINARY, POINT } from './scratch';

/** `count` rows of `columns` numbers from the tiles to rows of `pitch` bytes at `re` and `im`. */
export function readRows(tiles: usize, tileBytes: usize, count: usize, columns: usize, pitch: usize, re: usize, im: usize): void {
  const whole = columns >> 3;
  for (let y: usize = 0; y < count; y++) {
    let from = tiles + y * POINT;
    let r = re + pitch * y;
    let i = im + pitch * y;
    for (let t: usize = 0; t < whole; t++) {
      copyEight(from, r);
      copyEight(from + IMAGINARY, i);
      from += tileBytes;
      r += 64;
      i += 64;
    }
    for (let x: usize = 0; x < 8 * (columns & 7); x += 8) {
      store<f64>(r + x, load<f64>(from + x));
      store<f64>(i + x, load<f64>(from + x, IMAGINARY));
    }
  }
}

/**
 * The first and last number of rows `from` .. `from + count - 1` of `ny`, for even nx: column 0 holds
 * Z = A + i B with A and B the transforms of two real columns, A(k) = (Z(k) + conj Z(-k)) / 2 and
 * B(k) = (Z(k) - conj Z(-k)) / 2i. `tile` is the address of row 0.
 */
export function readEdges(tile: usize, from: usize, count: usize, ny: usize, last: usize, pitch: usize, re: usize, im: usize): void {
  for (let y = from; y < from + count; y++) {
    const z = tile + y * POINT;
    const mirror = tile + (y == 0 ? 0 : ny - y) * POINT;
    const zr = load<f64>(z);
    const zi = load<f64>(z, IMAGINARY);
    const yr = load<f64>(mirror);
    const yi = load<f64>(mirror, IMAGINARY);
    store<f64>(re, 0.5 * (zr + yr));
    store<f64>(im, 0.5 * (zi - yi));
    store<f64>(re + 8 * last, 0.5 * (zi + yi));
    store<f64>(im + 8 * last, 0.5 * (yr - zr));
    re += pitch;
    im += pitch;
  }
}

/** The way back, for an inverse transform: real and imaginary parts change places. */
export function writeRowsSwapped(tiles: usize, tileBytes: usize, count: usize, columns: usize, pitch: usize, re: usize, im: usize): void {
  const whole = columns >> 3;
  for (let y: usize = 0; y < count; y++) {
    let to = tiles + y * POINT;
    let r = re + pitch * y;
    let i = im + pitch * y;
    for (let t: usize = 0; t < whole; t++) {
      copyEight(i, to);
      copyEight(r, to + IMAGINARY);
      to += tileBytes;
      r += 64;
      i += 64;
    }
    for (let x: usize = 0; x < 8 * (columns & 7); x += 8) {
      store<f64>(to + x, load<f64>(i + x));
      store<f64>(to + x, load<f64>(r + x), IMAGINARY);
    }
  }
}

// @ts-ignore: decorator
@inline
function copyEight(from: usize, to: usize): void {
  v128.store(to, v128.load(from));
  v128.store(to, v128.load(from, 16), 16);
  v128.store(to, v128.load(from, 32), 32);
  v128.store(to, v128.load(from, 48), 48);
}
