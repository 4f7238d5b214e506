import { InvalidArgumentError } from 'commander';

/** A finite number; with limits, within them. For commander: throws InvalidArgumentError. */
export function numberArgument(
  what: string,
  least = Number.NEGATIVE_INFINITY,
  most = Number.POSITIVE_INFINITY,
): (text: string) => number {
  return (text) => {
    const value = text.trim() === '' ? Number.NaN : Number(text);
    if (Number.isFinite(value) && value >= least && value <= most) return value;
    const from = Number.isFinite(least) ? ` from ${least}` : '';
    const to = Number.isFinite(most) ? ` up to ${most}` : '';
    throw new InvalidArgumentError(`wanted ${what}, a number${from}${to}`);
  };
}

/** "LON,LAT" in degrees: west and north are positive. */
export function positionArgument(text: string): { lonDeg: number; latDeg: number } {
  const parts = text.split(',').map((part) => (part.trim() === '' ? Number.NaN : Number(part)));
  const [lonDeg, latDeg] = parts;
  if (parts.length === 2 && Math.abs(lonDeg) <= 180 && Math.abs(latDeg) <= 90)
    return { lonDeg, latDeg };
  throw new InvalidArgumentError('wanted LON,LAT in degrees, west and north positive, as 12.5,-20');
}

/** "2031-05-14" or "2031-05-14T08:00:00", UTC; gives ISO 8601 with Z. */
export function dateArgument(text: string): string {
  const match = /^(\d{4}-\d\d-\d\d)(?:[T ](\d\d:\d\d(?::\d\d(?:\.\d+)?)?)Z?)?$/.exec(text.trim());
  const date = new Date(match ? `${match[1]}T${match[2] ?? '00:00:00'}Z` : Number.NaN);
  // A day that does not exist, as February 30th, rolls over to another date.
  if (match && !Number.isNaN(date.getTime()) && date.toISOString().startsWith(match[1]))
    return date.toISOString();
  throw new InvalidArgumentError('wanted a date in UTC, as 2031-05-14T08:00:00');
}

/** "2" or a name: which HDU to read. */
export function hduArgument(text: string): number | string {
  return /^\d+$/.test(text) ? Number(text) : text;
}
