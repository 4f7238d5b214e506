import type { Canvas } from './canvas.js';
import { drawFoot, drawNote, drawTitle, noteLines } from './captions.js';
import { colourBarHeight, drawColourBar } from './colour-bar.js';
import { type Drawing, newDrawing } from './drawing.js';
import { drawTable, splitRows, tableColumns, tableHeight, tableRows } from './figures-table.js';
import { drawFlags, flagLines, flagsHeight } from './flag-list.js';
import { arrange, type Layout, type LayoutNeeds } from './layout.js';
import { drawLegend, legendHeight } from './legend.js';
import { legendEntries } from './legend-entries.js';
import { blankRaster, type Raster } from './map-layer.js';
import { drawMap, type MapContent, mapContent } from './map-panel.js';
import type { RegionPicture } from './region-picture.js';
import { drawMarks, marksWidth } from './scale-marks.js';

/** A picture before encoding, with the places of its parts for checks. */
export interface ComposedPicture {
  readonly drawing: Drawing;
  /** Paints what lies below the drawing. */
  readonly paint: () => Raster;
  readonly layout: Layout;
  readonly content: MapContent;
}

/** Lays out and draws the picture of one region; pure, apart from reading the font once. */
export function composePicture(picture: RegionPicture): ComposedPicture {
  const { patch, region } = picture;
  const rows = tableRows(region);
  const columns = tableColumns(rows);
  const halves = splitRows(rows);
  const mapWidthMm = patch.nx * patch.pixelMm;
  const needs: LayoutNeeds = {
    nx: patch.nx,
    ny: patch.ny,
    marksWidth: (mapWidthPx) => marksWidth(mapWidthMm, mapWidthPx),
    colourBarHeight: () => 0,
    legendHeight: () => 0,
    tableWidth: columns.width,
    tableHeight: tableHeight(rows),
    halfHeights: [tableHeight(halves[0]), tableHeight(halves[1])],
    flagsHeight: (width) => flagsHeight(flagLines(region.flags, width)),
    noteHeight: (width) => 16 * noteLines(rows, width).length,
  };
  // The place of the map does not depend on the legend, but what the legend says depends on the map.
  const { map } = arrange(needs);
  const content = mapContent(picture, { ...map, nx: patch.nx, ny: patch.ny });
  const entries = legendEntries(picture, content);
  const layout = arrange({
    ...needs,
    colourBarHeight: (width) => colourBarHeight(width, content.limit),
    legendHeight: (width) => legendHeight(entries, width),
  });
  const canvas: Canvas = { drawing: newDrawing(), paints: [] };
  drawMap(canvas, picture, content);
  drawMarks(canvas.drawing, layout.marks, mapWidthMm, map.width);
  drawColourBar(canvas, layout.colourBar, content.limit);
  drawLegend(canvas, layout.legend, entries);
  const parts = layout.tables.length === 1 ? [rows] : halves;
  layout.tables.forEach(({ x, y }, i) => {
    drawTable(canvas.drawing, x, y, parts[i], columns);
  });
  drawNote(canvas.drawing, layout.note, noteLines(rows, layout.note.width));
  drawFlags(canvas.drawing, layout.flags, flagLines(region.flags, layout.flags.width));
  drawTitle(canvas.drawing, layout.title, picture);
  drawFoot(canvas.drawing, layout.foot, picture);
  const paint = () => {
    const raster = blankRaster(layout.width, layout.height);
    for (const each of canvas.paints) each(raster);
    return raster;
  };
  return { drawing: canvas.drawing, paint, layout, content };
}
