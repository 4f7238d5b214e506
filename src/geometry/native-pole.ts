import { RADIANS_PER_DEGREE } from '../units.js';

/** Where the reference point and the native pole lie; all in degrees. */
export interface PoleParameters {
  /** World coordinates of the reference point, CRVAL. */
  readonly lonDeg: number;
  readonly latDeg: number;
  /** Native latitude of the reference point: 90 zenithal, 0 cylindrical. */
  readonly theta0Deg: number;
  /** LONPOLE; its default where absent. */
  readonly lonPoleDeg?: number | undefined;
  /** LATPOLE; 90 where absent. */
  readonly latPoleDeg?: number | undefined;
}

const sine = (deg: number): number => Math.sin(deg * RADIANS_PER_DEGREE);
const cosine = (deg: number): number => Math.cos(deg * RADIANS_PER_DEGREE);
const degrees = (rad: number): number => rad / RADIANS_PER_DEGREE;

/**
 * Latitude of the native pole for a cylindrical projection: Calabretta & Greisen 2002, eq. 8 with
 * theta0 = 0; of its two solutions the one nearer to LATPOLE that is a latitude.
 */
function cylindricalPoleLatitude(latDeg: number, lonPoleDeg: number, latPoleDeg: number): number {
  const run = cosine(lonPoleDeg);
  if (Math.abs(run) < 1e-12) return latDeg === 0 ? latPoleDeg : Number.NaN;
  const base = run > 0 ? 0 : 180;
  const spread = degrees(Math.acos(Math.max(-1, Math.min(1, sine(latDeg) / Math.abs(run)))));
  const wrap = (deg: number) => ((((deg + 180) % 360) + 360) % 360) - 180;
  const isLatitude = (deg: number) => Math.abs(deg) <= 90 + 1e-9;
  const solutions = [wrap(base + spread), wrap(base - spread)].filter(isLatitude);
  solutions.sort((a, b) => Math.abs(a - latPoleDeg) - Math.abs(b - latPoleDeg));
  return solutions[0] ?? Number.NaN;
}

/** World longitude of the native pole of a cylindrical projection (theta0 = 0): eqs 9 and 10. */
function cylindricalPoleLongitude(
  parameters: PoleParameters,
  lonPoleDeg: number,
  poleLatDeg: number,
): number {
  const { lonDeg, latDeg } = parameters;
  if (Math.abs(latDeg) >= 90 - 1e-12) return lonDeg;
  if (poleLatDeg >= 90 - 1e-9) return lonDeg + lonPoleDeg - 180;
  if (poleLatDeg <= -90 + 1e-9) return lonDeg - lonPoleDeg;
  const across = sine(lonPoleDeg) / cosine(latDeg);
  const along = (-sine(poleLatDeg) * sine(latDeg)) / (cosine(poleLatDeg) * cosine(latDeg));
  return lonDeg - degrees(Math.atan2(across, along));
}

/**
 * Rotation from world to native vectors, nine numbers by rows (Calabretta & Greisen 2002, eq. 4, from
 * the pole of section 2.4). NaN throughout where LONPOLE admits no solution.
 */
export function worldToNative(parameters: PoleParameters): number[] {
  const { lonDeg, latDeg, theta0Deg } = parameters;
  const lonPole = parameters.lonPoleDeg ?? (latDeg >= theta0Deg ? 0 : 180);
  const isZenithal = theta0Deg === 90;
  const poleLat = isZenithal
    ? latDeg
    : cylindricalPoleLatitude(latDeg, lonPole, parameters.latPoleDeg ?? 90);
  const poleLon = isZenithal ? lonDeg : cylindricalPoleLongitude(parameters, lonPole, poleLat);
  const [sa, ca] = [sine(poleLon), cosine(poleLon)];
  const [sd, cd] = [sine(poleLat), cosine(poleLat)];
  const [sp, cp] = [sine(lonPole), cosine(lonPole)];
  return [
    -sa * sp - ca * cp * sd,
    ca * sp - sa * cp * sd,
    cp * cd,
    sa * cp - ca * sp * sd,
    -ca * cp - sa * sp * sd,
    sp * cd,
    ca * cd,
    sa * cd,
    sd,
  ];
}
