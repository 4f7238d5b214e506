/**
 * First UTC day of each value of TAI - UTC, as [year, month, seconds]. IERS Bulletin C, all leap
 * seconds to date; the test compares with the table of ERFA.
 */
const STEPS: readonly (readonly [number, number, number])[] = [
  [1972, 1, 10],
  [1972, 7, 11],
  [1973, 1, 12],
  [1974, 1, 13],
  [1975, 1, 14],
  [1976, 1, 15],
  [1977, 1, 16],
  [1978, 1, 17],
  [1979, 1, 18],
  [1980, 1, 19],
  [1981, 7, 20],
  [1982, 7, 21],
  [1983, 7, 22],
  [1985, 7, 23],
  [1988, 1, 24],
  [1990, 1, 25],
  [1991, 1, 26],
  [1992, 7, 27],
  [1993, 7, 28],
  [1994, 7, 29],
  [1996, 1, 30],
  [1997, 7, 31],
  [1999, 1, 32],
  [2006, 1, 33],
  [2009, 1, 34],
  [2012, 7, 35],
  [2015, 7, 36],
  [2017, 1, 37],
];

/** Terrestrial time less atomic time [s], exact by definition (IAU 1991). */
export const TT_MINUS_TAI_S = 32.184;

/** TAI - UTC [s] at a UTC instant in milliseconds of the Unix epoch; 10 s before 1972. */
export function leapSecondsAt(utcMs: number): number {
  for (let i = STEPS.length - 1; i >= 0; i--) {
    const [year, month, seconds] = STEPS[i];
    if (utcMs >= Date.UTC(year, month - 1, 1)) return seconds;
  }
  return 10;
}

/** UTC in milliseconds of an atomic-time reading given as if it were a UTC date. */
export function utcFromTai(taiMs: number): number {
  const first = taiMs - 1000 * leapSecondsAt(taiMs);
  return taiMs - 1000 * leapSecondsAt(first);
}
