// Every image fixture against the pixels that astropy 5.2 and CFITSIO 4.2 (funpack) read in it.
import { readdirSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { parseFits, readFitsFile, readImage } from '../../src/fits/index.js';
import {
  type ExpectedImage,
  expected,
  expectedValues,
  fixtureBytes,
  fixturePath,
  hashOf,
} from './fixtures.js';

const images = Object.entries(expected).flatMap(([name, list]) =>
  Array.isArray(list) ? (list as ExpectedImage[]).map((image) => ({ name, image })) : [],
);

// astropy scales 16-bit and 8-bit integers in single precision, so two roundings may differ; all
// other values must be the same to the last bit.
const TOLERANCES: Readonly<Record<string, number>> = { 'plain-scaled-blank.fits': 1.5 * 2 ** -23 };

describe('images as astropy and CFITSIO read them', () => {
  test.each(images)('$name HDU $image.hdu plane $image.plane', ({ name, image }) => {
    const file = parseFits(fixtureBytes(name), name);
    const options = image.plane === null ? {} : { plane: image.plane };
    const got = readImage(file, image.hdu, options);
    expect([got.nx, got.ny]).toEqual(image.shape.slice(0, 2));
    expect(got.missing).toBe(image.missing);
    const wanted = expectedValues(image);
    if (wanted === undefined) {
      expect(hashOf(got.values)).toBe(image.sha256);
      return;
    }
    const relative = TOLERANCES[name] ?? 0;
    const wrong: string[] = [];
    wanted.forEach((value, index) => {
      const same =
        Object.is(got.values[index] + 0, value + 0) ||
        Math.abs(got.values[index] - value) <= relative * Math.abs(value);
      if (!same) wrong.push(`pixel ${index}: ${got.values[index]}, ${value} wanted`);
    });
    expect(wrong).toEqual([]);
  });

  test('no fixture lacks expected values, no value lacks its fixture', () => {
    const files = readdirSync(fixturePath('.')).filter((name) => /\.fits(\.gz)?$/.test(name));
    expect(files.sort()).toEqual(Object.keys(expected).sort());
    expect(images.length).toBeGreaterThan(65);
  });

  test('a gzip file is found out by its content, from disk', () => {
    const file = readFitsFile(fixturePath('plain-gzipped.fits.gz'));
    const plain = readFitsFile(fixturePath('plain-one-plane.fits'));
    expect(readImage(file, 0).values).toEqual(readImage(plain, 0).values);
  });
});
