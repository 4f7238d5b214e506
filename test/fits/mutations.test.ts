// Damaged copies of the fixtures: each is either refused with a FitsError or read as a well-formed image.
import { performance } from 'node:perf_hooks';
import { describe, expect, test } from 'vitest';
import { FitsError } from '../../src/errors.js';
import { imageHdus, parseFits, readImage } from '../../src/fits/index.js';
import { expected, fixtureBytes } from './fixtures.js';

const LIMITS = { maxBytes: 1_000_000, maxPixels: 100_000 };
const NUMBERS = [
  '-1',
  '0',
  '1',
  '7',
  '1000',
  '99999',
  '2000000000',
  '9007199254740993',
  '1E30',
  '1.5',
  'T',
  "'x'",
];
const KEYWORDS =
  /^(BITPIX|NAXIS\d?|PCOUNT|GCOUNT|TFIELDS|TFORM\d|TTYPE\d|THEAP|Z(BITPIX|NAXIS\d?|TILE\d|VAL\d|CMPTYPE|BLANK|DITHER0|QUANTIZ|SCALE|ZERO)|BLANK|BSCALE|BZERO)\s*=/;

/** Seeded numbers in [0, 1): Park and Miller's generator, as in the dithering of the standard. */
function makeRandom(seed: number): () => number {
  let state = seed;
  return () => {
    state = (16807 * state) % 2147483647;
    return state / 2147483647;
  };
}

type Mutation = (bytes: Uint8Array, random: () => number) => Uint8Array;

const MUTATIONS: Readonly<Record<string, Mutation>> = {
  'flipped bytes': (bytes, random) => {
    for (let n = 1 + Math.floor(random() * 12); n > 0; n--) {
      bytes[Math.floor(random() * bytes.length)] ^= 1 << Math.floor(random() * 8);
    }
    return bytes;
  },
  'random bytes in the data of the last HDU': (bytes, random) => {
    const start = parseFits(bytes, 'x').hdus.at(-1)?.dataOffset ?? 0;
    for (let n = 1 + Math.floor(random() * 40); n > 0; n--) {
      bytes[start + Math.floor(random() * Math.min(900, bytes.length - start))] = Math.floor(
        random() * 256,
      );
    }
    return bytes;
  },
  truncation: (bytes, random) => bytes.subarray(0, Math.floor(random() * bytes.length)),
  'absurd numbers in structure keywords': (bytes, random) => {
    const text = Buffer.from(bytes).toString('latin1');
    const places: number[] = [];
    for (let at = 0; at < text.length; at += 80) {
      if (KEYWORDS.test(text.slice(at, at + 10))) places.push(at);
    }
    for (let n = 1 + Math.floor(random() * 2); n > 0 && places.length > 0; n--) {
      const at = places[Math.floor(random() * places.length)];
      const value = NUMBERS[Math.floor(random() * NUMBERS.length)].padStart(20);
      bytes.set(Buffer.from(`${value}${' '.repeat(50)}`, 'latin1'), at + 10);
    }
    return bytes;
  },
};

/** Reads all images; returns how many were well-formed. Whatever is thrown but FitsError goes through. */
function readAll(bytes: Uint8Array): number {
  let read = 0;
  try {
    const file = parseFits(bytes, 'mutant', LIMITS);
    for (const { index, shape } of imageHdus(file)) {
      try {
        const image = readImage(file, index, shape.length > 2 ? { plane: 0 } : {});
        expect(image.values.length).toBe(image.nx * image.ny);
        expect(image.values.length).toBeLessThanOrEqual(LIMITS.maxPixels);
        expect(image.values.filter(Number.isNaN).length).toBe(image.missing);
        read++;
      } catch (error) {
        if (!(error instanceof FitsError)) throw error;
      }
    }
  } catch (error) {
    if (!(error instanceof FitsError)) throw error;
  }
  return read;
}

const PER_FIXTURE = 12;

describe.each(Object.keys(MUTATIONS))('%s', (kind) => {
  test('FitsError or a sound image, in bounded time', () => {
    let read = 0;
    let tried = 0;
    let slowest = 0;
    for (const [number, name] of Object.keys(expected).sort().entries()) {
      const random = makeRandom(1 + number * 7919);
      for (let round = 0; round < PER_FIXTURE; round++) {
        const bytes = MUTATIONS[kind](fixtureBytes(name), random);
        const start = performance.now();
        try {
          read += readAll(bytes);
        } catch (error) {
          throw new Error(`${name}, round ${round}: ${(error as Error).stack}`);
        }
        slowest = Math.max(slowest, performance.now() - start);
        tried++;
      }
    }
    expect(tried).toBeGreaterThan(600);
    expect(read).toBeGreaterThan(0);
    expect(slowest).toBeLessThan(2000); // milliseconds, on a busy machine; a few are usual
  });
});
