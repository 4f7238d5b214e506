import {
  type Basis,
  QUANTITY_FACTS,
  QUANTITY_KEYS,
  type Quantity,
  type QuantityKey,
} from '../figures/quantity.js';
import type { RegionFigures } from '../figures/region.js';
import { quantityText } from '../render/number-format.js';

/** What the summary leaves to the files, so that it fits one screen. */
const LEFT_OUT: ReadonlySet<QuantityKey> = new Set([
  'positive_flux',
  'negative_flux',
  'flux_imbalance',
  'strong_field_area',
  'net_current_positive',
  'net_current_negative',
  'inversion_line_length',
  'virial_origin_change',
  'net_force_x',
  'net_force_y',
]);

const WIDTH = 96;

/** Colours of a terminal; without colour the text alone says the same. */
interface Paint {
  readonly strong: (text: string) => string;
  readonly quiet: (text: string) => string;
  readonly unsure: (text: string) => string;
}

function paint(colour: boolean): Paint {
  const code = (open: number, close: number) => (text: string) =>
    colour ? `\u001b[${open}m${text}\u001b[${close}m` : text;
  return { strong: code(1, 22), quiet: code(2, 22), unsure: code(33, 39) };
}

/** True for a basis that no observation of this region stands behind. */
function isUnmeasured(basis: Basis): boolean {
  return basis === 'prior' || basis === 'assumed';
}

/** Breaks a sentence into lines of at most `width` characters, later ones indented by two. */
function wrap(text: string, width: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line && line.length + word.length + 1 > width) {
      lines.push(line);
      line = `  ${word}`;
    } else line = line ? `${line} ${word}` : word;
  }
  return [...lines, line];
}

interface Row {
  readonly name: string;
  readonly value: string;
  readonly unit: string;
  readonly interval: string;
  readonly basis: Basis;
}

function row(key: QuantityKey, quantity: Quantity): Row {
  const text = quantityText(quantity);
  const mark = isUnmeasured(quantity.basis) && quantity.value !== null ? '~ ' : '';
  return {
    name: QUANTITY_FACTS[key].label,
    value: `${mark}${text.value}`,
    unit: text.unit,
    interval: text.interval,
    basis: quantity.basis,
  };
}

function degrees(value: number, positive: string, negative: string): string {
  return `${Math.abs(value).toFixed(1)}° ${value < 0 ? negative : positive}`;
}

/** Heading of a region: position, foreshortening, patch. */
function heading(figures: RegionFigures): string {
  const { center, patch } = figures;
  const place = [
    degrees(center.stonyhurstLatitudeDeg, 'N', 'S'),
    degrees(center.stonyhurstLongitudeDeg, 'W', 'E'),
    `Carrington ${center.carringtonLongitudeDeg.toFixed(1)}°`,
    `mu ${center.mu.toFixed(3)}`,
  ].join(', ');
  const size = `${patch.nx} x ${patch.ny} pixels of ${patch.pixelMm.toPrecision(3)} Mm`;
  return `${place}; patch ${size}`;
}

/** What stands around the table. */
export interface SummaryContext {
  readonly source: string;
  readonly observed: string | null;
  readonly noise: string;
  readonly files: readonly string[];
}

/**
 * The quick look of one region for a terminal: aligned figures with unit, 16/84 % interval and basis; a
 * tilde marks what rests on a prior or an assumption. At most one screen.
 */
export function regionSummary(
  figures: RegionFigures,
  context: SummaryContext,
  colour: boolean,
): string {
  const ink = paint(colour);
  const rows = QUANTITY_KEYS.filter((key) => !LEFT_OUT.has(key)).flatMap((key) => {
    const quantity = figures.quantities[key];
    return quantity ? [row(key, quantity)] : [];
  });
  const width = (part: keyof Row) => Math.max(0, ...rows.map((line) => line[part].length));
  const [name, value, unit, interval] = (['name', 'value', 'unit', 'interval'] as const).map(width);
  const head = `${'figure'.padEnd(name)}  ${'value'.padStart(value)} ${''.padEnd(unit)}  ${'interval (16 to 84 %)'.padEnd(interval)}  basis`;
  const body = rows.map((line) => {
    const shown = line.value.padStart(value);
    const text = `${line.name.padEnd(name)}  ${isUnmeasured(line.basis) ? ink.unsure(shown) : ink.strong(shown)} ${line.unit.padEnd(unit)}`;
    return `${text}  ${line.interval.padEnd(Math.max(interval, 21))}  ${isUnmeasured(line.basis) ? ink.unsure(line.basis) : line.basis}`;
  });
  const notes = ['~ not measured: rests on a prior or on an assumption', ...figures.flags].flatMap(
    (flag) => wrap(`- ${flag}`, WIDTH),
  );
  return [
    ink.strong(
      `${figures.id}  ${context.source}  ${context.observed?.replace('.000Z', 'Z') ?? 'time not known'}`,
    ),
    `${heading(figures)}; noise ${context.noise}`,
    '',
    ink.quiet(head),
    ...body,
    '',
    ...notes,
    ...context.files.map((file) => ink.quiet(`written: ${file}`)),
    '',
  ].join('\n');
}
