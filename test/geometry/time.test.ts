import { describe, expect, it } from 'vitest';
import { leapSecondsAt } from '../../src/geometry/leap-seconds.js';
import { isoFromText, observationTime } from '../../src/geometry/time.js';
import { fixture, headerOf } from './support.js';

const times = fixture<{
  leapSeconds: [number, number, number][];
  taiToUtc: [string, string][];
}>('time.json');

describe('time scales against ERFA (fixtures/geometry/time.json)', () => {
  it('knows every leap second, before and after its day', () => {
    expect(times.leapSeconds.length).toBe(28);
    times.leapSeconds.forEach(([year, month, seconds], i) => {
      const day = Date.UTC(year, month - 1, 1);
      expect(leapSecondsAt(day)).toBe(seconds);
      if (i > 0) expect(leapSecondsAt(day - 1000)).toBe(times.leapSeconds[i - 1][2]);
    });
  });
  it.each(times.taiToUtc)('TAI %s is UTC %s', (tai, utc) => {
    const text = `${tai.replaceAll('-', '.').replace('T', '_')}_TAI`;
    expect(Date.parse(isoFromText(text)!)).toBe(Date.parse(`${utc}Z`));
  });
});

describe('date texts of real headers', () => {
  it.each([
    ['2009-01-31T08:03:02.462Z', '2009-01-31T08:03:02.462Z'],
    ['1999-12-10T23:58:43', '1999-12-10T23:58:43.000Z'],
    ['2014-03-01T00:00:27.90', '2014-03-01T00:00:27.900Z'],
    ['2025/01/09', '2025-01-09T00:00:00.000Z'],
    ['2009.01.31_08:03:30_UTC', '2009-01-31T08:03:30.000Z'],
    ['15-Oct-2010 00:00:26.500', '2010-10-15T00:00:26.500Z'],
    ['15/10/98', '1998-10-15T00:00:00.000Z'],
    ['2031-05-01 06:30', '2031-05-01T06:30:00.000Z'],
  ])('%s', (text, iso) => expect(isoFromText(text)).toBe(iso));
  it.each(['', 'nan', '-4712.01.01_11:59:28_TAI', '2011-02-30', '2011-13-01', '12:00', 'soon'])(
    'refuses "%s"',
    (text) => expect(isoFromText(text)).toBeUndefined(),
  );
});

describe('observation time of a header', () => {
  it('prefers the middle of the exposure', () => {
    const cards = { 'DATE-OBS': '2010-10-15T00:00:26.000', T_OBS: '2010.10.15_00:03:30.000_TAI' };
    expect(observationTime(headerOf(cards))).toBe('2010-10-15T00:02:56.000Z');
    const more = { ...cards, 'DATE-AVG': '2010-10-15T00:01:00' };
    expect(observationTime(headerOf(more))).toBe('2010-10-15T00:01:00.000Z');
  });
  it('joins a date and a clock, and skips what is no date', () => {
    const cards = {
      T_OBS: 'nan',
      'DATE-OBS': '2025/01/09        ',
      'TIME-OBS': '01:35:16.008025   ',
    };
    expect(observationTime(headerOf(cards))).toBe('2025-01-09T01:35:16.008Z');
    const whole = { DATE_OBS: '2011-02-14T03:04:43.785', 'TIME-OBS': '05:00:00' };
    expect(observationTime(headerOf(whole))).toBe('2011-02-14T03:04:43.785Z');
  });
  it('honours TIMESYS and falls back to MJD', () => {
    const tai = { TIMESYS: 'TAI', 'DATE-OBS': '2017-01-01T00:00:37' };
    expect(observationTime(headerOf(tai))).toBe('2017-01-01T00:00:00.000Z');
    expect(observationTime(headerOf({ 'MJD-OBS': 51544.5 }))).toBe('2000-01-01T12:00:00.000Z');
    expect(observationTime(headerOf({}))).toBeUndefined();
  });
});
