import type { FitsHeader } from '../fits/header.js';
import { numberAt, stringAt } from '../fits/header.js';
import { TT_MINUS_TAI_S, utcFromTai } from './leap-seconds.js';

/**
 * Keywords of the time of observation, best first: the middle of the exposure where the header
 * gives it (DATE-AVG, T_OBS), else its start.
 */
const DATE_KEYWORDS = ['DATE-AVG', 'T_OBS', 'DATE-OBS', 'DATE_OBS', 'DATE-BEG', 'T_REC'] as const;
const TIME_KEYWORDS = ['TIME-OBS', 'TIME_OBS', 'UTC-OBS', 'UT'] as const;

const MONTHS = 'jan feb mar apr may jun jul aug sep oct nov dec'.split(' ');
const CLOCK = String.raw`(\d{1,2}):(\d{2})(?::(\d{2}(?:\.\d*)?))?`;
const ZONE = String.raw`\s*_?(Z|UTC?|TAI|TT)?`;
const YEAR_FIRST = new RegExp(
  String.raw`^(\d{4})[-/.](\d{1,2})[-/.](\d{1,2})(?:[T_\s]+${CLOCK})?${ZONE}$`,
  'i',
);
const NAMED_MONTH = new RegExp(
  String.raw`^(\d{1,2})[-\s]([a-z]{3})[a-z]*[-\s](\d{4})(?:[T_\s]+${CLOCK})?${ZONE}$`,
  'i',
);
/** The form of the FITS standard before 1998: DD/MM/YY, always 19YY. */
const OLD_FITS = /^(\d{1,2})\/(\d{1,2})\/(\d{2})$/;
const CLOCK_ALONE = new RegExp(`^${CLOCK}${ZONE}$`, 'i');

interface ClockReading {
  /** The date and time read as if they were UTC [ms of the Unix epoch]. */
  readonly ms: number;
  readonly hasClock: boolean;
  readonly scale: string | undefined;
}

function reading(
  date: readonly [string, string, string],
  clock: readonly (string | undefined)[],
  scale: string | undefined,
): ClockReading | undefined {
  const [year, month, day] = date.map(Number);
  const [hours, minutes, seconds] = [0, 1, 2].map((i) => Number(clock[i] ?? 0));
  const isDate = year >= 1850 && year <= 2200 && month >= 1 && month <= 12 && day >= 1;
  if (!isDate || day > new Date(Date.UTC(year, month, 0)).getUTCDate()) return undefined;
  if (hours > 24 || minutes > 59 || seconds >= 61) return undefined;
  const ms = Date.UTC(year, month - 1, day) + 3.6e6 * hours + 6e4 * minutes + 1e3 * seconds;
  return { ms, hasClock: clock[0] !== undefined, scale: scale?.toUpperCase() };
}

function readClock(text: string): ClockReading | undefined {
  const plain = YEAR_FIRST.exec(text);
  if (plain) return reading([plain[1], plain[2], plain[3]], plain.slice(4, 7), plain[7]);
  const named = NAMED_MONTH.exec(text);
  if (named) {
    const month = String(MONTHS.indexOf(named[2].toLowerCase()) + 1);
    return reading([named[3], month, named[1]], named.slice(4, 7), named[7]);
  }
  const old = OLD_FITS.exec(text);
  return old ? reading([`19${old[3]}`, old[2], old[1]], [], undefined) : undefined;
}

function toIso(read: ClockReading, headerScale: string | undefined): string {
  const scale = read.scale ?? headerScale;
  if (scale === 'TAI') return new Date(Math.round(utcFromTai(read.ms))).toISOString();
  if (scale === 'TT')
    return new Date(Math.round(utcFromTai(read.ms - 1000 * TT_MINUS_TAI_S))).toISOString();
  return new Date(Math.round(read.ms)).toISOString();
}

/**
 * UTC in ISO form of one date text: 2010-10-15T00:00:26.5Z, 2025/01/09, 2010.10.15_00:03:30_TAI,
 * 15-Oct-2010 00:00:26, 15/10/98; UTC unless the text or `scale` says TAI or TT. `undefined` where
 * it is not a date.
 */
export function isoFromText(text: string, scale?: string): string | undefined {
  const read = readClock(text.trim());
  return read && toIso(read, scale?.toUpperCase());
}

/**
 * Time of observation as ISO UTC from DATE-AVG, T_OBS, DATE-OBS, DATE_OBS, DATE-BEG or T_REC, with
 * TIME-OBS where the date has no clock, else MJD-AVG or MJD-OBS; `undefined` where the header has none.
 */
export function observationTime(header: FitsHeader): string | undefined {
  const headerScale = stringAt(header, 'TIMESYS')?.trim().toUpperCase();
  for (const keyword of DATE_KEYWORDS) {
    const read = readClock((stringAt(header, keyword) ?? '').trim());
    if (!read) continue;
    if (read.hasClock) return toIso(read, headerScale);
    for (const timeKeyword of TIME_KEYWORDS) {
      const clock = CLOCK_ALONE.exec((stringAt(header, timeKeyword) ?? '').trim());
      if (!clock) continue;
      const [hours, minutes, seconds] = clock.slice(1, 4).map((part) => Number(part ?? 0));
      const ms = read.ms + 3.6e6 * hours + 6e4 * minutes + 1e3 * seconds;
      return toIso({ ms, hasClock: true, scale: clock[4]?.toUpperCase() }, headerScale);
    }
    return toIso(read, headerScale);
  }
  const modifiedJulian = numberAt(header, 'MJD-AVG', 'MJD-OBS');
  if (modifiedJulian === undefined || !(modifiedJulian > 0)) return undefined;
  const ms = (modifiedJulian - 40587) * 86_400_000; // 40587 is the Unix epoch
  return toIso({ ms, hasClock: true, scale: undefined }, headerScale);
}
