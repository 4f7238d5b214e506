import type { Grid2 } from '../grid/grid.js';
import { colourIndex, divergingScale, type ScaleName } from './colour-scale.js';
import type { Rect } from './drawing.js';
import { isBlocky, type MapFrame } from './map-frame.js';
import { niceLimitAbove, quantileOfSize } from './nice-number.js';
import { resampleMap } from './resample.js';

/** Share of the pixels whose field lies within the limits of the colour scale. */
export const LIMIT_QUANTILE = 0.995;
/** Never stretch the colours over less than this: a quiet map would look like an active region. */
const LEAST_LIMIT_GAUSS = 50;

/** Level of grey of a dead zone: darker than the middle of the scales, which is near white. */
export const DEAD_GREY = 218;

/** Raw sRGB pixels of the whole picture, row 0 at the top. */
export interface Raster {
  readonly width: number;
  readonly height: number;
  readonly rgb: Uint8Array;
}

/** Symmetric limit of the colour scale in G: a round number at or above the 99.5 % quantile of |B|. */
export function fieldLimit(field: Grid2<'G'>): number {
  const quantile = quantileOfSize(field.values.data, LIMIT_QUANTILE);
  return niceLimitAbove(Math.max(LEAST_LIMIT_GAUSS, Number.isNaN(quantile) ? 0 : quantile));
}

/** A white raster. */
export function blankRaster(width: number, height: number): Raster {
  return { width, height, rgb: new Uint8Array(3 * width * height).fill(255) };
}

/** The field at the resolution of the frame, row 0 south. */
export function displayField(field: Grid2<'G'>, frame: MapFrame): Float64Array {
  return resampleMap(field, frame.width, frame.height, isBlocky(frame));
}

/** Display samples with what they need to be painted. */
export interface ScaledMap {
  /** Row 0 south; NaN is missing, or dead where `dead` says so. */
  readonly samples: Float64Array;
  readonly limit: number;
  readonly scale: ScaleName;
  /** 1 where the quantity lies below its noise. */
  readonly dead?: Uint8Array;
}

/** Paints a map into the frame; what is missing becomes a grey hatch, what is dead flat grey. */
export function paintMap(
  raster: Raster,
  frame: MapFrame,
  { samples, limit, scale: name, dead }: ScaledMap,
): void {
  const { rgb } = raster;
  const scale = divergingScale(name);
  for (let row = 0; row < frame.height; row++) {
    const from = frame.width * (frame.height - 1 - row);
    let to = 3 * (frame.x + raster.width * (frame.y + row));
    for (let column = 0; column < frame.width; column++, to += 3) {
      const value = samples[from + column];
      if (Number.isNaN(value)) {
        const grey = dead?.[from + column] === 1 ? DEAD_GREY : hatchGrey(column, row);
        rgb.fill(grey, to, to + 3);
        continue;
      }
      const colour = 3 * colourIndex(value, limit);
      rgb[to] = scale[colour];
      rgb[to + 1] = scale[colour + 1];
      rgb[to + 2] = scale[colour + 2];
    }
  }
}

/** Paints the colour scale from left (negative limit) to right. */
export function paintScale(raster: Raster, bar: Rect, name: ScaleName): void {
  const scale = divergingScale(name);
  for (let column = 0; column < bar.width; column++) {
    const colour = 3 * colourIndex((2 * (column + 0.5)) / bar.width - 1, 1);
    for (let row = 0; row < bar.height; row++) {
      raster.rgb.set(
        scale.subarray(colour, colour + 3),
        3 * (bar.x + column + raster.width * (bar.y + row)),
      );
    }
  }
}

/** Paints the hatch that stands for missing pixels. */
export function paintHatch(raster: Raster, box: Rect): void {
  for (let row = 0; row < box.height; row++) {
    for (let column = 0; column < box.width; column++) {
      const to = 3 * (box.x + column + raster.width * (box.y + row));
      raster.rgb.fill(hatchGrey(column, row), to, to + 3);
    }
  }
}

/** Paints the grey of dead zones. */
export function paintDead(raster: Raster, box: Rect): void {
  for (let row = 0; row < box.height; row++) {
    const from = 3 * (box.x + raster.width * (box.y + row));
    raster.rgb.fill(DEAD_GREY, from, from + 3 * box.width);
  }
}

/** Diagonal grey stripes, 2 px of 8, unlike any colour of the scale. */
function hatchGrey(column: number, row: number): number {
  return (column + row) % 8 < 2 ? 140 : 208;
}
