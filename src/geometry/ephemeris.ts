import { createRequire } from 'node:module';
import { ASTRONOMICAL_UNIT_M } from '../constants.js';
import { RADIANS_PER_DEGREE } from '../units.js';
import { leapSecondsAt, TT_MINUS_TAI_S } from './leap-seconds.js';

/** The Sun as seen from the centre of the Earth. */
export interface SunFromEarth {
  /** Heliographic latitude of the disk centre. */
  readonly b0Deg: number;
  /** Carrington longitude of the disk centre, 0 to 360. */
  readonly l0Deg: number;
  /** Position angle of the solar north pole, east of celestial north. */
  readonly pDeg: number;
  readonly distanceM: number;
}

interface SolarLibrary {
  readonly disk: { ephemeris(jde: number, earth: unknown): [number, number, number] };
  readonly solar: { trueVSOP87(earth: unknown, jde: number): { range: number } };
  readonly earth: unknown;
}

let library: SolarLibrary | undefined;

/**
 * Loads astronomia on the first call only, and only the four files needed: 9 ms that a header which
 * says everything itself does not pay. `require`, because a dynamic import would make every reader of
 * a map asynchronous; the package ships no types.
 */
function loadLibrary(): SolarLibrary {
  if (library) return library;
  const load = createRequire(import.meta.url);
  const { Planet } = load('astronomia/planetposition');
  library = {
    disk: load('astronomia/solardisk'),
    solar: load('astronomia/solar').default,
    earth: new Planet(load('astronomia/data/vsop87Bearth').default),
  };
  return library;
}

/** Julian ephemeris day of a UTC instant. */
function julianEphemerisDay(utcMs: number): number {
  const ttMs = utcMs + 1000 * (leapSecondsAt(utcMs) + TT_MINUS_TAI_S);
  return ttMs / 86_400_000 + 2_440_587.5;
}

/**
 * Orientation and distance of the Sun at a Julian ephemeris day (dynamical time): Meeus,
 * Astronomical Algorithms (1998), chapter 29, with VSOP87; good to about 0.01 degrees.
 */
export function sunAtEphemerisDay(jde: number): SunFromEarth {
  const { disk, solar, earth } = loadLibrary();
  const [p, b0, l0] = disk.ephemeris(jde, earth);
  return {
    b0Deg: b0 / RADIANS_PER_DEGREE,
    l0Deg: l0 / RADIANS_PER_DEGREE,
    pDeg: p / RADIANS_PER_DEGREE,
    distanceM: solar.trueVSOP87(earth, jde).range * ASTRONOMICAL_UNIT_M,
  };
}

/** The same at a UTC instant, an ISO text or a Date. Throws RangeError when it is no date. */
export function sunFromEarth(dateUtc: string | Date): SunFromEarth {
  const utcMs = new Date(dateUtc).getTime();
  if (Number.isNaN(utcMs)) throw new RangeError(`no date: ${dateUtc}`);
  return sunAtEphemerisDay(julianEphemerisDay(utcMs));
}
