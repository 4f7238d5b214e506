import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, test } from 'vitest';
import { sumWords } from '../../src/fits/checksum.js';
import { type Card, parseFits, readImage, stringAt, writeFits } from '../../src/fits/index.js';

const card = (keyword: string, value: Card['value'], comment = ''): Card => ({
  keyword,
  value,
  comment,
});
const LONG = `${'A long string about region MH-1, '.repeat(6)}it's "quoted" & ends`;
const CARDS: Card[] = [
  card('EXTNAME', 'FIELD', 'name'),
  card('BUNIT', 'G'),
  card('LONGTEXT', LONG, 'long'),
  card('REAL', 0.1),
  card('TINY', -1.23456789012345e-300),
  card('WHOLE', -42),
  card('YES', true),
  // astropy 5.2 takes a quoted quote before a blank for the end, so it is not asked about this one
  card('QUOTED', "the 'MH-1' region"),
  card('NOVALUE', undefined, 'no value'),
  card('STATION.NAME', 'Marrow Hill', 'needs HIERARCH'),
  card('HISTORY', undefined, 'x'.repeat(100)),
];

function ramp(count: number): Int16Array {
  return Int16Array.from({ length: count }, (_, i) => i);
}

function sample(): Uint8Array {
  const field = Float32Array.from({ length: 35 }, (_, i) => (i === 3 ? Number.NaN : i / 7 - 2));
  return writeFits([
    { values: field, shape: [7, 5], cards: CARDS },
    { values: Float64Array.from(field), shape: [5, 7], cards: CARDS },
    { values: ramp(12), shape: [4, 3], cards: [], bscale: 0.5, bzero: 10, blank: 7 },
    { values: Int32Array.of(-2147483648, 5, 2147483647, 0), shape: [2, 2], cards: [] },
    { values: Uint8Array.of(0, 128, 255, 3, 4, 5), shape: [3, 2], cards: [] },
  ]);
}

describe('by the rules of the standard', () => {
  // DATASUM of known data, computed by a second program (astropy 5.2)
  test.each([
    ['int16 ramp 0 to 99', ramp(100), [10, 10], '160565700'],
    [
      'float32, 64 steps from 0 to 1',
      Float32Array.from({ length: 64 }, (_, i) => i / 63),
      [8, 8],
      '1937369022',
    ],
    ['zeros', new Float64Array(9), [3, 3], '0'],
  ] as const)('DATASUM of %s', (_, values, shape, wanted) => {
    const file = parseFits(writeFits([{ values, shape, cards: [] }]), 'written');
    expect(stringAt(file.hdus[0].header, 'DATASUM')).toBe(wanted);
  });

  test('whole blocks; every HDU sums to minus zero, all ones (4.4.2.7)', () => {
    const bytes = sample();
    expect(bytes.length % 2880).toBe(0);
    const file = parseFits(bytes, 'written');
    expect(file.warnings).toEqual([]);
    expect(file.hdus.length).toBe(5);
    let start = 0;
    for (const hdu of file.hdus) {
      const end = hdu.dataOffset + Math.ceil(hdu.dataLength / 2880) * 2880;
      expect(sumWords(bytes.subarray(start, end))).toBe(0xffffffff);
      start = end;
    }
  });

  test('fixed format: columns of indicator, values and comments (4.2)', () => {
    const text = Buffer.from(sample()).toString('latin1');
    const lines = Array.from({ length: 36 }, (_, i) => text.slice(80 * i, 80 * i + 80));
    expect(lines[0]).toBe(
      `SIMPLE  =${'T'.padStart(21)} / conforms to the FITS standard`.padEnd(80),
    );
    expect(lines[1].slice(0, 30)).toBe(`BITPIX  =${'-32'.padStart(21)}`);
    const find = (keyword: string) => lines.find((line) => line.startsWith(keyword)) ?? '';
    expect(find('REAL').slice(0, 30)).toBe(`REAL    =${'0.1'.padStart(21)}`);
    expect(find('BUNIT').trimEnd()).toBe("BUNIT   = 'G       '");
    expect(find('CHECKSUM').slice(8, 11)).toBe("= '");
    expect(find('CHECKSUM').slice(27, 28)).toBe("'");
    expect(/^[\x20-\x7e]*$/.test(text.slice(0, 2880))).toBe(true);
  });
});

describe('read back', () => {
  const file = parseFits(sample(), 'written');

  test('values, scaling and blanks', () => {
    const image = readImage(file, 0);
    expect([image.nx, image.ny, image.missing, image.bunit]).toEqual([7, 5, 1, 'G']);
    expect(image.values[10]).toBe(Math.fround(10 / 7 - 2));
    const scaled = readImage(file, 2);
    expect([...scaled.values]).toEqual([
      10,
      10.5,
      11,
      11.5,
      12,
      12.5,
      13,
      Number.NaN,
      14,
      14.5,
      15,
      15.5,
    ]);
    expect([...readImage(file, 3).values]).toEqual([-2147483648, 5, 2147483647, 0]);
    expect([...readImage(file, 4).values]).toEqual([0, 128, 255, 3, 4, 5]);
  });

  test('cards', () => {
    const cards = file.hdus[0].header.cards;
    for (const wanted of CARDS.slice(0, -1)) expect(cards).toContainEqual(wanted);
    const history = cards.filter(({ keyword }) => keyword === 'HISTORY');
    expect(history.map(({ comment }) => comment).join('')).toBe('x'.repeat(100));
  });

  test('a shape that does not fit, and BLANK for floating point, are refused', () => {
    expect(() => writeFits([{ values: ramp(5), shape: [2, 2], cards: [] }])).toThrow(RangeError);
    const values = new Float32Array(4);
    expect(() => writeFits([{ values, shape: [2, 2], cards: [], blank: 0 }])).toThrow(RangeError);
    expect(() => writeFits([])).toThrow(RangeError);
  });
});

const python = '/usr/bin/python3';
const hasAstropy = spawnSync(python, ['-c', 'import astropy.io.fits']).status === 0;
if (!hasAstropy) console.log('not run: no astropy here, the written file is not read by it');

describe.runIf(hasAstropy)('as astropy reads it', () => {
  const folder = mkdtempSync(join(tmpdir(), 'spotjoule-fits-'));
  afterAll(() => rmSync(folder, { recursive: true }));

  test('sound checksums and structure, the same values and cards', () => {
    const path = join(folder, 'written.fits');
    writeFileSync(path, sample());
    const script = `
import json, sys, warnings
warnings.simplefilter('error')
from astropy.io import fits
with fits.open(sys.argv[1], checksum=True) as f:
    f.verify('exception')
    head = f[0].header
    print(json.dumps({
        'sums': [[h.verify_checksum(), h.verify_datasum()] for h in f],
        'long': head['LONGTEXT'], 'tiny': head['TINY'], 'name': head['STATION.NAME'],
        'real': head['REAL'], 'comment': head.comments['LONGTEXT'],
        'field': [float(v) for v in f[0].data.ravel()[4:8]], 'nan': str(f[1].data[0, 3]),
        'scaled': [float(v) for v in f[2].data.ravel()[:4]], 'ints': f[3].data.ravel().tolist(),
        'bytes': f[4].data.ravel().tolist()}))`;
    const seen = JSON.parse(execFileSync(python, ['-c', script, path], { encoding: 'utf8' }));
    expect(seen).toEqual({
      sums: Array(5).fill([1, 1]),
      long: LONG,
      tiny: -1.23456789012345e-300,
      name: 'Marrow Hill',
      real: 0.1,
      comment: 'long',
      field: [4, 5, 6, 7].map((i) => Math.fround(i / 7 - 2)),
      nan: 'nan',
      scaled: [10, 10.5, 11, 11.5],
      ints: [-2147483648, 5, 2147483647, 0],
      bytes: [0, 128, 255, 3, 4, 5],
    });
  });

  test('fitscheck finds nothing', () => {
    const path = join(folder, 'checked.fits');
    writeFileSync(path, sample());
    const run =
      'import sys; from astropy.io.fits.scripts import fitscheck; sys.exit(fitscheck.main(sys.argv[1:]))';
    const done = spawnSync(python, ['-c', run, '--compliance', path], { encoding: 'utf8' });
    expect([done.status, done.stdout]).toEqual([0, '']);
  });
});
