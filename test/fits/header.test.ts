import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { FitsError } from '../../src/errors.js';
import {
  booleanAt,
  hasCard,
  headerFromText,
  numberAt,
  parseFits,
  parseHeader,
  stringAt,
} from '../../src/fits/index.js';
import { type ExpectedCards, expected, fixtureBytes } from './fixtures.js';

const bytesOf = (...cards: string[]) =>
  new Uint8Array(Buffer.from(cards.map((card) => card.padEnd(80)).join(''), 'latin1'));

describe('cards as astropy writes and reads them', () => {
  const { header } = parseFits(fixtureBytes('header-cards.fits'), 'header-cards').hdus[0];
  const wanted = (expected['header-cards.fits'] as ExpectedCards).cards;

  test.each(wanted.map((card, index) => ({ index, keyword: card[0], card })))(
    'card $index $keyword',
    ({ index, card: [keyword, value, comment] }) => {
      const got = header.cards[index];
      const commentary = keyword === 'COMMENT' || keyword === 'HISTORY';
      expect(got.keyword).toBe(keyword);
      // astropy has the text of commentary cards as their value
      expect(commentary ? got.comment : (got.value ?? null)).toBe(value);
      if (!commentary) expect(got.comment).toBe(comment);
    },
  );

  test('no card is left over and none is complained of', () => {
    expect(header.cards.length).toBe(wanted.length);
    expect(header.warnings).toEqual([]);
  });
});

describe('cards by the standard (4.0, chapter 4)', () => {
  const at = (text: string) => headerFromText(text).cards[0];

  test.each([
    ["KEY     = 'it''s'", "it's", ''],
    ["KEY     = '  leading and trailing  '  / c", '  leading and trailing', 'c'],
    ["KEY     = 'a / b'/c", 'a / b', 'c'],
    ["KEY     = ''", '', ''],
    ['KEY     =                    T / yes', true, 'yes'],
    ['KEY     = F', false, ''],
    ['KEY     =   1.5D+03 / D exponent', 1500, 'D exponent'],
    ['KEY     = +.5E-1', 0.05, ''],
    ['KEY     = -7', -7, ''],
    ['KEY     = 12345678901234567890', '12345678901234567890', ''],
    ['KEY     = (1.0, 2.0) / complex', '(1.0, 2.0)', 'complex'],
    ['KEY     =                      / undefined', undefined, 'undefined'],
    ['KEY     = 1E999 / infinite', undefined, 'infinite'],
    ['KEY     = Marrow / unquoted', 'Marrow', 'unquoted'],
    ["KEY     = 'open", 'open', ''],
    ['KEY       12', undefined, '  12'],
    ['KEY     =12', 12, ''],
    ['KEY=12', 12, ''],
    ["HIERARCH  KEY = 'x' / long name", 'x', 'long name'],
  ])('%s', (text, value, comment) => {
    expect(at(text)).toEqual({ keyword: 'KEY', value, comment });
  });

  test('long strings: the ampersand goes, comments join, a lone one stays', () => {
    const text =
      "KEY     = 'one &' / first\nCONTINUE  'two&' / second\nCONTINUE  ''\nLONE    = 'a&'";
    const { cards, warnings } = headerFromText(text);
    expect(cards).toEqual([
      { keyword: 'KEY', value: 'one two', comment: 'first second' },
      { keyword: 'LONE', value: 'a&', comment: '' },
    ]);
    expect(warnings).toEqual([]);
  });

  test('the first of two values counts, with a warning; equal ones and COMMENT do not warn', () => {
    const header = headerFromText(
      'A       = 1\nA       = 2\nB       = 1\nB       = 1\nCOMMENT x\nCOMMENT y',
    );
    expect(numberAt(header, 'A')).toBe(1);
    expect(header.warnings).toEqual(['A given twice with different values, the first one counts']);
  });

  test('END is found in its block and ENDSTATE is not it', () => {
    const bytes = bytesOf('ENDSTATE=                    1', 'END');
    const { header, nextOffset } = parseHeader(bytes, 0);
    expect([header.cards.length, nextOffset]).toEqual([1, 2880]);
    expect(() => parseHeader(bytesOf('A       = 1'), 0)).toThrow(/without an END card/);
    expect(() => parseHeader(new Uint8Array(8_000_000).fill(32), 0)).toThrow(FitsError);
  });
});

describe('look-ups', () => {
  const header = headerFromText(
    "A       = '      223.202'\nB       = 'text'\nC       = '   '\nD       =\nE       = '       0'\nF       = 'T'\nG       = 5",
  );

  test('numbers, also in quotes; the first keyword that holds one', () => {
    expect(numberAt(header, 'A')).toBe(223.202);
    expect(numberAt(header, 'MISSING', 'B', 'C', 'D', 'E', 'G')).toBe(0);
    expect(numberAt(header, 'B', 'C', 'D')).toBeUndefined();
  });

  test('strings that are not blank; flags; presence', () => {
    expect(stringAt(header, 'C', 'D', 'G', 'b')).toBe('text');
    expect(stringAt(header, 'C')).toBeUndefined();
    expect([booleanAt(header, 'E'), booleanAt(header, 'F'), booleanAt(header, 'B')]).toEqual([
      false,
      true,
      undefined,
    ]);
    expect([hasCard(header, 'D'), hasCard(header, 'Z')]).toEqual([true, false]);
  });
});

test('breaks of the rules with a clear meaning are read, each with a warning', () => {
  const file = parseFits(fixtureBytes('odd-header.fits'), 'odd-header');
  const { header } = file.hdus[0];
  expect(numberAt(header, 'XCEN')).toBe(223.202);
  expect(stringAt(header, 'TIME_D$O')).toBe('12:00:00');
  expect(numberAt(header, 'ENDSTATE')).toBe(7);
  expect(numberAt(header, 'EXPTIME')).toBe(25);
  expect(numberAt(header, 'CDELT1')).toBe(0.5);
  expect(numberAt(header, 'TIGHT')).toBe(5);
  expect(numberAt(header, 'DUR')).toBe(1.5);
  expect(stringAt(header, 'OPEN')).toBe('no closing quote');
  expect(stringAt(header, 'WORD')).toBe('Marrow');
  expect(numberAt(header, 'NOTANUM', 'BLANKVAL', 'NOEQUAL')).toBeUndefined();
  const said = file.warnings.join('\n');
  for (const word of [
    'TIME_D$O',
    'exptime',
    'CDELT1',
    'OPEN',
    'TIGHT',
    'WORD',
    'NOTANUM',
    'CONTINUE',
    'DUR',
  ]) {
    expect(said).toContain(word);
  }
  expect(file.hdus.map(({ kind }) => kind)).toEqual(['image', 'other']); // the DUMP extension
});

const folder = join(process.env.SPOTJOULE_REAL_DATA ?? '../shared/data/real', 'headers');
const names = existsSync(folder) ? readdirSync(folder) : [];
if (names.length === 0) console.log(`not run: no real headers in ${folder}`);

describe.runIf(names.length > 0)('real headers', () => {
  test.each(names)('%s', (name) => {
    const text = readFileSync(join(folder, name), 'latin1');
    const header = headerFromText(text);
    expect(header.cards.length).toBeGreaterThan(20);
    const numbered = header.cards.filter(({ value }) => typeof value === 'number').length;
    expect(numbered).toBeGreaterThan(10);
  });

  test('values that the folder names in its README', () => {
    const read = (name: string) =>
      headerFromText(readFileSync(join(folder, `${name}.header.txt`), 'latin1'));
    expect(numberAt(read('hmi_patch_camera_frame'), 'CRPIX1')).toBeCloseTo(-1238, 0);
    expect(stringAt(read('hmi_patch_velocity'), 'BUNIT')).toBe('cm/s');
    expect(stringAt(read('gong_magnetogram'), 'DATE-OBS')).toBe('2025/01/09');
    expect(stringAt(read('hmi_synoptic'), 'CUNIT2')).toBe('Sine Latitude');
    expect(hasCard(read('svsm_e3100_S2_20110625_1856'), 'ENDSTATE')).toBe(true);
    const polarimeter = read('solo_L2_phi-hrt-blos_20241004T003104_V202506050052_0450040601');
    expect(numberAt(polarimeter, 'CROTA')).toBeCloseTo(8.14, 2);
  });
});
