// Between planes of transformed columns and rows: L rows of a plane are the real parts, the next L
// the imaginary parts of the points that are transformed along x.
import { IMAGINARY, POINT } from './volume-passes';

/** Stores the transpose of a square of four (f32) or two (f64; only a0, a1) vectors. */
// @ts-ignore: decorator
@inline
function storeTransposed<T>(a0: v128, a1: v128, a2: v128, a3: v128, t0: usize, t1: usize, t2: usize, t3: usize): void {
  if (sizeof<T>() == 4) {
    const p = v128.shuffle<f32>(a0, a1, 0, 4, 1, 5);
    const q = v128.shuffle<f32>(a0, a1, 2, 6, 3, 7);
    const r = v128.shuffle<f32>(a2, a3, 0, 4, 1, 5);
    const s = v128.shuffle<f32>(a2, a3, 2, 6, 3, 7);
    v128.store(t0, v128.shuffle<f32>(p, r, 0, 1, 4, 5));
    v128.store(t1, v128.shuffle<f32>(p, r, 2, 3, 6, 7));
    v128.store(t2, v128.shuffle<f32>(q, s, 0, 1, 4, 5));
    v128.store(t3, v128.shuffle<f32>(q, s, 2, 3, 6, 7));
  } else {
    v128.store(t0, v128.shuffle<f64>(a0, a1, 0, 2));
    v128.store(t1, v128.shuffle<f64>(a0, a1, 1, 3));
  }
}

/**
 * The points of 2 L rows from the plane's tiles: with A and B the modes of a row among the real and
 * one among the imaginary parts, C(k) = A + i B and C(-k) = conj A + i conj B. One point more is
 * written to, behind the sequence, for modes that are not there.
 */
export function gatherRows<T>(plane: usize, tileBytes: usize, plan: usize, modes: usize): void {
  const m: usize = load<u32>(plan);
  const last: usize = load<u32>(plan, 8);
  const lanes: usize = 32 / sizeof<T>();
  const width: usize = 16 / sizeof<T>();
  const none = modes + m * POINT;
  if (m > 2 * last + 1) memory.fill(modes + (last + 1) * POINT, 0, (m - 2 * last - 1) * POINT);
  for (let column: usize = 0; column <= last; column += lanes) {
    for (let j: usize = 0; j < 2; j++) {
      const k = column + j * width;
      if (k > last) break;
      const p0 = modes + k * POINT;
      const p1 = k + 1 <= last ? p0 + POINT : none;
      const p2 = k + 2 <= last ? p0 + 2 * POINT : none;
      const p3 = k + 3 <= last ? p0 + 3 * POINT : none;
      const n0 = modes + (m - k) * POINT;
      const n1 = k + 1 <= last ? n0 - POINT : none;
      const n2 = k + 2 <= last ? n0 - 2 * POINT : none;
      const n3 = k + 3 <= last ? n0 - 3 * POINT : none;
      for (let i: usize = 0; i < 2; i++) {
        const a = plane + i * width * POINT + j * 16;
        const b = a + lanes * POINT;
        combine<T>(a, b + IMAGINARY, 16 * i, p0, p1, p2, p3, n0, n1, n2, n3);
        const o = IMAGINARY + 16 * i;
        combineBack<T>(a + IMAGINARY, b, o, p0, p1, p2, p3, n0, n1, n2, n3);
      }
    }
    plane += tileBytes;
  }
}

/** Real parts: A.re - B.im to C(k), A.re + B.im to C(-k). */
// @ts-ignore: decorator
@inline
function combine<T>(a: usize, b: usize, o: usize, p0: usize, p1: usize, p2: usize, p3: usize, n0: usize, n1: usize, n2: usize, n3: usize): void {
  const a0 = v128.load(a);
  const a1 = v128.load(a, 64);
  const a2 = sizeof<T>() == 4 ? v128.load(a, 128) : a0;
  const a3 = sizeof<T>() == 4 ? v128.load(a, 192) : a0;
  const b0 = v128.load(b);
  const b1 = v128.load(b, 64);
  const b2 = sizeof<T>() == 4 ? v128.load(b, 128) : b0;
  const b3 = sizeof<T>() == 4 ? v128.load(b, 192) : b0;
  storeTransposed<T>(v128.add<T>(a0, b0), v128.add<T>(a1, b1), v128.add<T>(a2, b2), v128.add<T>(a3, b3), n0 + o, n1 + o, n2 + o, n3 + o);
  storeTransposed<T>(v128.sub<T>(a0, b0), v128.sub<T>(a1, b1), v128.sub<T>(a2, b2), v128.sub<T>(a3, b3), p0 + o, p1 + o, p2 + o, p3 + o);
}

/** Imaginary parts: A.im + B.re to C(k), B.re - A.im to C(-k). */
// @ts-ignore: decorator
@inline
function combineBack<T>(a: usize, b: usize, o: usize, p0: usize, p1: usize, p2: usize, p3: usize, n0: usize, n1: usize, n2: usize, n3: usize): void {
  const a0 = v128.load(a);
  const a1 = v128.load(a, 64);
  const a2 = sizeof<T>() == 4 ? v128.load(a, 128) : a0;
  const a3 = sizeof<T>() == 4 ? v128.load(a, 192) : a0;
  const b0 = v128.load(b);
  const b1 = v128.load(b, 64);
  const b2 = sizeof<T>() == 4 ? v128.load(b, 128) : b0;
  const b3 = sizeof<T>() == 4 ? v128.load(b, 192) : b0;
  storeTransposed<T>(v128.sub<T>(b0, a0), v128.sub<T>(b1, a1), v128.sub<T>(b2, a2), v128.sub<T>(b3, a3), n0 + o, n1 + o, n2 + o, n3 + o);
  storeTransposed<T>(v128.add<T>(a0, b0), v128.add<T>(a1, b1), v128.add<T>(a2, b2), v128.add<T>(a3, b3), p0 + o, p1 + o, p2 + o, p3 + o);
}

/** `rows` rows of `nx` samples, every `stride`-th point, to `out`. */
export function storeRows<T>(points: usize, out: usize, nx: u32, rows: u32, stride: u32): void {
  const width: u32 = <u32>(16 / sizeof<T>());
  const pitch = <usize>nx * sizeof<T>();
  const step = <usize>stride * POINT;
  const whole = nx - (nx % width);
  for (let group: u32 = 0; group < 4; group++) {
    const row = group * width;
    if (row >= rows) break;
    // Groups 0 and 1 are real parts, 2 and 3 imaginary parts: vectors lie 16 bytes apart.
    let from: usize = points + 16 * <usize>group;
    let to: usize = out + <usize>row * pitch;
    const there = min(width, rows - row);
    if (there == width) {
      for (let x: u32 = 0; x < whole; x += width) {
        const a0 = v128.load(from);
        const a1 = v128.load(from + step);
        const a2 = sizeof<T>() == 4 ? v128.load(from + 2 * step) : a0;
        const a3 = sizeof<T>() == 4 ? v128.load(from + 3 * step) : a0;
        storeTransposed<T>(a0, a1, a2, a3, to, to + pitch, to + 2 * pitch, to + 3 * pitch);
        from += <usize>width * step;
        to += 16;
      }
      storeLoose<T>(from, to, nx - whole, there, step, pitch);
    } else storeLoose<T>(from, to, nx, there, step, pitch);
  }
}

/** One number at a time: what does not fill a vector. */
function storeLoose<T>(from: usize, to: usize, count: u32, rows: u32, step: usize, pitch: usize): void {
  for (let x: u32 = 0; x < count; x++) {
    for (let lane: u32 = 0; lane < rows; lane++) {
      store<T>(to + <usize>lane * pitch, load<T>(from + <usize>lane * sizeof<T>()));
    }
    from += step;
    to += sizeof<T>();
  }
}
