// Real rows of odd length, sixteen at once: rows r and r + 8 are the real and imaginary parts of
// lane r. With Z the transform of a + i b, A(k) = (Z(k) + conj Z(-k)) / 2 and
// B(k) = (Z(k) - conj Z(-k)) / 2i. `values` addresses sixteen dense rows of nx numbers, `re, im`
// `count` <= 16 rows of `stride` bytes with (nx + 1) / 2 numbers each.
import { POINT, scratch } from './scratch';
import { transformScratch } from './transform';

export function forwardOddRows(plan: usize, nx: usize, values: usize, re: usize, im: usize, stride: usize, count: usize): void {
  for (let row: usize = 0; row < 16; row++) {
    const from = values + 8 * nx * row;
    const to = scratch.a + 8 * row;
    for (let x: usize = 0; x < nx; x++) store<f64>(to + x * POINT, load<f64>(from + 8 * x));
  }
  const z = transformScratch(plan, false);
  for (let row: usize = 0; row < count; row++) {
    const lane = z + 8 * (row & 7);
    const r = re + row * stride;
    const i = im + row * stride;
    if (row < 8) splitReal(lane, nx, r, i);
    else splitImaginary(lane, nx, r, i);
  }
}

function splitReal(z: usize, nx: usize, re: usize, im: usize): void {
  store<f64>(re, load<f64>(z));
  store<f64>(im, 0);
  for (let k: usize = 1; k <= nx >> 1; k++) {
    const a = z + k * POINT;
    const b = z + (nx - k) * POINT;
    store<f64>(re + 8 * k, 0.5 * (load<f64>(a) + load<f64>(b)));
    store<f64>(im + 8 * k, 0.5 * (load<f64>(a, 64) - load<f64>(b, 64)));
  }
}

function splitImaginary(z: usize, nx: usize, re: usize, im: usize): void {
  store<f64>(re, load<f64>(z, 64));
  store<f64>(im, 0);
  for (let k: usize = 1; k <= nx >> 1; k++) {
    const a = z + k * POINT;
    const b = z + (nx - k) * POINT;
    store<f64>(re + 8 * k, 0.5 * (load<f64>(a, 64) + load<f64>(b, 64)));
    store<f64>(im + 8 * k, 0.5 * (load<f64>(b) - load<f64>(a)));
  }
}

/** The way back, times `gain`: overwrites `count` of the rows at `values`; imaginary parts of F(0) are ignored. */
export function inverseOddRows(plan: usize, nx: usize, values: usize, gain: f64, re: usize, im: usize, stride: usize, count: usize): void {
  for (let lane: usize = 0; lane < 8; lane++) {
    const a = lane < count ? lane : 0;
    const b = lane + 8 < count ? lane + 8 : a;
    joinRows(scratch.a + 8 * lane, nx, gain, re + a * stride, im + a * stride, re + b * stride, im + b * stride);
  }
  const z = transformScratch(plan, true);
  for (let row: usize = 0; row < count; row++) {
    const from = z + 8 * row;
    const to = values + 8 * nx * row;
    for (let x: usize = 0; x < nx; x++) store<f64>(to + 8 * x, load<f64>(from + x * POINT));
  }
}

function joinRows(z: usize, nx: usize, gain: f64, ar: usize, ai: usize, br: usize, bi: usize): void {
  store<f64>(z, gain * load<f64>(ar));
  store<f64>(z, gain * load<f64>(br), 64);
  for (let k: usize = 8; k <= 8 * (nx >> 1); k += 8) {
    const fr = gain * load<f64>(ar + k);
    const fi = gain * load<f64>(ai + k);
    const gr = gain * load<f64>(br + k);
    const gi = gain * load<f64>(bi + k);
    const at = z + 16 * k;
    const mirror = z + nx * POINT - 16 * k;
    store<f64>(at, fr - gi);
    store<f64>(at, fi + gr, 64);
    store<f64>(mirror, fr + gi);
    store<f64>(mirror, gr - fi, 64);
  }
}
