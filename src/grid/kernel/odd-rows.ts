// Real rows of odd length, sixteen at once: rows r and r + 8 are the real and imaginary parts of
// lane r. With Z the transform of a + i b, A(k) = (Z(k) + conj Z(-k)) / 2 and
// B(k) = (Z(k) - conj Z(-k)) / 2i. `values` addresses sixteen dense rows of nx numbers; `tiles`
// and `tileBytes` are those of tiles.ts.
import { IMAGINARY, POINT, scratch } from './scratch';
import { transform } from './transform';

export function forwardOddRows(plan: usize, nx: usize, values: usize, tiles: usize, tileBytes: usize): void {
  const z = scratch.row;
  for (let row: usize = 0; row < 16; row++) {
    const from = values + 8 * nx * row;
    const to = z + 8 * row;
    for (let x: usize = 0; x < nx; x++) store<f64>(to + x * POINT, load<f64>(from + 8 * x));
  }
  transform(plan, z);
  for (let k: usize = 0; k <= nx >> 1; k++) {
    const near = z + k * POINT;
    const far = k == 0 ? z : z + (nx - k) * POINT;
    const to = tiles + (k >> 3) * tileBytes + 8 * (k & 7);
    for (let lane: usize = 0; lane < 8; lane++) {
      const zr = load<f64>(near + 8 * lane);
      const zi = load<f64>(near + 8 * lane, IMAGINARY);
      const yr = load<f64>(far + 8 * lane);
      const yi = load<f64>(far + 8 * lane, IMAGINARY);
      const a = to + lane * POINT;
      store<f64>(a, 0.5 * (zr + yr));
      store<f64>(a, 0.5 * (zi - yi), IMAGINARY);
      store<f64>(a, 0.5 * (zi + yi), 8 * POINT);
      store<f64>(a, 0.5 * (yr - zr), 8 * POINT + IMAGINARY);
    }
  }
}

/** The way back, times `gain`, from tiles whose real and imaginary parts have changed places. */
export function inverseOddRows(plan: usize, nx: usize, values: usize, gain: f64, tiles: usize, tileBytes: usize): void {
  const z = scratch.row;
  for (let k: usize = 0; k <= nx >> 1; k++) {
    const near = z + k * POINT;
    const far = z + (nx - k) * POINT;
    const from = tiles + (k >> 3) * tileBytes + 8 * (k & 7);
    for (let lane: usize = 0; lane < 8; lane++) {
      const a = from + lane * POINT;
      const ar = gain * load<f64>(a, IMAGINARY);
      const br = gain * load<f64>(a, 8 * POINT + IMAGINARY);
      // The imaginary parts of the mean do not count.
      const ai = k == 0 ? 0 : gain * load<f64>(a);
      const bi = k == 0 ? 0 : gain * load<f64>(a, 8 * POINT);
      store<f64>(near + 8 * lane, ar - bi, IMAGINARY);
      store<f64>(near + 8 * lane, ai + br);
      store<f64>(far + 8 * lane, ar + bi, IMAGINARY);
      store<f64>(far + 8 * lane, br - ai);
    }
  }
  transform(plan, z);
  for (let row: usize = 0; row < 16; row++) {
    const from = z + (row < 8 ? IMAGINARY + 8 * row : 8 * (row - 8));
    const to = values + 8 * nx * row;
    for (let x: usize = 0; x < nx; x++) store<f64>(to + 8 * x, load<f64>(from + x * POINT));
  }
}
