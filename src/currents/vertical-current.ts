import { VACUUM_PERMEABILITY } from '../constants.js';
import { fieldArrays, noiseAt, type VectorField, type VectorNoise } from '../field/vector-field.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS } from '../units.js';

/** How the curl is taken: central differences, or the circulation round the four cells that meet in a pixel. */
export type CurlMethod = 'central' | 'circulation';

/** Current density [mA/m^2] of a curl of 1 G/Mm: 1e-10 T/m over mu0. */
export const CURRENT_PER_GAUSS_PER_MEGAMETRE =
  (1e3 * TESLA_PER_GAUSS) / METRES_PER_MEGAMETRE / VACUUM_PERMEABILITY;

/** Current [A] of 1 mA/m^2 through 1 Mm^2. */
export const AMPERE_PER_CURRENT_DENSITY = 1e-3 * METRES_PER_MEGAMETRE ** 2;

/** Neighbours of a pixel as (dx, dy) with their weight in 2 h dBy/dx and 2 h dBx/dy. */
type Stencil = readonly (readonly [dx: number, dy: number, y: number, x: number])[];
const CENTRAL: Stencil = [
  [1, 0, 1, 0],
  [-1, 0, -1, 0],
  [0, 1, 0, 1],
  [0, -1, 0, -1],
];
/** Trapezoidal circulation round the square of side 2 h about the pixel: the mean of its four cells. */
const CIRCULATION: Stencil = [
  [1, 0, 0.5, 0],
  [-1, 0, -0.5, 0],
  [0, 1, 0, 0.5],
  [0, -1, 0, -0.5],
  [1, 1, 0.25, 0.25],
  [1, -1, 0.25, -0.25],
  [-1, 1, -0.25, 0.25],
  [-1, -1, -0.25, -0.25],
];

const stencilOf = (method: CurlMethod): Stencil => (method === 'central' ? CENTRAL : CIRCULATION);

/**
 * Vertical current density [mA/m^2], mu0 Jz = dBy/dx - dBx/dy. Central differences resolve more,
 * the circulation has 0.61 of their noise. NaN at the edges and where a pixel of the stencil is missing.
 */
export function verticalCurrent(
  field: VectorField,
  method: CurlMethod = 'central',
): Grid2<'mA/m^2'> {
  const { nx, ny, pixelMm, bx, by } = fieldArrays(field);
  return makeGrid(
    curl(bx, by, nx, ny, stencilOf(method), scaleOf(pixelMm)),
    nx,
    ny,
    'mA/m^2',
    pixelMm,
  );
}

const scaleOf = (pixelMm: number) => CURRENT_PER_GAUSS_PER_MEGAMETRE / (2 * pixelMm);

/** `scale` times the sum over a stencil; NaN on the outermost pixels. */
function curl(
  bx: Float64Array,
  by: Float64Array,
  nx: number,
  ny: number,
  stencil: Stencil,
  scale: number,
): Float64Array {
  const out = new Float64Array(nx * ny).fill(Number.NaN);
  if (stencil === CENTRAL) {
    for (let y = 1; y < ny - 1; y++)
      for (let i = y * nx + 1; i < (y + 1) * nx - 1; i++)
        out[i] = scale * (by[i + 1] - by[i - 1] - bx[i + nx] + bx[i - nx]);
    return out;
  }
  const steps = Int32Array.from(stencil, ([dx, dy]) => dx + nx * dy);
  const weightY = Float64Array.from(stencil, ([, , y]) => scale * y);
  const weightX = Float64Array.from(stencil, ([, , , x]) => scale * x);
  for (let y = 1; y < ny - 1; y++) {
    for (let i = y * nx + 1; i < (y + 1) * nx - 1; i++) {
      let sum = 0;
      for (let k = 0; k < steps.length; k++) {
        const j = i + steps[k];
        sum += weightY[k] * by[j] - weightX[k] * bx[j];
      }
      out[i] = sum;
    }
  }
  return out;
}

/**
 * 1-sigma noise [mA/m^2] of `verticalCurrent` at every pixel from the noise of the field: each
 * pixel's error enters the stencil with its weight, errors taken as independent. For uniform noise
 * and central differences this is sigma / (mu0 h). NaN where the current is at the edges.
 */
export function currentNoise(
  field: VectorField,
  noise: VectorNoise,
  method: CurlMethod = 'central',
): Grid2<'mA/m^2'> {
  const { nx, ny, pixelMm } = fieldArrays(field);
  const stencil = stencilOf(method);
  const scale = scaleOf(pixelMm);
  const out = new Float64Array(nx * ny).fill(Number.NaN);
  for (let y = 1; y < ny - 1; y++) {
    for (let i = y * nx + 1; i < (y + 1) * nx - 1; i++) {
      let sum = 0;
      for (const [dx, dy, weightY, weightX] of stencil) {
        const j = i + dx + nx * dy;
        sum += (weightY * noiseAt(noise.y, j)) ** 2 + (weightX * noiseAt(noise.x, j)) ** 2;
      }
      out[i] = scale * Math.sqrt(sum);
    }
  }
  return makeGrid(out, nx, ny, 'mA/m^2', pixelMm);
}

/** A rectangle of pixels, both ends included. */
export interface PixelBox {
  readonly x0: number;
  readonly y0: number;
  readonly x1: number;
  readonly y1: number;
}

/**
 * Current [A] through the rectangle whose sides join the centres of the pixels of `box`, by the
 * integral of B along them (trapezoids) over mu0. NaN where a pixel on the sides is missing.
 */
export function contourCurrent(field: VectorField, { x0, y0, x1, y1 }: PixelBox): number {
  const { nx, pixelMm, bx, by } = fieldArrays(field);
  let sum = 0;
  for (let x = x0; x < x1; x++) {
    sum += 0.5 * (bx[x + nx * y0] + bx[x + 1 + nx * y0]);
    sum -= 0.5 * (bx[x + nx * y1] + bx[x + 1 + nx * y1]);
  }
  for (let y = y0; y < y1; y++) {
    sum += 0.5 * (by[x1 + nx * y] + by[x1 + nx * (y + 1)]);
    sum -= 0.5 * (by[x0 + nx * y] + by[x0 + nx * (y + 1)]);
  }
  return sum * pixelMm * CURRENT_PER_GAUSS_PER_MEGAMETRE * AMPERE_PER_CURRENT_DENSITY;
}

/**
 * 1-sigma noise [mA/m^2] of a current map from its own quiet pixels (vertical and horizontal field
 * below `quietG`): 1.4826 times the median of |Jz| there, which real currents, sparse in quiet
 * places, hardly move. It holds whatever the noise's correlation from pixel to pixel. NaN with fewer
 * than 30 quiet pixels.
 */
export function quietCurrentNoise(
  current: Grid2<'mA/m^2'>,
  field: VectorField,
  quietG: number,
): number {
  const { bx, by, bz } = fieldArrays(field);
  const sizes: number[] = [];
  current.values.data.forEach((density, i) => {
    const isQuiet = Math.abs(bz[i]) < quietG && Math.hypot(bx[i], by[i]) < quietG;
    if (isQuiet && !Number.isNaN(density)) sizes.push(Math.abs(density));
  });
  if (sizes.length < 30) return Number.NaN;
  sizes.sort((a, b) => a - b);
  return 1.4826 * sizes[sizes.length >> 1];
}

/** Fills `out` with errors [G]: standard normal numbers from `fill` times the noise of each pixel. */
export function drawErrors(
  noise: number | Float64Array,
  fill: (out: Float64Array) => void,
  out: Float64Array,
): void {
  fill(out);
  if (typeof noise === 'number') for (let i = 0; i < out.length; i++) out[i] *= noise;
  else for (let i = 0; i < out.length; i++) out[i] *= noise[i];
}
