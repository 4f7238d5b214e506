import { type LocalPatch, PIXEL_GOOD } from '../../src/geometry/patch.js';
import { type Grid2, makeGrid } from '../../src/grid/grid.js';
import { type Charge, chargeVector } from './charges.js';

/** A flat patch with one viewing direction everywhere, holding `field` as its line-of-sight component. */
export function flatPatch(
  field: Grid2<'G'>,
  view: readonly [number, number, number] = [0, 0, 1],
  component: LocalPatch['component'] = 'line-of-sight',
): LocalPatch {
  const [ny, nx] = field.values.shape;
  const size = Math.hypot(...view);
  const constant = (value: number) => new Float64Array(nx * ny).fill(value / size);
  return {
    nx,
    ny,
    pixelMm: field.pixelMm,
    center: {
      stonyhurstLongitudeDeg: 0,
      stonyhurstLatitudeDeg: 15,
      carringtonLongitudeDeg: 200,
      mu: view[2] / size,
    },
    component,
    field,
    mask: new Uint8Array(nx * ny).fill(PIXEL_GOOD),
    toObserver: { x: constant(view[0]), y: constant(view[1]), z: constant(view[2]) },
  };
}

/** Component along `view` of the field of charges, sampled at pixel centres of an n x n map. */
export function lineOfSightCharges(
  charges: readonly Charge[],
  n: number,
  pixelMm: number,
  view: readonly [number, number, number],
): Grid2<'G'> {
  const size = Math.hypot(...view);
  const data = new Float64Array(n * n);
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const b = chargeVector(charges, (i + 0.5 - n / 2) * pixelMm, (j + 0.5 - n / 2) * pixelMm, 0);
      data[i + n * j] = (b[0] * view[0] + b[1] * view[1] + b[2] * view[2]) / size;
    }
  }
  return makeGrid(data, n, n, 'G', pixelMm);
}
