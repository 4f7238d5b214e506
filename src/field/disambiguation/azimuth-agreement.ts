import type { VectorField } from '../vector-field.js';
import { type AmbiguousField, readField } from './ambiguous-field.js';

/** How the azimuths of a map lie against those of a reference field. */
export interface AzimuthAgreement {
  /** Mean cosine of twice the difference, weighted with the transverse field: 1 along, -1 across. */
  readonly meanCosine: number;
  /** Mean difference, counter-clockwise as the observer sees it, -90 to 90 [deg]. */
  readonly turnDeg: number;
}

/**
 * Compares azimuths, up to 180 degrees, with those of a reference (the current-free field) over pixels of at
 * least `leastG` transverse field. Solar fields are sheared, but on the whole they follow the current-free
 * one; a mean cosine below zero tells of azimuths counted from another axis. NaN without such pixels.
 */
export function azimuthAgreement(
  field: AmbiguousField,
  reference: VectorField,
  leastG: number,
): AzimuthAgreement {
  const { known, transverse, transverseG } = readField(field);
  const { x: nx, y: ny, z: nz } = field.patch.toObserver;
  const [bx, by, bz] = [reference.x, reference.y, reference.z].map(({ values }) => values.data);
  let [cosines, sines, weights] = [0, 0, 0];
  for (let i = 0; i < known.length; i++) {
    if (!known[i] || transverseG[i] < leastG) continue;
    const [tx, ty, tz] = [transverse[0][i], transverse[1][i], transverse[2][i]];
    // The measured field along the reference's part across the view, and to the left of it.
    const along = tx * bx[i] + ty * by[i] + tz * bz[i];
    const left =
      tx * (ny[i] * bz[i] - nz[i] * by[i]) +
      ty * (nz[i] * bx[i] - nx[i] * bz[i]) +
      tz * (nx[i] * by[i] - ny[i] * bx[i]);
    const size2 = along * along + left * left;
    if (!(size2 > 0)) continue;
    weights += transverseG[i];
    cosines += (transverseG[i] * (along * along - left * left)) / size2;
    sines += (transverseG[i] * 2 * along * left) / size2;
  }
  return {
    meanCosine: cosines / weights,
    turnDeg: ((Math.atan2(sines, cosines) / 2) * 180) / Math.PI,
  };
}
