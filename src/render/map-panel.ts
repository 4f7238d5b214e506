import type { Canvas } from './canvas.js';
import { drawGridLabels, drawGridLines } from './coordinate-grid.js';
import {
  type ContourSet,
  type CurrentGrid,
  currentContours,
  currentGrid,
} from './current-contours.js';
import { drawClipped, drawShape } from './drawing.js';
import {
  drawClosedLine,
  drawOpenLine,
  type FieldLinePaths,
  fieldLinePaths,
} from './field-line-layer.js';
import { type InversionPaths, inversionPaths } from './inversion-layer.js';
import { drawCurrentLine, drawPlainLine, drawPoleSign, drawStrongLine } from './line-styles.js';
import type { MapFrame } from './map-frame.js';
import { displayField, fieldLimit, paintMap } from './map-layer.js';
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
}

/** Resamples the field, picks limits, poles and contours for a frame. */
export function mapContent(picture: RegionPicture, frame: MapFrame): MapContent {
  const samples = displayField(picture.radialField, frame);
  const limit = fieldLimit(picture.radialField);
  const current = picture.currentDensity && currentGrid(picture.currentDensity);
  return {
    frame,
    samples,
    limit,
    hasMissing: samples.includes(Number.NaN),
    poles: strongestPoles(samples, frame, limit),
    inversion: inversionPaths(picture.inversionLines, frame),
    fieldLines: fieldLinePaths(picture.fieldLines ?? [], picture.patch.pixelMm, frame),
    current,
    contours: current ? currentContours(current, frame) : [],
  };
}

/** Paints the field and draws grid, contours, inversion line, pole signs, frame and axis labels. */
export function drawMap(canvas: Canvas, picture: RegionPicture, content: MapContent): void {
  const { drawing } = canvas;
  const { frame } = content;
  canvas.paints.push((raster) => paintMap(raster, frame, content.samples, content.limit));
  drawClipped(drawing, frame, () => {
    drawGridLines(drawing, picture.patch, frame);
    const strongest = content.current?.levels.at(-1);
    for (const { level, lines } of content.contours) {
      drawCurrentLine(drawing, lines, level, Math.abs(level) === strongest);
    }
    drawOpenLine(drawing, content.fieldLines.open);
    drawClosedLine(drawing, content.fieldLines.closed);
    drawPlainLine(drawing, content.inversion.plain);
    drawStrongLine(drawing, content.inversion.strong);
    for (const { px, py, sign } of content.poles) drawPoleSign(drawing, px, py, sign);
  });
  drawShape(drawing, 'rect', {
    x: frame.x - 0.5,
    y: frame.y - 0.5,
    width: frame.width + 1,
    height: frame.height + 1,
    fill: 'none',
    stroke: FRAME_INK,
  });
  drawGridLabels(drawing, picture.patch, frame);
}
