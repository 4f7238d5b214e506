// Positions on the Sun as seen by an observer at finite distance: Thompson 2006, A&A 449, 791.
// Observer frame: origin at the Sun's centre, unit the solar radius, x to solar west, y to solar
// north, z to the observer. Longitudes here are west of the central meridian unless they are named
// Stonyhurst or Carrington.
import { RADIANS_PER_DEGREE, wrapDegrees180, wrapDegrees360 } from '../units.js';

/** What the formulas need of an observer, precomputed. */
export interface ViewFrame {
  /** Distance observer to Sun centre in solar radii. */
  readonly distanceRadii: number;
  readonly sinB0: number;
  readonly cosB0: number;
  readonly stonyhurstLongitudeDeg: number;
  readonly carringtonLongitudeDeg: number;
}

export type Vector3 = [number, number, number];

/** Builds a ViewFrame; distances in metres, angles in degrees. */
export function viewFrame(observer: {
  readonly distanceM: number;
  readonly latitudeDeg: number;
  readonly stonyhurstLongitudeDeg: number;
  readonly carringtonLongitudeDeg: number;
  readonly solarRadiusM: number;
}): ViewFrame {
  return {
    distanceRadii: observer.distanceM / observer.solarRadiusM,
    sinB0: Math.sin(observer.latitudeDeg * RADIANS_PER_DEGREE),
    cosB0: Math.cos(observer.latitudeDeg * RADIANS_PER_DEGREE),
    stonyhurstLongitudeDeg: observer.stonyhurstLongitudeDeg,
    carringtonLongitudeDeg: observer.carringtonLongitudeDeg,
  };
}

/**
 * Unit vector in the observer frame of the surface point at Stonyhurst longitude and latitude
 * [deg] (Thompson 2006, eq. 11).
 */
export function surfacePoint(
  frame: ViewFrame,
  lonDeg: number,
  latDeg: number,
  out: Vector3,
): Vector3 {
  const lon = (lonDeg - frame.stonyhurstLongitudeDeg) * RADIANS_PER_DEGREE;
  const lat = latDeg * RADIANS_PER_DEGREE;
  const toMeridian = Math.cos(lat) * Math.cos(lon);
  const toPole = Math.sin(lat);
  out[0] = Math.cos(lat) * Math.sin(lon);
  out[1] = toPole * frame.cosB0 - toMeridian * frame.sinB0;
  out[2] = toPole * frame.sinB0 + toMeridian * frame.cosB0;
  return out;
}

/**
 * Stonyhurst [longitude -180..180, latitude] in degrees of an observer-frame vector (Thompson 2006,
 * eq. 12); need not be normalised.
 */
export function stonyhurstOf(frame: ViewFrame, point: Readonly<Vector3>): [number, number] {
  const [x, y, z] = point;
  const r = Math.hypot(x, y, z);
  const lat = Math.asin(Math.max(-1, Math.min(1, (y * frame.cosB0 + z * frame.sinB0) / r)));
  const lon = Math.atan2(x, z * frame.cosB0 - y * frame.sinB0);
  return [
    wrapDegrees180(lon / RADIANS_PER_DEGREE + frame.stonyhurstLongitudeDeg),
    lat / RADIANS_PER_DEGREE,
  ];
}

/** Whether the observer sees the surface point, whose z (observer frame, radii) is given. */
export function isVisible(frame: ViewFrame, z: number): boolean {
  return z * frame.distanceRadii > 1;
}

/**
 * True cosine of the angle between the vertical at a surface point (observer-frame z in radii) and
 * the direction to the observer at finite distance; negative behind the limb.
 */
export function cosineMu(frame: ViewFrame, z: number): number {
  const d = frame.distanceRadii;
  return (d * z - 1) / Math.sqrt(1 + d * d - 2 * d * z);
}

/**
 * Surface point (observer frame) where the line of sight at helioprojective angles [rad, theta_x to
 * west, theta_y to north] meets the near side of the sphere (Thompson 2006, eq. 15); `undefined` off
 * the disk.
 */
export function surfaceFromHelioprojective(
  frame: ViewFrame,
  thetaX: number,
  thetaY: number,
  out: Vector3,
): Vector3 | undefined {
  return surfaceAlongRay(
    frame,
    Math.cos(thetaY) * Math.cos(thetaX),
    Math.cos(thetaY) * Math.sin(thetaX),
    Math.sin(thetaY),
    out,
  );
}

/**
 * The same for a unit vector of the helioprojective sphere: `ahead` towards the Sun's centre, `west`,
 * `north`.
 */
export function surfaceAlongRay(
  frame: ViewFrame,
  ahead: number,
  west: number,
  north: number,
  out: Vector3,
): Vector3 | undefined {
  const closest = frame.distanceRadii * ahead;
  const across = west * west + north * north;
  // q^2 - D^2 + R^2 written with the impact parameter, which keeps its digits near the limb.
  const chord = 1 - frame.distanceRadii * frame.distanceRadii * across;
  if (!(chord >= 0) || closest <= 0) return undefined;
  const path = closest - Math.sqrt(chord);
  out[0] = path * west;
  out[1] = path * north;
  out[2] = frame.distanceRadii - path * ahead;
  return out;
}

/** Helioprojective angles [rad] of an observer-frame point in radii; not checked for visibility. */
export function helioprojectiveOf(frame: ViewFrame, point: Readonly<Vector3>): [number, number] {
  const ahead = frame.distanceRadii - point[2];
  return [Math.atan2(point[0], ahead), Math.asin(point[1] / Math.hypot(point[0], point[1], ahead))];
}

/**
 * Unit vectors to west, north and up at a Stonyhurst position, and from there to the observer, all in
 * the observer frame.
 */
export interface LocalBasis {
  readonly west: Vector3;
  readonly north: Vector3;
  readonly up: Vector3;
  readonly toObserver: Vector3;
}

/** Local basis at a Stonyhurst position [deg]; at a pole west is that of the given longitude. */
export function localBasis(frame: ViewFrame, lonDeg: number, latDeg: number): LocalBasis {
  const lon = (lonDeg - frame.stonyhurstLongitudeDeg) * RADIANS_PER_DEGREE;
  const lat = latDeg * RADIANS_PER_DEGREE;
  const up = surfacePoint(frame, lonDeg, latDeg, [0, 0, 0]);
  const westAhead = -Math.sin(lon);
  const west: Vector3 = [Math.cos(lon), -westAhead * frame.sinB0, westAhead * frame.cosB0];
  const northAhead = -Math.sin(lat) * Math.cos(lon);
  const north: Vector3 = [
    -Math.sin(lat) * Math.sin(lon),
    Math.cos(lat) * frame.cosB0 - northAhead * frame.sinB0,
    Math.cos(lat) * frame.sinB0 + northAhead * frame.cosB0,
  ];
  const ahead = frame.distanceRadii - up[2];
  const length = Math.hypot(up[0], up[1], ahead);
  const toObserver: Vector3 = [-up[0] / length, -up[1] / length, ahead / length];
  return { west, north, up, toObserver };
}

/** Carrington longitude (0 to 360) of a Stonyhurst longitude [deg]. */
export function carringtonOf(frame: ViewFrame, stonyhurstDeg: number): number {
  const fromMeridian = stonyhurstDeg - frame.stonyhurstLongitudeDeg;
  return wrapDegrees360(fromMeridian + frame.carringtonLongitudeDeg);
}

/** Stonyhurst longitude (-180 to 180) of a Carrington longitude [deg]. */
export function stonyhurstOfCarrington(frame: ViewFrame, carringtonDeg: number): number {
  const fromMeridian = carringtonDeg - frame.carringtonLongitudeDeg;
  return wrapDegrees180(fromMeridian + frame.stonyhurstLongitudeDeg);
}
