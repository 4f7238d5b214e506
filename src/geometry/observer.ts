import { ASTRONOMICAL_UNIT_M, SOLAR_RADIUS_M } from '../constants.js';
import type { FitsHeader } from '../fits/header.js';
import { numberAt } from '../fits/header.js';
import { ARCSEC_PER_RADIAN, wrapDegrees180, wrapDegrees360 } from '../units.js';
import { type SunFromEarth, sunFromEarth } from './ephemeris.js';

/** Where a number about the observer comes from; 'option' when an ephemeris used the date given. */
export type Basis = 'header' | 'ephemeris' | 'option';

/** Where the observer stood; plain data. */
export interface Observer {
  /** Distance to the Sun's centre. */
  readonly distanceM: number;
  /** Heliographic latitude of the disk centre, B0. */
  readonly latitudeDeg: number;
  readonly stonyhurstLongitudeDeg: number;
  /** Carrington longitude of the disk centre, 0 to 360; NaN where neither header nor date gives it. */
  readonly carringtonLongitudeDeg: number;
  /** Radius of the Sun to which the header's coordinates refer. */
  readonly solarRadiusM: number;
  readonly basis: {
    readonly distance: Basis;
    readonly latitude: Basis;
    readonly stonyhurstLongitude: Basis;
    readonly carringtonLongitude: Basis;
    readonly solarRadius: Basis | 'nominal';
  };
}

export interface ObserverReading {
  /** Absent where the header is silent and there is no date for the ephemeris. */
  readonly observer?: Observer;
  /** Angular radius of the Sun that the header states [rad]. */
  readonly angularRadius?: number;
  readonly warnings: readonly string[];
}

const RADIUS_KEYWORDS = [
  'RSUN_OBS',
  'RSUN_ARC',
  'OBS_R0',
  'SOLAR_R',
  'SOLAR_R0',
  'EPH_R0',
  'RADIUS',
  'SEMIDIAM',
  'RSUN',
] as const;
const LATITUDE_KEYWORDS = ['CRLT_OBS', 'HGLT_OBS', 'SOLAR_B0', 'OBS_B0', 'EPH_B0', 'B0'] as const;
const CARRINGTON_KEYWORDS = ['CRLN_OBS', 'OBS_L0', 'EPH_L0', 'SOLAR_L0', 'L0'] as const;
const DISTANCE_KEYWORDS = ['DSUN_OBS', 'DSUN_AU', 'OBS_DIST', 'DISTANCE'] as const;

/** Distances beyond these are mistakes: the closest probe comes to 0.046 au. */
const NEAREST_AU = 0.04;
const FARTHEST_AU = 6;
/** Distance and angular radius may differ by this fraction (radius definitions do by 0.1 %). */
const RADIUS_TOLERANCE = 0.003;
/**
 * An observer nearer than this to the Earth's meridian is taken to stand on it: conventions for light
 * time differ by 0.1 degree, and an orbit about the first Lagrange point strays 0.3.
 */
const EARTH_BOUND_DEG = 0.5;

const first = <T>(values: Iterable<T | undefined>): T | undefined => {
  for (const value of values) if (value !== undefined) return value;
  return undefined;
};

/** Distance in metres of a value in metres, kilometres or au, told by its size; `undefined` if absurd. */
function metres(value: number): number | undefined {
  const au =
    value < 100
      ? value
      : value < 2e9
        ? (1e3 * value) / ASTRONOMICAL_UNIT_M
        : value / ASTRONOMICAL_UNIT_M;
  return au > NEAREST_AU && au < FARTHEST_AU ? au * ASTRONOMICAL_UNIT_M : undefined;
}

/** Angular radius in rad of a value in radians or arcsec, told by its size; `undefined` for pixels. */
function radians(value: number): number | undefined {
  const smallest = Math.asin(SOLAR_RADIUS_M / (FARTHEST_AU * ASTRONOMICAL_UNIT_M));
  const largest = Math.asin(SOLAR_RADIUS_M / (NEAREST_AU * ASTRONOMICAL_UNIT_M));
  const angle = value < 0.2 ? value : value / ARCSEC_PER_RADIAN;
  return angle > smallest && angle < largest ? angle : undefined;
}

function numbers(
  header: FitsHeader,
  keywords: readonly string[],
  accept: (v: number) => number | undefined,
) {
  return first(
    (function* () {
      for (const keyword of keywords) {
        const value = numberAt(header, keyword);
        if (value !== undefined && Number.isFinite(value)) yield accept(value);
      }
    })(),
  );
}

function latitude(value: number): number | undefined {
  return Math.abs(value) <= 90 ? value : undefined;
}

/** Radius of the Sun in metres that the header names (RSUN_REF), where believable. */
function referenceRadius(header: FitsHeader): number | undefined {
  return numbers(header, ['RSUN_REF'], (value) =>
    Math.abs(value / SOLAR_RADIUS_M - 1) < 0.01 ? value : undefined,
  );
}

/** Radius in metres that a stated distance and angular radius imply, where they agree on one Sun. */
function impliedRadius(
  stated: number | undefined,
  angularRadius: number | undefined,
): number | undefined {
  if (stated === undefined || angularRadius === undefined) return undefined;
  const radiusM = stated * Math.sin(angularRadius);
  return Math.abs(radiusM / SOLAR_RADIUS_M - 1) <= RADIUS_TOLERANCE ? radiusM : undefined;
}

/**
 * Distance of the observer. Where a stated distance contradicts the stated angular radius, the radius
 * wins: it is measured or computed per picture, a distance of exactly 1 au is a placeholder.
 */
function resolveDistance(
  stated: number | undefined,
  angularRadius: number | undefined,
  solarRadiusM: number,
  warnings: string[],
): number | undefined {
  if (angularRadius === undefined) return stated;
  const fromRadius = solarRadiusM / Math.sin(angularRadius);
  if (stated === undefined) return fromRadius;
  if (Math.abs(fromRadius / stated - 1) <= RADIUS_TOLERANCE) return stated;
  const au = (value: number) => (value / ASTRONOMICAL_UNIT_M).toFixed(4);
  const arcsec = (angularRadius * ARCSEC_PER_RADIAN).toFixed(1);
  warnings.push(
    `the distance ${au(stated)} au contradicts the solar radius ${arcsec} arcsec (${au(fromRadius)} au): the radius is used`,
  );
  return fromRadius;
}

/**
 * Reads the observer from a header by the keywords real files use, filling gaps from the ephemeris of
 * the Earth at `dateIso` (UTC); `dateIsOption` says that the date was given by the user.
 */
export function readObserver(
  header: FitsHeader,
  dateIso: string | undefined,
  dateIsOption = false,
): ObserverReading {
  const warnings: string[] = [];
  const ephemerisBasis: Basis = dateIsOption ? 'option' : 'ephemeris';
  let earth: SunFromEarth | undefined;
  const fromEarth = (): SunFromEarth | undefined => {
    if (dateIso !== undefined) earth ??= sunFromEarth(dateIso);
    return earth;
  };
  const angularRadius = numbers(header, RADIUS_KEYWORDS, radians);
  const stated = numbers(header, DISTANCE_KEYWORDS, metres);
  const namedRadius = referenceRadius(header) ?? impliedRadius(stated, angularRadius);
  const solarRadiusM = namedRadius ?? SOLAR_RADIUS_M;
  const headerDistance = resolveDistance(stated, angularRadius, solarRadiusM, warnings);
  const headerLatitude = numbers(header, LATITUDE_KEYWORDS, latitude);
  const distanceM = headerDistance ?? fromEarth()?.distanceM;
  const latitudeDeg = headerLatitude ?? fromEarth()?.b0Deg;
  const radius = angularRadius === undefined ? {} : { angularRadius };
  if (distanceM === undefined || latitudeDeg === undefined) return { ...radius, warnings };

  const headerCarrington = numberAt(header, ...CARRINGTON_KEYWORDS);
  const headerStonyhurst = numberAt(header, 'HGLN_OBS');
  let stonyhurst = headerStonyhurst;
  if (stonyhurst === undefined) {
    const l0 = headerCarrington === undefined ? undefined : fromEarth()?.l0Deg;
    const offset = l0 === undefined ? 0 : wrapDegrees180(headerCarrington! - l0);
    stonyhurst = Math.abs(offset) < EARTH_BOUND_DEG ? 0 : offset;
  }
  const carrington = headerCarrington ?? (fromEarth()?.l0Deg ?? Number.NaN) + stonyhurst;
  const basis = {
    distance: headerDistance === undefined ? ephemerisBasis : 'header',
    latitude: headerLatitude === undefined ? ephemerisBasis : 'header',
    stonyhurstLongitude: headerStonyhurst === undefined ? ephemerisBasis : 'header',
    carringtonLongitude: headerCarrington === undefined ? ephemerisBasis : 'header',
    solarRadius: namedRadius === undefined ? 'nominal' : 'header',
  } as const;
  const observer: Observer = {
    distanceM,
    latitudeDeg,
    stonyhurstLongitudeDeg: wrapDegrees180(stonyhurst),
    carringtonLongitudeDeg: wrapDegrees360(carrington),
    solarRadiusM,
    basis,
  };
  return { observer, ...radius, warnings };
}

/** Angular radius of the Sun [rad] for an observer. */
export function angularRadiusOf(observer: Observer): number {
  return Math.asin(observer.solarRadiusM / observer.distanceM);
}
