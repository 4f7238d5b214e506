// Complex transforms down the columns of a row-major array, eight neighbours at a time, in place.
import { IMAGINARY, POINT, scratch } from './scratch';
import { transform, transformScratch } from './transform';

/** Columns `from` .. `to - 1` of `ny` rows of `stride` bytes; real parts at `re`, imaginary at `im`. */
export function transformColumns(plan: usize, re: usize, im: usize, stride: usize, ny: usize, from: usize, to: usize, inverse: bool): void {
  let x = from;
  for (; x + 8 <= to; x += 8) {
    const r: usize = 8 * x + (inverse ? im : re);
    const i: usize = 8 * x + (inverse ? re : im);
    transform(plan, r, i, stride, r, i, stride);
  }
  if (x < to) transformFew(plan, re + 8 * x, im + 8 * x, stride, ny, to - x, inverse);
}

/** The last columns, fewer than eight: a whole point would reach into the next row. */
function transformFew(plan: usize, re: usize, im: usize, stride: usize, ny: usize, count: usize, inverse: bool): void {
  for (let y: usize = 0; y < ny; y++) {
    const to = scratch.a + y * POINT;
    for (let x: usize = 0; x < 8 * count; x += 8) {
      store<f64>(to + x, load<f64>(re + y * stride + x));
      store<f64>(to + x, load<f64>(im + y * stride + x), IMAGINARY);
    }
  }
  const result = transformScratch(plan, inverse);
  for (let y: usize = 0; y < ny; y++) {
    const at = result + y * POINT;
    for (let x: usize = 0; x < 8 * count; x += 8) {
      store<f64>(re + y * stride + x, load<f64>(at + x));
      store<f64>(im + y * stride + x, load<f64>(at + x, IMAGINARY));
    }
  }
}
