import { barFacts } from './bar-facts.js';
import type { Canvas } from './canvas.js';
import { drawFoot, drawNote, drawTitle, noteLines } from './captions.js';
import { colourBarHeight, drawColourBar } from './colour-bar.js';
import { type Drawing, drawText, newDrawing, type Rect, styledWidth } from './drawing.js';
import { drawTable, splitRows, tableColumns, tableHeight, tableRows } from './figures-table.js';
import { drawFlags, flagLines, flagsHeight } from './flag-list.js';
import { arrange, type Layout, type LayoutNeeds } from './layout.js';
import { drawLegend, legendHeight } from './legend.js';
import { legendEntries } from './legend-entries.js';
import { blankRaster, type Raster } from './map-layer.js';
import { drawMap, type MapContent, mapContent } from './map-panel.js';
import type { RegionPicture } from './region-picture.js';
import { drawMarks, marksWidth } from './scale-marks.js';
import { HEADING } from './style.js';
import { arrangeVector } from './vector-layout.js';
import {
  drawPanel,
  liveMaps,
  type PanelContent,
  panelContents,
  panelHeadings,
} from './vector-panels.js';

/** A picture before encoding, with the places of its parts for checks. */
export interface ComposedPicture {
  readonly drawing: Drawing;
  /** Paints what lies below the drawing. */
  readonly paint: () => Raster;
  readonly layout: Layout;
  readonly content: MapContent;
  /** Current and alpha of a vector map; none otherwise. */
  readonly panels: readonly PanelContent[];
}

/** Fewer flags beside the taller table of a vector map. */
const MOST_VECTOR_FLAG_LINES = 20;
const HEADING_GAP = 24;

/** Lays out and draws the picture of one region; pure, apart from reading the font once. */
export function composePicture(picture: RegionPicture): ComposedPicture {
  const { patch, region, vector } = picture;
  const rows = tableRows(region);
  const columns = tableColumns(rows);
  const halves = splitRows(rows);
  const live = liveMaps(picture);
  const bars = barFacts(picture, live);
  const mapWidthMm = patch.nx * patch.pixelMm;
  const headings = panelHeadings(live);
  const widths = headings.map((heading) => styledWidth(heading, HEADING));
  const headingWidth = live ? widths[0] + HEADING_GAP : 0;
  const flags = (width: number) => flagLines(region.flags, width, vector && MOST_VECTOR_FLAG_LINES);
  const needs: LayoutNeeds = {
    nx: patch.nx,
    ny: patch.ny,
    marksWidth: (mapWidthPx) =>
      Math.max(headingWidth + marksWidth(mapWidthMm, mapWidthPx), ...widths),
    colourBarHeight: (width) => Math.max(...bars.map((bar) => colourBarHeight(width, bar))),
    legendHeight: () => 0,
    tableWidth: columns.width,
    tableHeight: tableHeight(rows),
    halfHeights: [tableHeight(halves[0]), tableHeight(halves[1])],
    flagsHeight: (width) => flagsHeight(flags(width)),
    noteHeight: (width) => 16 * noteLines(rows, width).length,
  };
  const place = vector ? arrangeVector : arrange;
  // The place of the maps does not depend on the legend, but what it says depends on the maps.
  const first = place(needs);
  const content = mapContent(picture, { ...first.map, nx: patch.nx, ny: patch.ny });
  const maps = first.panels.map(({ map }) => map);
  const panels = live ? panelContents(picture, live, maps) : [];
  const entries = legendEntries(picture, content, panels, live);
  const layout = place({ ...needs, legendHeight: (width) => legendHeight(entries, width) });
  const canvas: Canvas = { drawing: newDrawing(), paints: [] };
  drawMap(canvas, picture, content);
  panels.forEach((panel, i) => {
    drawPanel(canvas, picture, panel, layout.panels[i].marks);
  });
  drawFieldStrip(canvas.drawing, picture, layout, headings[0] ?? '', headingWidth);
  [layout, ...layout.panels].forEach(({ colourBar }, i) => {
    drawColourBar(canvas, colourBar, bars[i]);
  });
  drawLegend(canvas, layout.legend, entries);
  const parts = layout.tables.length === 1 ? [rows] : halves;
  layout.tables.forEach(({ x, y }, i) => {
    drawTable(canvas.drawing, x, y, parts[i], columns);
  });
  drawNote(canvas.drawing, layout.note, noteLines(rows, layout.note.width));
  drawFlags(canvas.drawing, layout.flags, flags(layout.flags.width));
  drawTitle(canvas.drawing, layout.title, picture);
  drawFoot(canvas.drawing, layout.foot, picture);
  const paint = () => {
    const raster = blankRaster(layout.width, layout.height);
    for (const each of canvas.paints) each(raster);
    return raster;
  };
  return { drawing: canvas.drawing, paint, layout, content, panels };
}

/** Scale bar and compass above the field, after its heading where there are other panels. */
function drawFieldStrip(
  drawing: Drawing,
  { patch }: RegionPicture,
  { marks, map }: Layout,
  heading: string,
  headingWidth: number,
): void {
  drawText(drawing, heading, marks.x, marks.y + marks.height - 8, HEADING);
  const strip: Rect = { ...marks, x: marks.x + headingWidth, width: marks.width - headingWidth };
  drawMarks(drawing, strip, patch.nx * patch.pixelMm, map.width);
}
