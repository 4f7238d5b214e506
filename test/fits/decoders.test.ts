// The decoders on their own: known numbers, streams laid out by hand, and that none goes past its bounds.
import { describe, expect, test } from 'vitest';
import { encodeChecksum, sumWords } from '../../src/fits/checksum.js';
import { dequantise, ditherSeries } from '../../src/fits/dither.js';
import { unshuffle } from '../../src/fits/gzip.js';
import { invertHaar } from '../../src/fits/haar.js';
import { decodeHcompress } from '../../src/fits/hcompress.js';
import { decodePlio } from '../../src/fits/plio.js';
import { decodeRice } from '../../src/fits/rice.js';
import { tilesOfPlane, tilingOf } from '../../src/fits/tiling.js';

/** Bytes from a string of bits; blanks are for the reader. */
function bits(text: string): DataView {
  const all = text.replace(/\s/g, '');
  const bytes = Array.from({ length: Math.ceil(all.length / 8) }, (_, i) =>
    Number.parseInt(all.slice(8 * i, 8 * i + 8).padEnd(8, '0'), 2),
  );
  return new DataView(Uint8Array.from(bytes).buffer);
}

const binary = (value: number, width: number) =>
  (value >>> 0).toString(2).padStart(width, '0').slice(-width);

describe('dithering (Standard 4.0, appendix I)', () => {
  test('first numbers of the series, and the seed after 10000 steps that the standard states', () => {
    const wanted = [7.826369e-6, 0.131537788, 0.755605322, 0.458650132, 0.532767237];
    wanted.forEach((value, i) => {
      expect(Math.abs(ditherSeries()[i] / value - 1)).toBeLessThan(1e-6);
    });
    expect(ditherSeries().length).toBe(10_000);
    expect(ditherSeries()[9999]).toBe(Math.fround(1043618065 / 2147483647));
  });

  test('undefined pixels and kept zeros; the series goes on past them', () => {
    const stored = Int32Array.of(10, -5, -2147483646, 3);
    const out = new Float64Array(4);
    dequantise(
      stored,
      4,
      0,
      { mode: 'SUBTRACTIVE_DITHER_2', scale: 2, zero: 1, blank: -5, seed: 1 },
      out,
    );
    const first = Math.trunc(ditherSeries()[0] * 500);
    const random = (i: number) => ditherSeries()[first + i];
    expect([...out]).toEqual([
      (10 - random(0) + 0.5) * 2 + 1,
      Number.NaN,
      0,
      (3 - random(3) + 0.5) * 2 + 1,
    ]);
  });
});

describe('checksums (appendix J)', () => {
  test('the encoded sum added to the data gives all ones, for many sums', () => {
    for (let i = 0; i < 500; i++) {
      const sum = Math.floor((i * 8589935.7 * 499) % 2 ** 32);
      const text = encodeChecksum(sum);
      expect(text).toMatch(/^[0-9A-Za-z]{16}$/);
      // as in a header: one byte to the right of a word boundary, between words of known sum
      const bytes = new Uint8Array(20);
      bytes.set(Buffer.from(text.slice(1) + text[0], 'latin1'));
      const zeros = sumWords(new Uint8Array(Buffer.from('0'.repeat(16))));
      const added = sumWords(bytes.subarray(0, 16)) - zeros;
      expect((((added + sum) % (2 ** 32 - 1)) + 2 ** 32 - 1) % (2 ** 32 - 1)).toBe(0);
    }
  });

  test('words carry around the end', () => {
    expect(sumWords(new Uint8Array([0xff, 0xff, 0xff, 0xff, 0, 0, 0, 1]))).toBe(1);
    expect(sumWords(new Uint8Array(8).fill(0xff))).toBe(0xffffffff);
  });
});

describe('RICE_1', () => {
  test('by hand: first pixel whole, then split 1 with folded differences', () => {
    // pixels 100, 101, 99, 99: differences 0, 1, -2, 0 fold to 0, 2, 3, 0
    const view = bits(`${binary(100, 32)} ${binary(2, 5)} 1 0 01 0 01 1 1 0`);
    const out = new Int32Array(5).fill(-9);
    decodeRice(view, 0, view.byteLength, 4, 32, 4, out);
    expect([...out]).toEqual([100, 101, 99, 99, -9]);
  });

  test('long unary codes, over several bytes', () => {
    const view = bits(`${binary(0, 32)} ${binary(1, 5)} ${'0'.repeat(200)}1 ${'0'.repeat(37)}1`);
    const out = new Int32Array(2);
    decodeRice(view, 0, view.byteLength, 4, 32, 2, out);
    expect([...out]).toEqual([100, 100 - 19]); // 200 unfolds to 100, 37 to -19
  });

  test('pixels of one byte are unsigned and wrap, of two bytes signed', () => {
    const bytes = bits(`${binary(250, 8)} ${binary(7, 3)} ${binary(0, 8)}${binary(20, 8)}`);
    const out = new Int32Array(2);
    decodeRice(bytes, 0, bytes.byteLength, 1, 32, 2, out);
    expect([...out]).toEqual([250, 4]);
    const words = bits(`${binary(-30000, 16)} ${binary(0, 4)}`);
    decodeRice(words, 0, words.byteLength, 2, 32, 2, out);
    expect([...out]).toEqual([-30000, -30000]);
  });

  test('reads no byte after its end and says where it stopped', () => {
    const whole = bits(`${binary(5, 32)} ${binary(3, 5)} ${'1 00'.repeat(32)}`);
    const padded = new Uint8Array(whole.byteLength + 64).fill(0xff);
    padded.set(new Uint8Array(whole.buffer));
    const view = new DataView(padded.buffer);
    const out = new Int32Array(40).fill(-9);
    expect(() => decodeRice(view, 0, whole.byteLength - 3, 4, 32, 32, out)).toThrow(
      /ends at pixel 2\d of 32/,
    );
    expect(out.subarray(32).every((value) => value === -9)).toBe(true);
    expect(() => decodeRice(view, 0, 3, 4, 32, 32, out)).toThrow('first pixel');
    const wild = bits(`${binary(5, 32)} ${binary(31, 5)} 0`);
    expect(() => decodeRice(wild, 0, wild.byteLength, 4, 32, 2, out)).toThrow('split of 30');
  });
});

test('PLIO_1 by hand: every operation', () => {
  const words = [0, 7, -100, 17, 0, 0, 0].map((word) => word & 0xffff);
  // zeros 2; raise 4 (to 5), highs 3; lower 2 (to 3), zeros then high 3; raise and write 7 (10); lower and
  // write 1 (9); set high to 2 x 4096 + 7, highs 1
  words.push(0x0002, 0x2004, 0x4003, 0x3002, 0x5003, 0x6007, 0x7001, 0x1007, 0x0002, 0x4001);
  const view = new DataView(new ArrayBuffer(2 * words.length));
  words.forEach((word, i) => {
    view.setUint16(2 * i, word);
  });
  const out = new Int32Array(13).fill(-1);
  decodePlio(view, 0, words.length, 12, out);
  expect([...out]).toEqual([0, 0, 5, 5, 5, 0, 0, 3, 10, 9, 8199, 0, -1]);
  expect(() => decodePlio(view, 0, words.length - 1, 12, out)).toThrow('claims words 7 to 17');
  expect(() => decodePlio(view, 0, words.length, 10, out)).toThrow('claims at least 11 pixels');
});

test('GZIP_2: the bytes of the pixels go back together', () => {
  expect([...unshuffle(Uint8Array.of(1, 2, 3, 11, 12, 13), 2)]).toEqual([1, 11, 2, 12, 3, 13]);
});

describe('HCOMPRESS_1', () => {
  test.each([
    [2, 2],
    [4, 4],
    [5, 7],
    [24, 18],
    [1, 6],
    [31, 2],
  ])('a constant picture of %i x %i has its sum alone', (width, height) => {
    // For whole powers of two the sum coefficient is pixels x value; in general it is value x the
    // weight that doubling per level gives. A constant keeps all differences at zero.
    const levels = Math.ceil(Math.log2(Math.max(width, height)));
    const a = new Float64Array(width * height);
    a[0] = 12 * 2 ** (levels + 1);
    invertHaar(a, width, height, 0);
    expect(new Set(a)).toEqual(new Set([12]));
  });

  test('other dimensions, or no room, are refused before anything is read', () => {
    const stream = new Uint8Array(40);
    const view = new DataView(stream.buffer);
    view.setUint16(0, 0xdd99);
    view.setInt32(2, 2 ** 30);
    view.setInt32(6, 2 ** 30);
    const decode = (end: number) =>
      decodeHcompress(stream, 0, end, 4, 4, false, new Int32Array(16));
    expect(() => decode(40)).toThrow('claims 1073741824 x 1073741824 pixels, its tile has 4 x 4');
    expect(() => decode(20)).toThrow('no room for its header');
  });
});

describe('tiles', () => {
  test('edge tiles are smaller and rows count along the first axis', () => {
    const tiling = { shape: [7, 5, 3], tile: [4, 3, 2], counts: [2, 2, 2] };
    const tiles = [...tilesOfPlane(tiling, 1)];
    expect(tiles.map(({ row, lengths, x, y, start }) => [row, lengths, x, y, start])).toEqual([
      [0, [4, 3, 2], 0, 0, 12],
      [1, [3, 3, 2], 4, 0, 9],
      [2, [4, 2, 2], 0, 3, 8],
      [3, [3, 2, 2], 4, 3, 6],
    ]);
    expect([...tilesOfPlane(tiling, 2)].map(({ row, pixels }) => [row, pixels])).toEqual([
      [4, 12],
      [5, 9],
      [6, 8],
      [7, 6],
    ]);
  });

  test('by default a tile is one row', () => {
    const tiling = tilingOf({ cards: [], warnings: [] }, [7, 5], 5, {});
    expect([tiling.tile, tiling.counts]).toEqual([
      [7, 1],
      [1, 5],
    ]);
  });
});
