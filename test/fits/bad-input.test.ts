import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { gzipSync } from 'node:zlib';
import { afterAll, describe, expect, test } from 'vitest';
import { FitsError } from '../../src/errors.js';
import { imageHdus, parseFits, readFitsFile, readImage } from '../../src/fits/index.js';
import { fixtureBytes } from './fixtures.js';

const folder = mkdtempSync(join(tmpdir(), 'spotjoule-bad-'));
afterAll(() => rmSync(folder, { recursive: true }));

/** The refusal that `work` ends in; fails when there is none or it is not a FitsError of one line. */
function refusal(work: () => unknown): string {
  try {
    work();
  } catch (error) {
    expect(error).toBeInstanceOf(FitsError);
    const { message } = error as FitsError;
    expect(message).not.toContain('\n');
    return message;
  }
  throw new Error('not refused');
}

function header(...cards: string[]): Uint8Array {
  const text = [...cards, 'END'].map((card) => card.padEnd(80)).join('');
  return new Uint8Array(Buffer.from(text.padEnd(Math.ceil(text.length / 2880) * 2880), 'latin1'));
}

const number = (keyword: string, value: number | string) =>
  `${keyword.padEnd(8)}= ${String(value).padStart(20)}`;

function image(bitpix: number | string, ...axes: (number | string)[]): Uint8Array {
  return header(
    number('SIMPLE', 'T'),
    number('BITPIX', bitpix),
    number('NAXIS', axes.length),
    ...axes.map((axis, n) => number(`NAXIS${n + 1}`, axis)),
  );
}

/** A fixture with the value of one card of its table header replaced. */
function changed(name: string, keyword: string, value: number | string): Uint8Array {
  const bytes = fixtureBytes(name);
  const at = Buffer.from(bytes).indexOf(`${keyword.padEnd(8)}=`, 2880, 'latin1');
  expect(at).toBeGreaterThan(0);
  bytes.set(Buffer.from(number(keyword, value).padEnd(80), 'latin1'), at);
  return bytes;
}

const readFirst = (bytes: Uint8Array) => {
  const file = parseFits(bytes, 'bad');
  return readImage(file, imageHdus(file)[0]?.index ?? 0);
};

describe('what is no FITS file', () => {
  test.each([
    ['an empty file', ''],
    ['a PNG picture', '\x89PNG\r\n\x1a\n'],
    ['an HTML page', '<!DOCTYPE html><html>404</html>'],
    ['a text file', 'region,flux\nMH-1,3e21\n'],
    ['a JSON document', '{"a": 1}'],
    ['binary data of an unknown kind', '\x01\x02\x03\xff'],
    ['a zip archive', 'PK\x03\x04'],
  ])('%s', (kind, content) => {
    const path = join(folder, 'not.fits');
    writeFileSync(path, content, 'latin1');
    expect(refusal(() => readFitsFile(path))).toContain(kind);
  });

  test('a gzip of something else, a damaged gzip and one that is cut short', () => {
    const zipped = gzipSync('hello');
    expect(refusal(() => parseFits(zipped, 'x'))).toContain('a gzip of a text file');
    const whole = fixtureBytes('plain-gzipped.fits.gz');
    expect(refusal(() => parseFits(whole.subarray(0, 900), 'x'))).toContain('cut short');
    whole.fill(0x55, 200, 400);
    expect(refusal(() => parseFits(whole, 'x'))).toContain('damaged');
  });

  test('no such file, a directory; the error names the file', () => {
    expect(refusal(() => readFitsFile(join(folder, 'absent.fits')))).toBe('no such file');
    expect(refusal(() => readFitsFile(folder))).toContain('is a directory');
    try {
      readFitsFile(folder);
    } catch (error) {
      expect((error as FitsError).context.file).toBe(folder);
    }
  });
});

describe('limits, stated in the message and checked before anything is allocated', () => {
  test('a header that claims 2e9 x 512 pixels', () => {
    const bytes = image(16, 2_000_000_000, 512);
    const before = process.memoryUsage().arrayBuffers;
    expect(refusal(() => readFirst(bytes))).toBe(
      'the image claims 2000000000 x 512 pixels, at most 67108864 are read',
    );
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(1e6);
  });

  test('the same claimed by a compressed image', () => {
    const bytes = changed('rice-int32-tiles.fits', 'ZNAXIS1', 2_000_000_000);
    expect(refusal(() => readFirst(bytes))).toContain('at most 67108864 are read');
  });

  test('a gzip bomb stops at the limit', () => {
    const bomb = gzipSync(new Uint8Array(8_000_000));
    expect(bomb.length).toBeLessThan(10_000);
    const message = refusal(() => parseFits(bomb, 'bomb', { maxBytes: 1_000_000, maxPixels: 1e6 }));
    expect(message).toBe('gunzips to more than 1000000 bytes, at most 1000000 are read');
  });

  test('a file that is larger than the limit is not loaded', () => {
    const path = join(folder, 'large.fits');
    writeFileSync(path, fixtureBytes('plain-cube.fits'));
    expect(refusal(() => readFitsFile(path, { maxBytes: 5000, maxPixels: 1e6 }))).toContain(
      'has 8640 bytes',
    );
  });

  test('a tile that inflates to more than its pixels', () => {
    const bytes = changed('gzip1-int32.fits', 'ZNAXIS2', 2);
    bytes.set(
      Buffer.from(number('ZTILE2', 2).padEnd(80)),
      Buffer.from(bytes).indexOf('ZTILE2  =', 2880),
    );
    expect(refusal(() => readFirst(bytes))).toMatch(/tile 1, GZIP_1: .*more than the 384 bytes/);
  });
});

describe('headers that make no sense', () => {
  test.each([
    ['BITPIX is 12', image(12, 4, 4)],
    ['no number at BITPIX', image('abc', 4, 4)],
    ['NAXIS1 is -4', image(16, -4, 4)],
    ['NAXIS2 is 4.5', image(16, 4, 4.5)],
    [
      'no number at NAXIS2',
      header(number('SIMPLE', 'T'), number('BITPIX', 16), number('NAXIS', 2), number('NAXIS1', 4)),
    ],
    ['NAXIS is 1000', header(number('SIMPLE', 'T'), number('BITPIX', 16), number('NAXIS', 1000))],
    ['without an END card', image(16, 4, 4).subarray(0, 160)],
    ['HDU 0 is no image (empty)', image(16)],
    ['a picture of two axes wanted', new Uint8Array([...image(8, 4), ...new Uint8Array(2880)])],
    [
      'the file is cut short: 20 of 32 data bytes',
      new Uint8Array([...image(16, 4, 4), ...new Uint8Array(20)]),
    ],
  ])('%s', (wanted, bytes) => {
    expect(refusal(() => readFirst(bytes))).toContain(wanted);
  });

  test('data complete and only the filling missing: read, with a warning', () => {
    const file = parseFits(fixtureBytes('odd-short-padding.fits'), 'short');
    expect(file.warnings.join()).toContain('the last block is not filled up');
    expect(readImage(file, 0).values.length).toBe(30);
  });

  test('damage after a good image does not lose the image', () => {
    const good = fixtureBytes('plain-one-plane.fits');
    const bytes = new Uint8Array(good.length + 2880).fill(0x20);
    bytes.set(good);
    bytes.set(Buffer.from("XTENSION= 'IMAGE   '"), good.length);
    const file = parseFits(bytes, 'damaged');
    expect(file.warnings.join()).toContain('HDU 1 and what follows is left out');
    expect(readImage(file, 0).nx).toBe(24);
  });

  test('an HDU or a plane that is not there', () => {
    const cube = parseFits(fixtureBytes('plain-cube.fits'), 'cube');
    expect(refusal(() => readImage(cube, 3))).toContain('no HDU 3');
    expect(refusal(() => readImage(cube, 0, { plane: 3 }))).toContain('0 to 2 wanted');
    expect(refusal(() => readImage(cube, 0, { plane: 0.5 }))).toContain('no plane 0.5');
  });
});

describe('corrupt tiles name tile and codec', () => {
  /** Where the heap of the table in HDU 1 starts. */
  const heapOf = (bytes: Uint8Array) => {
    const { dataOffset, tableHeader } = parseFits(bytes, 'x').hdus[1];
    const value = (keyword: string) =>
      Number(tableHeader?.cards.find((card) => card.keyword === keyword)?.value);
    return dataOffset + value('NAXIS1') * value('NAXIS2');
  };

  test('HCOMPRESS_1 that claims other dimensions than its tile', () => {
    const bytes = fixtureBytes('hcompress-int16.fits');
    new DataView(bytes.buffer).setInt32(heapOf(bytes) + 2, 40_000);
    expect(refusal(() => readFirst(bytes))).toBe(
      'tile 1, HCOMPRESS_1: the data claims 24 x 40000 pixels, its tile has 24 x 18',
    );
  });

  test('HCOMPRESS_1 with absurd bit planes, or cut short', () => {
    const bytes = fixtureBytes('hcompress-int16.fits');
    const heap = heapOf(bytes);
    bytes[heap + 22] = 200;
    expect(refusal(() => readFirst(bytes))).toContain('claims 200 bit planes');
    bytes[heap] = 0;
    expect(refusal(() => readFirst(bytes))).toContain('does not start with bytes DD 99');
  });

  test('PLIO_1 whose runs go past its tile', () => {
    const bytes = fixtureBytes('plio-int16-whole.fits');
    const view = new DataView(bytes.buffer);
    const heap = heapOf(bytes);
    view.setUint16(heap + 2 * view.getInt16(heap + 2), 0x4fff); // 4095 high pixels
    expect(refusal(() => readFirst(bytes))).toBe(
      'tile 1, PLIO_1: the data claims at least 4095 pixels, the tile has 432',
    );
  });

  test('RICE_1 that ends early, or with tiles larger than its data', () => {
    const bytes = fixtureBytes('rice-int32-whole.fits');
    const descriptor = parseFits(bytes, 'x').hdus[1].dataOffset;
    const view = new DataView(bytes.buffer);
    view.setInt32(descriptor, view.getInt32(descriptor) - 40);
    expect(refusal(() => readFirst(bytes))).toMatch(/^tile 1, RICE_1: the data ends (at|in)/);
    view.setInt32(descriptor, 100_000_000);
    expect(refusal(() => readFirst(bytes))).toContain('points at 100000000 elements');
  });

  test('GZIP_1 with a damaged stream; a tile without data', () => {
    const bytes = fixtureBytes('gzip1-int32.fits');
    bytes.fill(0xaa, heapOf(bytes) + 30, heapOf(bytes) + 60);
    expect(refusal(() => readFirst(bytes))).toContain('tile 1, GZIP_1: the data');
    new DataView(bytes.buffer).setInt32(parseFits(bytes, 'x').hdus[1].dataOffset, 0);
    expect(refusal(() => readFirst(bytes))).toBe('tile 1, GZIP_1: has no data');
  });

  test.each([
    ['rice-int32-tiles.fits', 'ZCMPTYPE', "'JPEG_1'", "compression 'JPEG_1'"],
    ['rice-int32-tiles.fits', 'ZTILE1', 0, 'ZTILE1 is 0'],
    ['rice-int32-tiles.fits', 'ZTILE1', 1, '72 tiles, the table has 9'],
    ['rice-int32-tiles.fits', 'ZBITPIX', 7, 'ZBITPIX is 7'],
    ['rice-int32-tiles.fits', 'ZVAL1', 0, 'BLOCKSIZE 0'],
    ['rice-int32-tiles.fits', 'ZVAL2', 8, 'BYTEPIX 8'],
    ['rice-int32-tiles.fits', 'TFORM1', "'1PZ'", 'no variable-length arrays'],
    ['rice-int32-tiles.fits', 'TFIELDS', 5000, 'TFIELDS is 5000'],
    ['rice-float32-dither1.fits', 'ZDITHER0', 10_001, 'ZDITHER0 is 10001'],
    ['rice-float32-dither1.fits', 'ZQUANTIZ', "'WILD'", "ZQUANTIZ is 'WILD'"],
    ['rice-float32-dither1.fits', 'TTYPE2', "'OTHER'", 'no ZSCALE'],
  ])('%s with %s = %s', (name, keyword, value, wanted) => {
    expect(refusal(() => readFirst(changed(name, keyword, value)))).toContain(wanted);
  });
});
