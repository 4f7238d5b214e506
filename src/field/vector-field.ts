import { type Grid2, makeGrid } from '../grid/grid.js';

/**
 * The three components of the field at the surface on one grid [G]: x west, y north, z up (radial).
 * NaN in any of them means that the pixel is missing.
 */
export interface VectorField {
  readonly x: Grid2<'G'>;
  readonly y: Grid2<'G'>;
  readonly z: Grid2<'G'>;
}

/**
 * 1-sigma noise [G] of one grid pixel in each component, one number or one value a pixel; taken as
 * independent between pixels and components. Where a resampling has spread the noise over several
 * pixels, the figure of one grid pixel belongs here and errors of sums over many pixels come out
 * too small by the side of the noise's cell over the pixel.
 */
export interface VectorNoise {
  readonly x: number | Float64Array;
  readonly y: number | Float64Array;
  readonly z: number | Float64Array;
}

/** Noise of pixel `i`. */
export function noiseAt(noise: number | Float64Array, i: number): number {
  return typeof noise === 'number' ? noise : noise[i];
}

/** Wraps three row-major arrays of nx * ny values [G]. */
export function makeVectorField(
  x: Float64Array,
  y: Float64Array,
  z: Float64Array,
  nx: number,
  ny: number,
  pixelMm: number,
): VectorField {
  const grid = (data: Float64Array) => makeGrid(data, nx, ny, 'G', pixelMm);
  return { x: grid(x), y: grid(y), z: grid(z) };
}

/** The raw arrays and shape of a field. Throws RangeError unless the three components share one grid. */
export function fieldArrays(field: VectorField): {
  readonly nx: number;
  readonly ny: number;
  readonly pixelMm: number;
  readonly bx: Float64Array;
  readonly by: Float64Array;
  readonly bz: Float64Array;
} {
  const [ny, nx] = field.z.values.shape;
  for (const { values, pixelMm } of [field.x, field.y]) {
    const [height, width] = values.shape;
    if (width !== nx || height !== ny || pixelMm !== field.z.pixelMm)
      throw new RangeError(
        `components of ${width} x ${height} and ${nx} x ${ny} pixels are not on one grid`,
      );
  }
  const { data: bx } = field.x.values;
  const { data: by } = field.y.values;
  const { data: bz } = field.z.values;
  return { nx, ny, pixelMm: field.z.pixelMm, bx, by, bz };
}
