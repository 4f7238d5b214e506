// A vector magnetograph over a round Sun with charges below its surface, written without the geometry under
// test. Axes: x to solar west, y to solar north on the sky, z to the observer; lengths in Mm.
import { type FitsFile, parseFits } from '../../src/fits/file.js';
import { writeFits } from '../../src/fits/index.js';

export type Vec = readonly [number, number, number];

const RADIUS_MM = 695.7;
const DISTANCE_MM = 1.01 * 149_597.870_7;
const DEG = Math.PI / 180;
const ARCSEC = DEG / 3600;
const B0 = 4 * DEG;
const L0_DEG = 77;

const plus = (a: Vec, b: Vec, s = 1): Vec => [a[0] + s * b[0], a[1] + s * b[1], a[2] + s * b[2]];
const times = (a: Vec, s: number): Vec => [a[0] * s, a[1] * s, a[2] * s];
export const dot = (a: Vec, b: Vec): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: Vec, b: Vec): Vec => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
export const unit = (a: Vec): Vec => times(a, 1 / Math.sqrt(dot(a, a)));

/** Radial unit vector at a Stonyhurst place: Thompson 2006, A&A 449, 791, eq. 11, observer at longitude 0. */
export function upAt(lonDeg: number, latDeg: number): Vec {
  const [lon, lat] = [lonDeg * DEG, latDeg * DEG];
  return [
    Math.cos(lat) * Math.sin(lon),
    Math.sin(lat) * Math.cos(B0) - Math.cos(lat) * Math.cos(lon) * Math.sin(B0),
    Math.sin(lat) * Math.sin(B0) + Math.cos(lat) * Math.cos(lon) * Math.cos(B0),
  ];
}

/** Heliographic west, north and up at a place: west is the rotation axis cross up. */
export function localAxes(lonDeg: number, latDeg: number): { west: Vec; north: Vec; up: Vec } {
  const up = upAt(lonDeg, latDeg);
  const west = unit(cross([0, Math.cos(B0), Math.sin(B0)], up));
  return { west, north: cross(up, west), up };
}

/** Charges [G Mm^2] at x west, y north and depth [Mm]; nothing symmetric about them. */
const CHARGES = [
  [1.6e5, -16, 4, 10],
  [-1.3e5, 15, -5, 9],
  [4e4, 6, 14, 7],
  [-4e4, -6, -12, 8],
] as const;

/** Field [G] at a point of the surface (unit vector) of charges about a place. */
export function fieldAt(point: Vec, lonDeg: number, latDeg: number): Vec {
  const { west, north, up } = localAxes(lonDeg, latDeg);
  let sum: Vec = [0, 0, 0];
  for (const [strength, x, y, depth] of CHARGES) {
    const place = plus(plus(times(up, RADIUS_MM - depth), west, x), north, y);
    const r = plus(times(point, RADIUS_MM), place, -1);
    sum = plus(sum, r, strength / dot(r, r) ** 1.5);
  }
  return sum;
}

/** Unit vector from a surface point to the observer. */
export function viewOf(point: Vec): Vec {
  return unit(plus([0, 0, DISTANCE_MM], point, -RADIUS_MM));
}

/** Strength, inclination to the observer and azimuth counter-clockwise from solar north on the sky [rad]. */
export function seen(
  field: Vec,
  point: Vec,
): { strength: number; inclination: number; psi: number } {
  const view = viewOf(point);
  const north = unit(plus([0, 1, 0], view, -view[1]));
  const west = cross(north, view);
  const strength = Math.sqrt(dot(field, field));
  return {
    strength,
    inclination: Math.acos(dot(field, view) / strength),
    psi: Math.atan2(-dot(field, west), dot(field, north)),
  };
}

/** The inverse of `seen`. */
export function fieldSeen(strength: number, inclination: number, psi: number, point: Vec): Vec {
  const view = viewOf(point);
  const north = unit(plus([0, 1, 0], view, -view[1]));
  const west = cross(north, view);
  const across = strength * Math.sin(inclination);
  const sky = plus(times(north, across * Math.cos(psi)), west, -across * Math.sin(psi));
  return plus(sky, view, strength * Math.cos(inclination));
}

/** How the camera is held. */
export interface Camera {
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly nx: number;
  readonly ny: number;
  /** [arcsec], negative for a mirrored axis. */
  readonly cdelt: readonly [number, number];
  readonly crotaDeg: number;
}

const OBSERVER_CARDS = {
  'DATE-OBS': '2031-05-14T08:00:00',
  DSUN_OBS: DISTANCE_MM * 1e6,
  RSUN_REF: RADIUS_MM * 1e6,
  CRLT_OBS: B0 / DEG,
  CRLN_OBS: L0_DEG,
  HGLN_OBS: 0,
};

type Cards = Readonly<Record<string, string | number>>;
const cardList = (cards: Cards) =>
  Object.entries(cards).map(([keyword, value]) => ({ keyword, value, comment: '' }));

/** One plane of a made map: values and cards of its own. */
export interface Plane {
  readonly values: Float32Array;
  readonly cards?: Cards;
}

/** A file of one HDU a plane. */
export function fileOf(
  name: string,
  planes: readonly Plane[],
  shape: [number, number],
  cards: Cards,
): FitsFile {
  const hdus = planes.map((plane) => ({
    values: plane.values,
    shape,
    cards: cardList({ ...cards, ...plane.cards }),
  }));
  return parseFits(writeFits(hdus), name);
}

/** The planes that a camera delivers, and the cards of all. */
export interface Observation {
  readonly strength: Float32Array;
  readonly inclination: Float32Array;
  /** Counter-clockwise from the image's +y axis, 0 to 180 degrees. */
  readonly azimuth: Float32Array;
  /** 1 where the azimuth has to be turned by 180 degrees. */
  readonly flips: Float32Array;
  readonly cards: Cards;
  readonly shape: [number, number];
}

/**
 * Looks at charges about (lonDeg, latDeg) with that place in the middle of the picture. Rotation as Greisen &
 * Calabretta 2002, A&A 395, 1061, section 6: x = CDELT1 cos rho i - CDELT2 sin rho j, y = CDELT1 sin rho i +
 * CDELT2 cos rho j; TAN projection about the disk centre.
 */
export function observe(camera: Camera): Observation {
  const { lonDeg, latDeg, nx, ny, cdelt, crotaDeg } = camera;
  const [cos, sin] = [Math.cos(crotaDeg * DEG), Math.sin(crotaDeg * DEG)];
  const centre = times(upAt(lonDeg, latDeg), RADIUS_MM);
  const ahead = DISTANCE_MM - centre[2];
  const middle = [centre[0] / ahead / ARCSEC, centre[1] / ahead / ARCSEC];
  // From the disk centre to the middle, in pixels, by the inverse rotation.
  const back = [
    (cos * middle[0] + sin * middle[1]) / cdelt[0],
    (cos * middle[1] - sin * middle[0]) / cdelt[1],
  ];
  const crpix = [(nx + 1) / 2 - back[0], (ny + 1) / 2 - back[1]];
  const axisX = [Math.sign(cdelt[0]) * cos, Math.sign(cdelt[0]) * sin];
  const axisY = [-Math.sign(cdelt[1]) * sin, Math.sign(cdelt[1]) * cos];
  const [strength, inclination, azimuth, flips] = [0, 1, 2, 3].map(() => new Float32Array(nx * ny));
  for (let j = 0; j < ny; j++) {
    for (let i = 0; i < nx; i++) {
      const [u, v] = [(i + 1 - crpix[0]) * cdelt[0], (j + 1 - crpix[1]) * cdelt[1]];
      const point = surfaceSeen((cos * u - sin * v) * ARCSEC, (sin * u + cos * v) * ARCSEC);
      const at = i + nx * j;
      if (!point) {
        strength[at] = Number.NaN;
        continue;
      }
      const s = seen(fieldAt(point, lonDeg, latDeg), point);
      // Direction on the sky as (west, north), then along the image's +y and to its left.
      const sky = [-Math.sin(s.psi), Math.cos(s.psi)];
      const left = -(sky[0] * axisX[0] + sky[1] * axisX[1]);
      const full = Math.atan2(left, sky[0] * axisY[0] + sky[1] * axisY[1]) / DEG;
      strength[at] = s.strength;
      inclination[at] = s.inclination / DEG;
      azimuth[at] = full < 0 ? full + 180 : full;
      flips[at] = full < 0 ? 1 : 0;
    }
  }
  const cards = {
    ...{ CTYPE1: 'HPLN-TAN', CTYPE2: 'HPLT-TAN', CUNIT1: 'arcsec', CUNIT2: 'arcsec' },
    ...{ CRPIX1: crpix[0], CRPIX2: crpix[1], CRVAL1: 0, CRVAL2: 0 },
    ...{ CDELT1: cdelt[0], CDELT2: cdelt[1], CROTA2: crotaDeg },
    ...OBSERVER_CARDS,
  };
  return { strength, inclination, azimuth, flips, cards, shape: [nx, ny] };
}

/** Surface point (unit vector) on the line of sight with tangents (x, y) about the disk centre. */
function surfaceSeen(x: number, y: number): Vec | undefined {
  const ray = unit([x, y, -1]);
  const along = -DISTANCE_MM * ray[2];
  const root = along * along - DISTANCE_MM ** 2 + RADIUS_MM ** 2;
  if (root < 0) return undefined;
  return times(plus([0, 0, DISTANCE_MM], ray, along - Math.sqrt(root)), 1 / RADIUS_MM);
}

/**
 * West, north and radial components on a cylindrical equal-area grid in Carrington coordinates about a place:
 * longitude linear, sine of latitude linear (Calabretta & Greisen 2002, A&A 395, 1077, section 5.2.2).
 */
export function heliographicGrid(lonDeg: number, latDeg: number, n: number, stepDeg: number) {
  const [west, north, radial] = [0, 1, 2].map(() => new Float32Array(n * n));
  const middle = Math.sin(latDeg * DEG) / DEG / stepDeg;
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const lon = lonDeg + (i - (n - 1) / 2) * stepDeg;
      const lat = Math.asin((j - (n - 1) / 2 + middle) * stepDeg * DEG) / DEG;
      const axes = localAxes(lon, lat);
      const field = fieldAt(axes.up, lonDeg, latDeg);
      west[i + n * j] = dot(field, axes.west);
      north[i + n * j] = dot(field, axes.north);
      radial[i + n * j] = dot(field, axes.up);
    }
  }
  const cards = {
    ...{ CTYPE1: 'CRLN-CEA', CTYPE2: 'CRLT-CEA', CUNIT1: 'deg', CUNIT2: 'deg' },
    ...{ CRPIX1: (n + 1) / 2, CRPIX2: (n + 1) / 2 - middle },
    ...{ CRVAL1: L0_DEG + lonDeg, CRVAL2: 0, CDELT1: stepDeg, CDELT2: stepDeg },
    ...OBSERVER_CARDS,
  };
  return { west, north, radial, cards, shape: [n, n] as [number, number] };
}
