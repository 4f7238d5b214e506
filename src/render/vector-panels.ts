import type { Canvas } from './canvas.js';
import type { ColourBarFacts } from './colour-bar.js';
import { drawGridLines } from './coordinate-grid.js';
import { displayAlpha, displayCurrent } from './dead-zone.js';
import { drawClipped, drawText, type Rect } from './drawing.js';
import { type InversionPaths, inversionPaths } from './inversion-layer.js';
import { drawPlainLine } from './line-styles.js';
import type { MapFrame } from './map-frame.js';
import { paintMap, type ScaledMap } from './map-layer.js';
import { drawFrame } from './map-panel.js';
import type { RegionPicture, VectorMaps } from './region-picture.js';
import { HEADING } from './style.js';

/** Headings of the three panels of a vector map. */
export const PANEL_HEADINGS = ['Magnetic field', 'Electric current', 'Force-free alpha'] as const;

/** What one of the panels beside the field shows, brought to its frame. */
export interface PanelContent extends ScaledMap {
  readonly frame: MapFrame;
  readonly heading: string;
  readonly hasMissing: boolean;
  readonly inversion: InversionPaths;
}

/** The current and the alpha panel in their frames. */
export function panelContents(
  picture: RegionPicture,
  vector: VectorMaps,
  bars: readonly ColourBarFacts[],
  maps: readonly Rect[],
): readonly PanelContent[] {
  const { nx, ny } = picture.patch;
  return [displayCurrent, displayAlpha].map((display, i) => {
    const frame = { ...maps[i], nx, ny };
    const live = display(vector, picture.radialField, frame);
    return {
      frame,
      heading: PANEL_HEADINGS[i + 1],
      inversion: inversionPaths(picture.inversionLines, frame),
      ...live,
      hasMissing: live.samples.some((value, k) => Number.isNaN(value) && live.dead[k] === 0),
      limit: bars[i + 1].limit,
      scale: bars[i + 1].scale,
    };
  });
}

/** Paints a panel and draws its heading, the coordinate grid and the inversion line. */
export function drawPanel(
  canvas: Canvas,
  picture: RegionPicture,
  content: PanelContent,
  strip: Rect,
): void {
  const { drawing } = canvas;
  const { frame, inversion } = content;
  canvas.paints.push((raster) => paintMap(raster, frame, content));
  drawClipped(drawing, frame, () => {
    drawGridLines(drawing, picture.patch, frame);
    drawPlainLine(drawing, inversion.plain);
  });
  drawFrame(drawing, picture, frame);
  drawText(drawing, content.heading, strip.x, strip.y + strip.height - 8, HEADING);
}
