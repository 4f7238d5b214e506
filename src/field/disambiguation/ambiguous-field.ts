import { type LocalPatch, PIXEL_GOOD } from '../../geometry/patch.js';
import { makeVectorField, type VectorField } from '../vector-field.js';

/**
 * A vector map whose transverse field is known up to a turn by 180 degrees, on a patch grid. The
 * patch holds the component along the line of sight [G], positive towards the observer. The azimuth
 * [rad] is counted in the plane of the sky as the observer sees it, counter-clockwise from the
 * projection of the patch's y axis (north).
 */
export interface AmbiguousField {
  readonly patch: LocalPatch;
  /** Size of the transverse field [G] and its azimuth [rad], nx * ny; NaN means missing. */
  readonly transverseG: Float64Array;
  readonly azimuthRad: Float64Array;
}

/**
 * Both readings of an ambiguous map in the patch's own frame (x west, y north, z up):
 * B = along + transverse as given, B = along - transverse when flipped. Missing pixels are zero in
 * every array and 0 in `known`.
 */
export interface FieldReadings {
  readonly nx: number;
  readonly ny: number;
  readonly pixelMm: number;
  readonly along: readonly [x: Float64Array, y: Float64Array, z: Float64Array];
  readonly transverse: readonly [x: Float64Array, y: Float64Array, z: Float64Array];
  readonly transverseG: Float64Array;
  readonly known: Uint8Array;
}

/** Resolves line-of-sight field, transverse field and azimuth along the axes of the patch. */
export function readField(field: AmbiguousField): FieldReadings {
  const { patch, azimuthRad } = field;
  const { nx, ny, pixelMm, mask, toObserver } = patch;
  const size = nx * ny;
  if (field.transverseG.length !== size || azimuthRad.length !== size)
    throw new RangeError(`transverse field and azimuth must have ${size} values`);
  const empty = () => new Float64Array(size);
  const along: [Float64Array, Float64Array, Float64Array] = [empty(), empty(), empty()];
  const transverse: [Float64Array, Float64Array, Float64Array] = [empty(), empty(), empty()];
  const transverseG = empty();
  const known = new Uint8Array(size);
  const los = patch.field.values.data;
  for (let i = 0; i < size; i++) {
    const strength = field.transverseG[i];
    const isKnown =
      !Number.isNaN(los[i]) && !Number.isNaN(strength) && !Number.isNaN(azimuthRad[i]);
    if (mask[i] !== PIXEL_GOOD || !isKnown) continue;
    known[i] = 1;
    transverseG[i] = strength;
    const [n1, n2, n3] = [toObserver.x[i], toObserver.y[i], toObserver.z[i]];
    // Sky axes: eta is the patch's north less its part along the view, xi = eta x n (to the right).
    const squeeze = Math.sqrt(n1 * n1 + n3 * n3);
    const up = strength * Math.cos(azimuthRad[i]);
    const left = strength * Math.sin(azimuthRad[i]);
    along[0][i] = los[i] * n1;
    along[1][i] = los[i] * n2;
    along[2][i] = los[i] * n3;
    transverse[0][i] = (-up * n2 * n1 - left * n3) / squeeze;
    transverse[1][i] = up * squeeze;
    transverse[2][i] = (-up * n2 * n3 + left * n1) / squeeze;
  }
  return { nx, ny, pixelMm, along, transverse, transverseG, known };
}

/** The field [G] with the azimuth turned by 180 degrees where `flips` is 1; missing pixels are NaN. */
export function resolveField(readings: FieldReadings, flips: Uint8Array): VectorField {
  const { nx, ny, pixelMm, along, transverse, known } = readings;
  const component = (axis: 0 | 1 | 2) =>
    Float64Array.from(known, (value, i) => {
      if (!value) return Number.NaN;
      return along[axis][i] + (flips[i] ? -transverse[axis][i] : transverse[axis][i]);
    });
  return makeVectorField(component(0), component(1), component(2), nx, ny, pixelMm);
}
