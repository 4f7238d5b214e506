import { COLOUR_BAR_SIDE } from './colour-bar.js';
import {
  AXIS_LEFT,
  AXIS_RIGHT,
  bottom,
  box,
  COLUMN_GAP,
  finish,
  GAP,
  type Layout,
  type LayoutNeeds,
  type MapArea,
  type PanelPlaces,
  placeMap,
  placeSide,
  TOP,
} from './layout.js';
import { mapSize } from './map-frame.js';
import { MARKS_HEIGHT } from './scale-marks.js';
import { MARGIN } from './style.js';

/** Height of the heading above a map that has no scale bar. */
const HEADING_STRIP = 24;
const PANEL_GAP = 20;
const LEAST_BAR_WIDTH = 300;
const SIDE_BAR_WIDTH = 344;

/**
 * Arranges the three panels of a vector map by the shape of the patch: side by side where it is tall,
 * 2 x 2 with the legend in the fourth place where it is about square, one below the other where
 * it is wide. At most about 1900 x 1400 px.
 */
export function arrangeVector(needs: LayoutNeeds): Layout {
  const aspect = needs.nx / needs.ny;
  if (aspect < 0.78) return arrangeRow(needs);
  if (aspect < 2) return arrangeGrid(needs);
  return aspect < 6 ? arrangeStack(needs) : arrangeStrips(needs);
}

/** Three maps side by side, legend below, table at the right. */
function arrangeRow(needs: LayoutNeeds): Layout {
  const column = columnOf(needs, mapSize(needs.nx, needs.ny, 332, 860));
  const [field, ...panels] = [0, 1, 2].map((i) => {
    const x = MARGIN + i * (column.width + PANEL_GAP);
    return placePanel(x, TOP, MARKS_HEIGHT, column, needs);
  });
  const width = 3 * column.width + 2 * PANEL_GAP;
  return besideTable(needs, width, field, panels);
}

/** Field and current above, alpha and legend below, table at the right. */
function arrangeGrid(needs: LayoutNeeds): Layout {
  const column = columnOf(needs, mapSize(needs.nx, needs.ny, 548, 464));
  const secondX = MARGIN + column.width + PANEL_GAP;
  const field = placePanel(MARGIN, TOP, MARKS_HEIGHT, column, needs);
  const current = placePanel(secondX, TOP, MARKS_HEIGHT, column, needs);
  const y = bottom(field.colourBar) + GAP;
  const alpha = placePanel(MARGIN, y, HEADING_STRIP, column, needs);
  const inner = column.width - AXIS_LEFT;
  const legendY = alpha.map.y;
  const legend = box(secondX + AXIS_LEFT, legendY, inner, needs.legendHeight(inner));
  const sideX = secondX + column.width + COLUMN_GAP;
  const side = placeSide(sideX, TOP, needs);
  const fourth = box(legend.x, bottom(legend) + GAP, inner, needs.flagsHeight(inner));
  // Under the table the flags have more room; not where they would make the picture taller.
  const lowest = Math.max(bottom(alpha.colourBar), bottom(fourth));
  const flags = bottom(side.flags) <= lowest ? side.flags : fourth;
  return finish(sideX + needs.tableWidth + MARGIN, {
    ...field,
    panels: [current, alpha],
    legend,
    ...side,
    flags,
  });
}

/** Three maps one below the other, each with its colour bar at the right; legend below, then the table. */
function arrangeStack(needs: LayoutNeeds): Layout {
  const { width, field, panels } = placeStack(needs, mapSize(needs.nx, needs.ny, 840, 300));
  return besideTable(needs, width, field, panels);
}

/** As a stack, with both halves of the table, legend and flags in columns below. */
function arrangeStrips(needs: LayoutNeeds): Layout {
  const { width, field, panels } = placeStack(needs, mapSize(needs.nx, needs.ny, 1400, 150));
  const inner = Math.max(width, 2 * needs.tableWidth + 2 * COLUMN_GAP + 460);
  const y = lowestOf(panels[1]) + GAP;
  const [first, second] = needs.halfHeights.map((height, i) =>
    box(MARGIN + i * (needs.tableWidth + COLUMN_GAP), y, needs.tableWidth, height),
  );
  const x = MARGIN + 2 * (needs.tableWidth + COLUMN_GAP);
  const third = MARGIN + inner - x;
  const legend = box(x, y + 6, third, needs.legendHeight(third));
  const note = box(x, bottom(legend) + GAP, third, needs.noteHeight(third));
  const flags = box(x, bottom(note) + GAP, third, needs.flagsHeight(third));
  return finish(inner + 2 * MARGIN, {
    ...field,
    panels,
    legend,
    tables: [first, second],
    note,
    flags,
  });
}

type Panel = MapArea & Pick<Layout, 'colourBar'>;

/** Width of a column of panels and of what it holds. */
interface Column {
  readonly size: { readonly width: number; readonly height: number };
  readonly width: number;
  readonly barWidth: number;
}

function columnOf(needs: LayoutNeeds, size: Column['size']): Column {
  const barWidth = Math.max(size.width + 2 * COLOUR_BAR_SIDE, LEAST_BAR_WIDTH);
  const mapWidth = Math.max(size.width + AXIS_RIGHT, needs.marksWidth(size.width));
  const width = Math.max(AXIS_LEFT + mapWidth, AXIS_LEFT - COLOUR_BAR_SIDE + barWidth);
  return { size, width: Math.ceil(width), barWidth };
}

/** A map with `strip` pixels above it and the colour bar, as wide as the map, below. */
function placePanel(
  x: number,
  y: number,
  strip: number,
  column: Column,
  needs: LayoutNeeds,
): Panel {
  const area = placeMap(x, y, column.size, needs, strip);
  const barX = area.map.x - COLOUR_BAR_SIDE;
  const barY = bottom(area.longitudes) + 6;
  const { barWidth } = column;
  return { ...area, colourBar: box(barX, barY, barWidth, needs.colourBarHeight(barWidth)) };
}

/** Three maps one below the other with the colour bars at the right. */
function placeStack(needs: LayoutNeeds, size: Column['size']) {
  const mapWidth = Math.max(size.width + AXIS_RIGHT, needs.marksWidth(size.width));
  const barX = MARGIN + AXIS_LEFT + mapWidth + 6;
  const barHeight = needs.colourBarHeight(SIDE_BAR_WIDTH);
  let y = TOP;
  const [field, ...panels] = [MARKS_HEIGHT, HEADING_STRIP, HEADING_STRIP].map((strip) => {
    const area = placeMap(MARGIN, y, size, needs, strip);
    const barY = area.map.y + Math.max(0, (size.height - barHeight) / 2);
    const panel = { ...area, colourBar: box(barX, barY, SIDE_BAR_WIDTH, barHeight) };
    y = lowestOf(panel) + 8;
    return panel;
  });
  return { width: Math.ceil(barX + SIDE_BAR_WIDTH - MARGIN), field, panels };
}

/** Panels at the left, table at the right; the flags below whichever of the two ends up lower. */
function besideTable(
  needs: LayoutNeeds,
  width: number,
  field: Panel,
  panels: readonly PanelPlaces[],
): Layout {
  const x = MARGIN + AXIS_LEFT;
  const inner = width - AXIS_LEFT;
  const legend = box(x, lowestOf(panels[1]) + GAP, inner, needs.legendHeight(inner));
  const sideX = MARGIN + width + COLUMN_GAP;
  const side = placeSide(sideX, TOP, needs);
  const below = box(x, bottom(legend) + GAP, inner, needs.flagsHeight(inner));
  const flags =
    Math.max(bottom(below), bottom(side.note)) < bottom(side.flags) ? below : side.flags;
  const total = sideX + needs.tableWidth + MARGIN;
  return finish(total, { ...field, panels, legend, ...side, flags });
}

function lowestOf({ longitudes, colourBar }: Pick<Panel, 'longitudes' | 'colourBar'>): number {
  return Math.max(bottom(longitudes), bottom(colourBar));
}
