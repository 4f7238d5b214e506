import type { Canvas } from './canvas.js';
import { drawGridLabels, drawGridLines } from './coordinate-grid.js';
import {
  type ContourSet,
  type CurrentGrid,
  currentContours,
  currentGrid,
  measuredCurrentGrid,
} from './current-contours.js';
import { type Drawing, drawClipped, drawShape } from './drawing.js';
import {
  drawClosedLine,
  drawOpenLine,
  type FieldLinePaths,
  fieldLinePaths,
} from './field-line-layer.js';
import { drawTicks, type HorizontalTicks, horizontalTicks } from './horizontal-ticks.js';
import { type InversionPaths, inversionPaths, withoutSpecks } from './inversion-layer.js';
import { drawCurrentLine, drawPlainLine, drawPoleSign, drawStrongLine } from './line-styles.js';
import type { MapFrame } from './map-frame.js';
import { displayField, fieldLimit, paintMap } from './map-layer.js';
import { quantileOfSize } from './nice-number.js';
import { type Pole, strongestPoles } from './poles.js';
import type { RegionPicture } from './region-picture.js';
import { FRAME_INK } from './style.js';

/** Everything the map shows, brought to its frame. */
export interface MapContent {
  readonly frame: MapFrame;
  /** Field [G] at display resolution, row 0 south, NaN where missing. */
  readonly samples: Float64Array;
  readonly limit: number;
  readonly hasMissing: boolean;
  readonly poles: readonly Pole[];
  readonly inversion: InversionPaths;
  readonly fieldLines: FieldLinePaths;
  /** Undefined where there is no current map. */
  readonly current: CurrentGrid | undefined;
  readonly contours: readonly ContourSet[];
  /** Undefined without a vector map. */
  readonly ticks: HorizontalTicks | undefined;
}

/** Resamples the field, picks limits, poles and contours for a frame. */
export function mapContent(picture: RegionPicture, frame: MapFrame): MapContent {
  const samples = displayField(picture.radialField, frame);
  const limit = fieldLimit(picture.radialField);
  const current = fieldPanelCurrent(picture);
  const inversion = inversionPaths(picture.inversionLines, frame);
  return {
    frame,
    samples,
    limit,
    hasMissing: samples.includes(Number.NaN),
    poles: strongestPoles(samples, frame, limit),
    inversion: picture.vector ? withoutSpecks(inversion) : inversion,
    fieldLines: fieldLinePaths(picture.fieldLines ?? [], picture.patch.pixelMm, frame),
    current,
    contours: current ? currentContours(current, frame) : [],
    ticks: picture.vector && horizontalTicks(picture.vector, frame),
  };
}

/** The measured current where there is one, otherwise what the picture was given. */
function fieldPanelCurrent({ vector, currentDensity }: RegionPicture): CurrentGrid | undefined {
  if (!vector) return currentDensity && currentGrid(currentDensity);
  const sigma = quantileOfSize(vector.currentNoise.values.data, 0.5);
  return measuredCurrentGrid(vector.currentDensity, sigma);
}

/** Paints the field and draws grid, contours, inversion line, pole signs, frame and axis labels. */
export function drawMap(canvas: Canvas, picture: RegionPicture, content: MapContent): void {
  const { drawing } = canvas;
  const { frame } = content;
  canvas.paints.push((raster) => paintMap(raster, frame, { ...content, scale: 'field' }));
  drawClipped(drawing, frame, () => {
    drawGridLines(drawing, picture.patch, frame);
    const strongest = content.current?.levels.at(-1);
    for (const { level, lines } of content.contours) {
      drawCurrentLine(drawing, lines, level, Math.abs(level) === strongest);
    }
    drawOpenLine(drawing, content.fieldLines.open);
    drawClosedLine(drawing, content.fieldLines.closed);
    if (content.ticks) drawTicks(drawing, content.ticks.ticks);
    drawPlainLine(drawing, content.inversion.plain);
    drawStrongLine(drawing, content.inversion.strong, content.ticks !== undefined);
    for (const { px, py, sign } of content.poles) drawPoleSign(drawing, px, py, sign);
  });
  drawFrame(drawing, picture, frame);
}

/** The border of a map and the labels of its coordinate grid. */
export function drawFrame(drawing: Drawing, { patch }: RegionPicture, frame: MapFrame): void {
  drawShape(drawing, 'rect', {
    x: frame.x - 0.5,
    y: frame.y - 0.5,
    width: frame.width + 1,
    height: frame.height + 1,
    fill: 'none',
    stroke: FRAME_INK,
  });
  drawGridLabels(drawing, patch, frame);
}
