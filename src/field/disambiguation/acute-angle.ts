import type { Grid2 } from '../../grid/grid.js';
import { potentialHorizontalField } from '../potential.js';
import { radialByPotential } from '../radial.js';
import type { VectorField } from '../vector-field.js';
import {
  type AmbiguousField,
  type FieldReadings,
  readField,
  resolveField,
} from './ambiguous-field.js';

/** A resolved map: the field [G], which pixels were turned, and the radial field of the reference. */
export interface ResolvedField {
  readonly field: VectorField;
  /** 1 where the azimuth given was turned by 180 degrees. */
  readonly flips: Uint8Array;
}

/** The current-free field with the observed component along the line of sight, at the surface [G]. */
export function potentialReference(field: AmbiguousField): VectorField {
  const z = radialByPotential(field.patch);
  return { ...potentialHorizontalField(z, 'open'), z };
}

/** Flags the readings whose transverse field makes more than 90 degrees with that of `reference`. */
export function acuteFlips(readings: FieldReadings, reference: VectorField): Uint8Array {
  const { known, transverse } = readings;
  const parts: readonly Grid2<'G'>[] = [reference.x, reference.y, reference.z];
  const flips = new Uint8Array(known.length);
  for (let i = 0; i < flips.length; i++) {
    if (!known[i]) continue;
    let product = 0;
    for (let axis = 0; axis < 3; axis++)
      product += transverse[axis][i] * parts[axis].values.data[i];
    if (product < 0) flips[i] = 1;
  }
  return flips;
}

/**
 * Resolves the 180 degree ambiguity by the acute angle to the current-free field that has the
 * observed line-of-sight component. Missing pixels are NaN and not turned.
 */
export function acuteAngle(
  field: AmbiguousField,
): ResolvedField & { readonly reference: VectorField } {
  const readings = readField(field);
  const reference = potentialReference(field);
  const flips = acuteFlips(readings, reference);
  return { field: resolveField(readings, flips), flips, reference };
}
