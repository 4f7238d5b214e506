import type { FieldLine } from '../field/field-lines.js';
import type { InversionLine } from '../field/inversion-line.js';
import type { RegionFigures } from '../figures/region.js';
import type { LocalPatch } from '../geometry/patch.js';
import type { Grid2 } from '../grid/grid.js';
import { composePicture } from './compose.js';
import { newDrawing } from './drawing.js';
import { encodePng, layOver, rasteriseDrawing } from './encode.js';
import { textWidth } from './font.js';

/** What a vector map adds to the picture: measured maps on the grid of the patch, NaN where missing. */
export interface VectorMaps {
  /** Horizontal field, x west and y north. */
  readonly horizontal: { readonly x: Grid2<'G'>; readonly y: Grid2<'G'> };
  /** 1-sigma noise of one horizontal component. */
  readonly horizontalNoiseG: number;
  /** Vertical current density with its 1-sigma noise per pixel. */
  readonly currentDensity: Grid2<'mA/m^2'>;
  readonly currentNoise: Grid2<'mA/m^2'>;
  readonly alpha: Grid2<'1/Mm'>;
  /** A weaker radial field has no alpha. */
  readonly alphaLeastG: number;
}

/** What the picture of one region shows. */
export interface RegionPicture {
  /** File name, shown as the title. */
  readonly source: string;
  /** ISO 8601 UTC, or undefined when the map does not say. */
  readonly observed: string | undefined;
  readonly toolVersion: string;
  readonly region: RegionFigures;
  readonly patch: LocalPatch;
  readonly radialField: Grid2<'G'>;
  readonly currentDensity: Grid2<'mA/m^2'> | undefined;
  readonly inversionLines: readonly InversionLine[];
  /** With it the picture has horizontal-field strokes and panels of measured current and alpha. */
  readonly vector?: VectorMaps | undefined;
  /** Field lines to draw, in Mm from the first pixel of the patch. */
  readonly fieldLines?: readonly FieldLine[];
}

/** Loads fonts and the rasteriser ahead of the first picture, by drawing next to nothing. */
export async function prepareDrawing(): Promise<void> {
  for (const weight of ['regular', 'bold'] as const) textWidth('M', 12, weight);
  await rasteriseDrawing(newDrawing(), 8, 8);
}

/**
 * Draws the picture of one region as PNG bytes: field map with its scale, coordinate grid, inversion
 * line and current contours, the figures with interval and basis, and the flags; of a vector map also
 * the horizontal field, the measured current and alpha. Text is drawn as outlines, so no installed
 * font is needed; the same input gives the same pixels.
 */
export async function renderRegionPicture(picture: RegionPicture): Promise<Uint8Array> {
  const { drawing, layout, paint } = composePicture(picture);
  const vectors = rasteriseDrawing(drawing, layout.width, layout.height);
  const raster = paint();
  for (const layer of await vectors) layOver(raster, layer);
  return encodePng(raster);
}
