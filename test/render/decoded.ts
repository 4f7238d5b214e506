import sharp from 'sharp';
import { expect } from 'vitest';
import { composePicture } from '../../src/render/compose.js';
import type { Rect } from '../../src/render/drawing.js';
import { type RegionPicture, renderRegionPicture } from '../../src/render/region-picture.js';

/** The pixels of a picture. */
export interface Decoded {
  readonly width: number;
  readonly height: number;
  readonly at: (x: number, y: number) => readonly [number, number, number];
}

/** Decodes a PNG of three channels. */
export async function decode(png: Uint8Array): Promise<Decoded> {
  const { data, info } = await sharp(png).raw().toBuffer({ resolveWithObject: true });
  expect(info.channels).toBe(3);
  return {
    width: info.width,
    height: info.height,
    at: (x, y) => {
      const from = 3 * (Math.round(x) + info.width * Math.round(y));
      return [data[from], data[from + 1], data[from + 2]];
    },
  };
}

/** A picture as composed, and its pixels. */
export async function draw(picture: RegionPicture) {
  const composed = composePicture(picture);
  return { ...composed, image: await decode(await renderRegionPicture(picture)) };
}

/** Centre of block (column, row from the south) in the picture, off any grid line or sign. */
export function blockPlaces({ map }: { readonly map: Rect }, columns: number, rows: number) {
  return (column: number, row: number) => {
    const [w, h] = [map.width / columns, map.height / rows];
    const places: [number, number][] = [];
    for (const u of [0.23, 0.37, 0.71]) {
      for (const v of [0.29, 0.41, 0.77]) {
        places.push([map.x + w * (column + u), map.y + map.height - h * (row + v)]);
      }
    }
    return places;
  };
}

/** The colour most of the places have, so that a grid line through one of them does no harm. */
export function commonColour(image: Decoded, places: readonly (readonly [number, number])[]) {
  const seen = new Map<string, number>();
  for (const [x, y] of places) {
    const key = image.at(x, y).join();
    seen.set(key, (seen.get(key) ?? 0) + 1);
  }
  const [colour, count] = [...seen].sort((a, b) => b[1] - a[1])[0];
  expect(count).toBeGreaterThanOrEqual(5);
  return colour.split(',').map(Number);
}
