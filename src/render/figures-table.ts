import { type Basis, QUANTITY_FACTS, type QuantityKey } from '../figures/quantity.js';
import type { RegionFigures } from '../figures/region.js';
import { type Drawing, drawShape, drawText, styledWidth } from './drawing.js';
import { quantityText } from './number-format.js';
import {
  BODY,
  BODY_PRIOR,
  BODY_QUIET,
  HEADING,
  RULE_INK,
  SMALL_QUIET,
  ZEBRA_INK,
} from './style.js';

/**
 * The headings of the table, each with the figures under it. Those that need a vector map show only
 * where a region has them.
 */
const GROUPS: Readonly<Record<string, readonly QuantityKey[]>> = {
  Flux: ['positive_flux', 'negative_flux', 'unsigned_flux', 'net_flux', 'flux_imbalance'],
  Field: ['peak_positive_field', 'peak_negative_field', 'strong_field_area'],
  'Magnetic energy': [
    'potential_energy',
    'free_energy',
    'free_energy_ceiling',
    'total_energy',
    'virial_energy',
    'virial_origin_change',
  ],
  'Electric current': [
    'upward_current',
    'downward_current',
    'unsigned_current',
    'net_current_positive',
    'net_current_negative',
    'neutralization_positive',
    'neutralization_negative',
    'peak_current_density',
    'current_helicity_mean',
    'force_free_alpha',
  ],
  'Polarity inversion line': [
    'inversion_line_length',
    'strong_gradient_line_length',
    'gradient_weighted_line_length',
    'near_line_flux',
    'shear_line_length',
  ],
  'Circuit equivalent': ['inductance', 'lundquist_number'],
  'Force over magnetic pressure': ['net_force_x', 'net_force_y', 'net_force_z'],
  'Ambiguity of the azimuth': ['disambiguation_flux_fraction_changed'],
};
const GROUPED = new Set<string>(Object.values(GROUPS).flat());

/** One line of the table: a heading, or a figure. */
export interface TableRow {
  readonly name: string;
  readonly heading: boolean;
  readonly value: string;
  readonly interval: string;
  readonly unit: string;
  readonly basis: Basis | '';
}

export interface TableColumns {
  /** Left edge of name, unit and basis; right edge of value and interval; all from the table's left. */
  readonly value: number;
  readonly interval: number;
  readonly unit: number;
  readonly basis: number;
  readonly width: number;
}

export const ROW_HEIGHT = 18;
const HEADING_HEIGHT = 23;
const TITLES = { value: 'Value', interval: '16–84 % interval', unit: 'Unit', basis: 'Basis' };

/** All figures as rows under their headings; those not to be had show a dash. */
export function tableRows(region: RegionFigures): readonly TableRow[] {
  const others = Object.keys(region.quantities).filter((key) => !GROUPED.has(key));
  const groups = { ...GROUPS, 'Other figures': others as QuantityKey[] };
  return Object.entries(groups).flatMap(([title, keys]) => {
    const shown = keys.filter((key) => isExpected(key) || region.quantities[key]);
    if (shown.length === 0) return [];
    const heading = { name: title, heading: true, value: '', interval: '', unit: '' };
    return [{ ...heading, basis: '' as const }, ...shown.map((key) => figureRow(region, key))];
  });
}

/** True for what every map should give: missing, it shows as not available. */
function isExpected(key: QuantityKey): boolean {
  return key in QUANTITY_FACTS && !('vector' in QUANTITY_FACTS[key]);
}

function figureRow(region: RegionFigures, key: QuantityKey): TableRow {
  // A figure newer than this table still shows, under its key.
  const label = QUANTITY_FACTS[key]?.label ?? key.replaceAll('_', ' ');
  const name = label[0].toUpperCase() + label.slice(1);
  const quantity = region.quantities[key];
  if (!quantity || quantity.value === null || !Number.isFinite(quantity.value)) {
    return { name, heading: false, value: '—', interval: 'not available', unit: '', basis: '' };
  }
  const { basis } = quantity;
  const text = quantityText(quantity);
  const value = isSupposed(basis) ? `~ ${text.value}` : text.value;
  return { name, heading: false, ...text, value, basis };
}

/** First and second half of the rows, cut before the heading nearest to the middle. */
export function splitRows(
  rows: readonly TableRow[],
): readonly [readonly TableRow[], readonly TableRow[]] {
  const cuts = rows.flatMap((row, i) => (row.heading && i > 0 ? [i] : []));
  const cut = cuts.reduce((best, i) =>
    Math.abs(i - rows.length / 2) < Math.abs(best - rows.length / 2) ? i : best,
  );
  return [rows.slice(0, cut), rows.slice(cut)];
}

/** Column places wide enough for every row. */
export function tableColumns(rows: readonly TableRow[]): TableColumns {
  const widest = (pick: (row: TableRow) => string) =>
    Math.ceil(Math.max(...rows.map((row) => (row.heading ? 0 : styledWidth(pick(row), BODY)))));
  const title = (text: string) => Math.ceil(styledWidth(text, SMALL_QUIET));
  const gap = 14;
  const value =
    16 +
    widest((row) => row.name) +
    gap +
    Math.max(
      44,
      widest((row) => row.value),
    );
  const interval =
    value +
    gap +
    Math.max(
      title(TITLES.interval),
      widest((row) => row.interval),
    );
  const unit = interval + gap;
  const basis =
    unit +
    Math.max(
      title(TITLES.unit),
      widest((row) => row.unit),
    ) +
    gap;
  const width = basis + Math.max(styledWidth('extrapolated', BODY), title(TITLES.basis)) + 6;
  return { value, interval, unit, basis, width: Math.ceil(width) };
}

/** Height of the table with its line of column titles. */
export function tableHeight(rows: readonly TableRow[]): number {
  return 20 + rows.reduce((sum, row) => sum + (row.heading ? HEADING_HEIGHT : ROW_HEIGHT), 0);
}

/** Draws the rows from (x, y) down. A figure on a prior or an assumption is slanted, pale and has a tilde. */
export function drawTable(
  drawing: Drawing,
  x: number,
  y: number,
  rows: readonly TableRow[],
  columns: TableColumns,
): void {
  drawText(drawing, TITLES.value, x + columns.value, y + 13, SMALL_QUIET, 'end');
  drawText(drawing, TITLES.interval, x + columns.interval, y + 13, SMALL_QUIET, 'end');
  drawText(drawing, TITLES.unit, x + columns.unit, y + 13, SMALL_QUIET);
  drawText(drawing, TITLES.basis, x + columns.basis, y + 13, SMALL_QUIET);
  let top = y + 20;
  let stripe = false;
  for (const row of rows) {
    if (row.heading) {
      rule(drawing, x, top + HEADING_HEIGHT - 1, columns.width);
      drawText(drawing, row.name, x, top + 17, HEADING);
      top += HEADING_HEIGHT;
      stripe = false;
      continue;
    }
    if (stripe) zebra(drawing, x, top, columns.width);
    stripe = !stripe;
    drawFigure(drawing, x, top + 14, row, columns);
    top += ROW_HEIGHT;
  }
}

/** True for a basis that must never look like a measurement. */
export function isSupposed(basis: Basis | ''): boolean {
  return basis === 'prior' || basis === 'assumed';
}

function drawFigure(
  drawing: Drawing,
  x: number,
  baseline: number,
  row: TableRow,
  columns: TableColumns,
): void {
  const missing = row.value === '—';
  const style = missing ? BODY_QUIET : isSupposed(row.basis) ? BODY_PRIOR : BODY;
  const quiet = isSupposed(row.basis) ? BODY_PRIOR : BODY_QUIET;
  drawText(drawing, row.name, x + 10, baseline, style);
  drawText(drawing, row.value, x + columns.value, baseline, style, 'end');
  drawText(drawing, row.interval, x + columns.interval, baseline, quiet, 'end');
  drawText(drawing, row.unit, x + columns.unit, baseline, style);
  drawText(drawing, row.basis, x + columns.basis, baseline, quiet);
}

function zebra(drawing: Drawing, x: number, y: number, width: number): void {
  drawShape(drawing, 'rect', { x, y, width, height: ROW_HEIGHT, fill: ZEBRA_INK });
}

function rule(drawing: Drawing, x: number, y: number, width: number): void {
  drawShape(drawing, 'rect', { x, y, width, height: 1, fill: RULE_INK });
}
