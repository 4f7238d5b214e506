import { COLOUR_BAR_SIDE } from './colour-bar.js';
import type { Rect } from './drawing.js';
import { mapSize } from './map-frame.js';
import { MARKS_HEIGHT } from './scale-marks.js';
import { MARGIN } from './style.js';

/** What the arrangement must find room for; heights depend on the width given. */
export interface LayoutNeeds {
  readonly nx: number;
  readonly ny: number;
  /** Least width of the strip with scale bar and compass for a map of this width. */
  readonly marksWidth: (mapWidthPx: number) => number;
  readonly colourBarHeight: (width: number) => number;
  readonly legendHeight: (width: number) => number;
  readonly tableWidth: number;
  /** Heights of the whole table and of its two halves. */
  readonly tableHeight: number;
  readonly halfHeights: readonly [number, number];
  readonly flagsHeight: (width: number) => number;
  readonly noteHeight: (width: number) => number;
}

/** Places of a panel beside the field: heading strip, map with its labels, colour bar. */
export type PanelPlaces = MapArea & Pick<Layout, 'colourBar'>;

/** Places of all parts, in whole pixels; they do not overlap and lie within the picture. */
export interface Layout {
  readonly width: number;
  readonly height: number;
  readonly title: Rect;
  readonly marks: Rect;
  readonly map: Rect;
  /** Room for latitudes left of the map and longitudes below it. */
  readonly latitudes: Rect;
  readonly longitudes: Rect;
  readonly colourBar: Rect;
  /** Current and alpha of a vector map; none otherwise. */
  readonly panels: readonly PanelPlaces[];
  readonly legend: Rect;
  /** One table, or its two halves side by side. */
  readonly tables: readonly Rect[];
  readonly note: Rect;
  readonly flags: Rect;
  readonly foot: Rect;
}

const TITLE_HEIGHT = 50;
const FOOT_HEIGHT = 22;
export const AXIS_LEFT = 46;
const AXIS_BOTTOM = 24;
/** Longitudes may stick out to the right of the frame by half a label. */
export const AXIS_RIGHT = 18;
export const GAP = 16;
export const COLUMN_GAP = 28;
export const TOP = MARGIN + TITLE_HEIGHT + 14;

/** Arranges the parts by the shape of the map: wider than 3 : 1, taller than 1 : 2, or between. */
export function arrange(needs: LayoutNeeds): Layout {
  const aspect = needs.nx / needs.ny;
  if (aspect > 3) return arrangeWide(needs);
  if (aspect < 0.5) return arrangeTall(needs);
  return arrangeSquare(needs);
}

/** Map with its colour bar below, table and flags at the right, the legend where it costs least. */
function arrangeSquare(needs: LayoutNeeds): Layout {
  const boxWidth = needs.nx > 1.4 * needs.ny ? 720 : 640;
  const size = mapSize(needs.nx, needs.ny, boxWidth, 640);
  const mapArea = placeMap(MARGIN, TOP, size, needs);
  const column = Math.max(size.width, needs.marksWidth(size.width), 440);
  const x = MARGIN + AXIS_LEFT;
  const colourBar = box(x, bottom(mapArea.longitudes) + 8, column, needs.colourBarHeight(column));
  const sideX = x + column + COLUMN_GAP + 6;
  const side = placeSide(sideX, TOP, needs);
  const below = box(x, bottom(colourBar) + GAP, column, needs.legendHeight(column));
  const sideHeight = needs.legendHeight(needs.tableWidth);
  // At the side it stands level with the colour bar where there is room.
  const sideY = Math.max(bottom(side.flags) + GAP, bottom(colourBar) - sideHeight);
  const beside = box(sideX, sideY, needs.tableWidth, sideHeight);
  const legend = Math.max(bottom(below), bottom(side.flags)) < bottom(beside) ? below : beside;
  return finish(sideX + needs.tableWidth + MARGIN, { ...mapArea, colourBar, legend, ...side });
}

/** Narrow map; colour bar and legend between it and the table. */
function arrangeTall(needs: LayoutNeeds): Layout {
  const size = mapSize(needs.nx, needs.ny, 400, 740);
  const mapArea = placeMap(MARGIN, TOP, size, needs);
  const x = Math.max(right(mapArea.marks), right(mapArea.map) + AXIS_RIGHT) + COLUMN_GAP - 8;
  const width = 270;
  const colourBar = box(x, TOP, width, needs.colourBarHeight(width));
  const legend = box(x, bottom(colourBar) + GAP, width, needs.legendHeight(width));
  const side = placeSide(x + width + COLUMN_GAP, TOP, needs);
  const total = x + width + COLUMN_GAP + needs.tableWidth + MARGIN;
  return finish(total, { ...mapArea, colourBar, legend, ...side });
}

/** Map over the full width; colour bar beside the legend, then both halves of the table. */
function arrangeWide(needs: LayoutNeeds): Layout {
  const size = mapSize(needs.nx, needs.ny, 1130, 320);
  const mapArea = placeMap(MARGIN, TOP, size, needs);
  const tables = 2 * needs.tableWidth + COLUMN_GAP + 12;
  const inner = Math.max(tables, AXIS_LEFT + size.width + AXIS_RIGHT);
  const barWidth = 440;
  const y = bottom(mapArea.longitudes) + 8;
  const barX = MARGIN + AXIS_LEFT - COLOUR_BAR_SIDE;
  const colourBar = box(barX, y, barWidth, needs.colourBarHeight(barWidth));
  const legendX = barX + barWidth + COLUMN_GAP;
  const legendWidth = MARGIN + inner - legendX;
  const legend = box(legendX, y + 4, legendWidth, needs.legendHeight(legendWidth));
  const tableY = Math.max(bottom(colourBar), bottom(legend)) + GAP;
  const left = box(MARGIN, tableY, needs.tableWidth, needs.halfHeights[0]);
  const secondX = MARGIN + inner - needs.tableWidth;
  const second = box(secondX, tableY, needs.tableWidth, needs.halfHeights[1]);
  const noteY = Math.max(bottom(left), bottom(second)) + 6;
  const note = box(MARGIN, noteY, inner, needs.noteHeight(inner));
  const flags = box(MARGIN, bottom(note) + GAP, inner, needs.flagsHeight(inner));
  return finish(inner + 2 * MARGIN, {
    ...mapArea,
    colourBar,
    legend,
    tables: [left, second],
    note,
    flags,
  });
}

type Size = { readonly width: number; readonly height: number };
export type MapArea = Pick<Layout, 'marks' | 'map' | 'latitudes' | 'longitudes'>;
type Body = Omit<Layout, 'width' | 'height' | 'title' | 'foot' | 'panels'> &
  Partial<Pick<Layout, 'panels'>>;

/** A map with `strip` pixels above it for scale bar and compass, and room for its labels. */
export function placeMap(
  x: number,
  y: number,
  size: Size,
  needs: LayoutNeeds,
  strip = MARKS_HEIGHT,
): MapArea {
  const left = x + AXIS_LEFT;
  const marksWidth = Math.max(size.width, needs.marksWidth(size.width));
  const map = box(left, y + strip, size.width, size.height);
  return {
    marks: box(left, y, marksWidth, strip),
    map,
    latitudes: box(x, map.y, AXIS_LEFT, size.height),
    longitudes: box(x, bottom(map), AXIS_LEFT + size.width + AXIS_RIGHT, AXIS_BOTTOM),
  };
}

/** Table, note and flags one below the other. */
export function placeSide(
  x: number,
  y: number,
  needs: LayoutNeeds,
): Pick<Layout, 'tables' | 'note' | 'flags'> {
  const table = box(x, y, needs.tableWidth, needs.tableHeight);
  const note = box(x, bottom(table) + 6, needs.tableWidth, needs.noteHeight(needs.tableWidth));
  const flags = box(x, bottom(note) + GAP, needs.tableWidth, needs.flagsHeight(needs.tableWidth));
  return { tables: [table], note, flags };
}

/** Adds title and foot, and the size of the whole. */
export function finish(width: number, body: Body): Layout {
  const inner = Math.ceil(width) - 2 * MARGIN;
  const { panels = [], tables } = body;
  const bars = panels.flatMap(({ longitudes, colourBar }) => [longitudes, colourBar]);
  const lowest = Math.max(
    ...[
      body.longitudes,
      body.colourBar,
      body.legend,
      body.note,
      body.flags,
      ...tables,
      ...bars,
    ].map(bottom),
  );
  const foot = box(MARGIN, lowest + GAP, inner, FOOT_HEIGHT);
  return {
    ...body,
    panels,
    width: Math.ceil(width),
    height: bottom(foot) + 14,
    title: box(MARGIN, MARGIN - 6, inner, TITLE_HEIGHT),
    foot,
  };
}

/** A rectangle on whole pixels. */
export function box(x: number, y: number, width: number, height: number): Rect {
  return {
    x: Math.round(x),
    y: Math.round(y),
    width: Math.floor(width),
    height: Math.ceil(height),
  };
}

export function bottom(rect: Rect): number {
  return rect.y + rect.height;
}

function right(rect: Rect): number {
  return rect.x + rect.width;
}
