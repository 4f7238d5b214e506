// The patch plane: Lambert cylindrical equal-area projection about a centre on the surface, x = R phi',
// y = R sin(theta') with phi' to the west and theta' to the north of the centre along its own parallel
// and meridian. Areas are true everywhere, shapes near the centre.
import { localBasis, type Vector3, type ViewFrame } from './solar-frame.js';

/** The patch's own axes at its centre, in the observer frame. */
export interface PatchFrame {
  readonly west: Readonly<Vector3>;
  readonly north: Readonly<Vector3>;
  readonly up: Readonly<Vector3>;
  readonly radiusMm: number;
}

/** Frame of a patch centred on a Stonyhurst position [deg]. */
export function patchFrame(
  view: ViewFrame,
  lonDeg: number,
  latDeg: number,
  radiusMm: number,
): PatchFrame {
  const { west, north, up } = localBasis(view, lonDeg, latDeg);
  return { west, north, up, radiusMm };
}

function dot(a: Readonly<Vector3>, b: Readonly<Vector3>): number {
  return a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
}

/** Patch coordinates [Mm] of an observer-frame unit vector, written to `out`. */
export function surfaceToPlane(
  frame: PatchFrame,
  point: Readonly<Vector3>,
  out: [number, number],
): [number, number] {
  out[0] = frame.radiusMm * Math.atan2(dot(point, frame.west), dot(point, frame.up));
  out[1] = frame.radiusMm * dot(point, frame.north);
  return out;
}

/** Observer-frame unit vector at patch coordinates [Mm], written to `out`; false beyond the sphere. */
export function planeToSurface(frame: PatchFrame, xMm: number, yMm: number, out: Vector3): boolean {
  const sine = yMm / frame.radiusMm;
  const phi = xMm / frame.radiusMm;
  if (Math.abs(sine) > 1 || Math.abs(phi) > Math.PI) return false;
  const cosine = Math.sqrt(1 - sine * sine);
  const across = cosine * Math.sin(phi);
  const along = cosine * Math.cos(phi);
  for (let i = 0; i < 3; i++)
    out[i] = across * frame.west[i] + sine * frame.north[i] + along * frame.up[i];
  return true;
}
