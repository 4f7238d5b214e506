import ndarray, { type NdArray } from 'ndarray';

/** Units a grid may carry; a real field, so it survives a worker or a file. */
export type GridUnit = 'G' | 'mA/m^2' | '1/Mm' | '1';

/**
 * A square-pixelled map. `values` has shape [ny, nx], row-major (`data[x + nx * y]`), row 0 at the
 * south; pixel centres on integers from 0. NaN means missing. `pixelMm` is the pixel side in Mm.
 */
export interface Grid2<U extends GridUnit = GridUnit> {
  readonly values: NdArray<Float64Array>;
  readonly unit: U;
  readonly pixelMm: number;
}

/** Wraps row-major `data` (nx * ny values) as a grid. Throws RangeError when the length is not nx * ny. */
export function makeGrid<U extends GridUnit>(
  data: Float64Array,
  nx: number,
  ny: number,
  unit: U,
  pixelMm: number,
): Grid2<U> {
  if (data.length !== nx * ny) throw new RangeError(`${data.length} values for ${nx} x ${ny}`);
  return { values: ndarray(data, [ny, nx]), unit, pixelMm };
}
