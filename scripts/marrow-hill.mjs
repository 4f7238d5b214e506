// The invented observations of the station on Marrow Hill, May 2031: submerged charges below a round Sun, seen
// along the line of sight with seeded noise, written as FITS. Remade bit for bit:
//   node scripts/marrow-hill.mjs [FOLDER]      (default fixtures/marrow-hill; needs the built dist/)
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { writeFits } from '../dist/fits/index.js';

const RADIUS_MM = 695.7;
const AU_MM = 149_597.870_7;
const DEG = Math.PI / 180;
const ARCSEC = DEG / 3600;

/** The observer of 2031-05-14 08:00 UTC; B0 and L0 as the ephemeris gives them to a hundredth. */
const OBSERVER = { distanceMm: 1.01055 * AU_MM, b0: -2.81 * DEG, l0Deg: 0.24 };
const DATE = '2031-05-14T08:00:00';

/** Charges [G Mm^2] at x west, y north and depth [Mm] of each region's centre. */
export const REGIONS = {
  'MH-1': {
    lonDeg: 12,
    latDeg: -18,
    charges: [
      [1.35e5, -21, 3, 9],
      [-1.1e5, 14, -4, 8],
      [3.4e4, 8, 11, 5],
      [-3.0e4, -4, 6, 5],
      [-2.4e4, 31, -12, 6],
      [1.2e4, -38, 14, 6],
      [-1.7e4, 24, 9, 5],
    ],
  },
  'MH-2': {
    lonDeg: -35,
    latDeg: 22,
    charges: [
      [-8.0e4, -26, -4, 9],
      [8.0e4, 24, 4, 10],
    ],
  },
  'MH-3': {
    lonDeg: 48,
    latDeg: 10,
    charges: [
      [-3.0e4, -22, -3, 11],
      [3.0e4, 20, 5, 13],
    ],
  },
};

const add = (a, b) => a.map((value, i) => value + b[i]);
const scale = (a, s) => a.map((value) => value * s);
const dot = (a, b) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a, b) => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
const unit = (a) => scale(a, 1 / Math.sqrt(dot(a, a)));

/** West, north and up at a place, in axes x west, y north on the sky, z to the observer. */
function localAxes(lonDeg, latDeg) {
  const { b0 } = OBSERVER;
  const [lon, lat] = [lonDeg * DEG, latDeg * DEG];
  const up = [
    Math.cos(lat) * Math.sin(lon),
    Math.sin(lat) * Math.cos(b0) - Math.cos(lat) * Math.cos(lon) * Math.sin(b0),
    Math.sin(lat) * Math.sin(b0) + Math.cos(lat) * Math.cos(lon) * Math.cos(b0),
  ];
  const west = unit(cross([0, Math.cos(b0), Math.sin(b0)], up));
  return { west, north: cross(up, west), up };
}

/** Charges of regions as [strength, place in the observer's axes]. */
function placeCharges(regions) {
  return regions.flatMap(({ lonDeg, latDeg, charges }) => {
    const { west, north, up } = localAxes(lonDeg, latDeg);
    return charges.map(([strength, x, y, depth]) => [
      strength,
      add(scale(up, RADIUS_MM - depth), add(scale(west, x), scale(north, y))),
    ]);
  });
}

/** Point of the sphere seen at helioprojective angles [rad], or undefined beside the disk. */
function surfacePoint(lon, lat) {
  const { distanceMm: d } = OBSERVER;
  const ray = [Math.cos(lat) * Math.sin(lon), Math.sin(lat), -Math.cos(lat) * Math.cos(lon)];
  const along = -d * ray[2];
  const root = along * along - d * d + RADIUS_MM * RADIUS_MM;
  return root < 0 ? undefined : add([0, 0, d], scale(ray, along - Math.sqrt(root)));
}

function lineOfSight(charges, point) {
  const view = unit(add([0, 0, OBSERVER.distanceMm], scale(point, -1)));
  let sum = 0;
  for (const [strength, place] of charges) {
    const r = add(point, scale(place, -1));
    sum += (strength * dot(r, view)) / dot(r, r) ** 1.5;
  }
  return sum;
}

/** Seeded normal numbers: minimal standard generator (Park & Miller 1988), Box & Muller 1958. */
function normalNoise(seed) {
  let state = seed;
  const next = () => {
    state = (state * 16807) % 2147483647;
    return state / 2147483647;
  };
  for (let i = 0; i < 10; i++) next();
  return () => Math.sqrt(-2 * Math.log(next())) * Math.cos(2 * Math.PI * next());
}

const BLANK = -32768;
const SCALE_G = 0.1;

/**
 * A map in steps of 0.1 G, int16 or (`wide`) int32, its header in the words of FITS 4.0 and Thompson (2006).
 */
export function observe({ regions, n, arcsec, centerArcsec, noiseG, seed, object, wide = false }) {
  const charges = placeCharges(regions);
  const random = normalNoise(seed);
  const crpix = centerArcsec.map((at) => n / 2 + 0.5 - at / arcsec);
  const values = new (wide ? Int32Array : Int16Array)(n * n);
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) {
      const x = (i + 1 - crpix[0]) * arcsec * ARCSEC;
      const y = (j + 1 - crpix[1]) * arcsec * ARCSEC;
      // TAN projection: the angles whose tangents are the plane's coordinates.
      const lon = Math.atan(x);
      const point = surfacePoint(lon, Math.atan(y * Math.cos(lon)));
      const field = point && lineOfSight(charges, point) + noiseG * random();
      values[i + n * j] =
        field === undefined ? BLANK : Math.round(Math.max(-3276, Math.min(3276, field)) / SCALE_G);
    }
  }
  const card = (keyword, value, comment) => ({ keyword, value, comment });
  const radius = Math.asin(RADIUS_MM / OBSERVER.distanceMm) / ARCSEC;
  const cards = [
    card('OBJECT', object, 'name of the region at the station'),
    card('OBSERVAT', 'Marrow Hill', 'invented station'),
    card('BUNIT', 'G', 'line-of-sight field, positive towards the observer'),
    card('DATE-OBS', DATE, 'UTC'),
    card('CTYPE1', 'HPLN-TAN', 'solar x, positive west'),
    card('CTYPE2', 'HPLT-TAN', 'solar y, positive north'),
    card('CUNIT1', 'arcsec', ''),
    card('CUNIT2', 'arcsec', ''),
    card('CRPIX1', crpix[0], 'disk centre'),
    card('CRPIX2', crpix[1], 'disk centre'),
    card('CRVAL1', 0, ''),
    card('CRVAL2', 0, ''),
    card('CDELT1', arcsec, ''),
    card('CDELT2', arcsec, ''),
    card('CROTA2', 0, '[deg]'),
    card('DSUN_OBS', Number((OBSERVER.distanceMm * 1e6).toPrecision(8)), '[m]'),
    card('RSUN_REF', RADIUS_MM * 1e6, '[m]'),
    card('RSUN_OBS', Number(radius.toFixed(3)), '[arcsec]'),
    card('CRLN_OBS', OBSERVER.l0Deg, '[deg]'),
    card('CRLT_OBS', -2.81, '[deg]'),
    card('HGLN_OBS', 0, '[deg]'),
  ];
  return writeFits([{ values, shape: [n, n], cards, bscale: SCALE_G, bzero: 0, blank: BLANK }]);
}

/** Helioprojective position of a region's centre [arcsec]. */
export function skyPosition({ lonDeg, latDeg }) {
  const p = scale(localAxes(lonDeg, latDeg).up, RADIUS_MM);
  const toObserver = OBSERVER.distanceMm - p[2];
  return [Math.atan2(p[0], toObserver), Math.atan2(p[1], toObserver)].map((at) =>
    Math.round(at / ARCSEC),
  );
}

/** The files of the station: name and bytes. */
export function marrowHillFiles() {
  const cutout = {
    regions: [REGIONS['MH-1']],
    centerArcsec: skyPosition(REGIONS['MH-1']),
    noiseG: 8,
    seed: 2031,
    object: 'MH-1',
  };
  return {
    'mh-1-20310514.fits': observe({ ...cutout, n: 256, arcsec: 1 }),
    'mh-1-20310514-small.fits': observe({ ...cutout, n: 96, arcsec: 2.5 }),
    'full-disk-20310514.fits': observe({
      regions: Object.values(REGIONS),
      n: 384,
      arcsec: 5.2,
      centerArcsec: [0, 0],
      noiseG: 8,
      seed: 514,
      object: 'Sun',
    }),
  };
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  const folder =
    process.argv[2] ?? fileURLToPath(new URL('../fixtures/marrow-hill', import.meta.url));
  mkdirSync(folder, { recursive: true });
  for (const [name, bytes] of Object.entries(marrowHillFiles())) {
    writeFileSync(join(folder, name), bytes);
    console.log(`${name}: ${bytes.length} bytes`);
  }
}
