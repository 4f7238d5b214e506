import type { Canvas } from './canvas.js';
import type { ScaleName } from './colour-scale.js';
import { drawGridLines } from './coordinate-grid.js';
import {
  displayCells,
  type LiveCurrent,
  type LiveMap,
  liveAlpha,
  liveCurrent,
} from './dead-zone.js';
import { drawClipped, drawText, type Rect } from './drawing.js';
import { type InversionPaths, inversionPaths } from './inversion-layer.js';
import { drawPlainLine } from './line-styles.js';
import type { MapFrame } from './map-frame.js';
import { paintMap, type ScaledMap } from './map-layer.js';
import { drawFrame } from './map-panel.js';
import { numberText } from './number-format.js';
import type { RegionPicture } from './region-picture.js';
import { HEADING } from './style.js';

const PANEL_HEADINGS = ['Magnetic field', 'Electric current', 'Force-free alpha'] as const;

const SCALES: readonly ScaleName[] = ['current', 'alpha'];

/** What one of the panels beside the field shows, brought to its frame. */
export interface PanelContent extends ScaledMap {
  readonly frame: MapFrame;
  readonly heading: string;
  readonly hasMissing: boolean;
  readonly inversion: InversionPaths;
}

/** What the panels of current and alpha show, before it is known where. */
export interface LiveMaps {
  readonly current: LiveCurrent;
  readonly alpha: LiveMap;
}

/** Current and alpha of a vector map; undefined without one. */
export function liveMaps({ vector, radialField }: RegionPicture): LiveMaps | undefined {
  if (!vector) return undefined;
  return {
    current: liveCurrent(vector, radialField),
    alpha: liveAlpha(vector, radialField),
  };
}

/** Headings of the three panels of a vector map; none without one. */
export function panelHeadings(live: LiveMaps | undefined): readonly string[] {
  if (!live) return [];
  const [field, current, alpha] = PANEL_HEADINGS;
  const over = ({ cellMm }: LiveMap) =>
    cellMm === undefined ? '' : `, mean over ${numberText(cellMm, 'Mm', 2)}`;
  return [field, current + over(live.current), alpha + over(live.alpha)];
}

/** The current and the alpha panel in their frames. */
export function panelContents(
  picture: RegionPicture,
  { current, alpha }: LiveMaps,
  maps: readonly Rect[],
): readonly PanelContent[] {
  const { nx, ny } = picture.patch;
  const headings = panelHeadings({ current, alpha });
  return [current, alpha].map((map, i) => {
    const frame = { ...maps[i], nx, ny };
    const { samples, dead } = displayCells(map, frame);
    return {
      frame,
      heading: headings[i + 1],
      inversion: inversionPaths(picture.inversionLines, frame),
      samples,
      dead,
      hasMissing: samples.some((value, k) => Number.isNaN(value) && dead[k] === 0),
      limit: map.limit,
      scale: SCALES[i],
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
