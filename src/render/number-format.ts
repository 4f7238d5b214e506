import type { Quantity } from '../figures/quantity.js';

/** A figure ready for a table: value and interval share the power of ten kept in `unit`. */
export interface QuantityText {
  /** "3.21", or "—" when the figure cannot be had. */
  readonly value: string;
  /** "3.05 to 3.40", empty without an interval. */
  readonly interval: string;
  /** "× 10²⁴ J", "Mm", or empty for a pure number. */
  readonly unit: string;
}

const SUPERSCRIPTS: Readonly<Record<string, string>> = {
  '0': '⁰',
  '1': '¹',
  '2': '²',
  '3': '³',
  '4': '⁴',
  '5': '⁵',
  '6': '⁶',
  '7': '⁷',
  '8': '⁸',
  '9': '⁹',
  '-': '⁻',
};

/** Writes an integer in superscripts: 24 -> "²⁴", -3 -> "⁻³". */
export function superscript(integer: number): string {
  return [...String(integer)].map((sign) => SUPERSCRIPTS[sign] ?? sign).join('');
}

/** Typeset form of a unit as stored: "mA/m^2" -> "mA/m²", "1/Mm" -> "Mm⁻¹", "1" -> "". */
export function unitText(unit: string): string {
  if (unit === '1' || unit === '') return '';
  const inverse = /^1\/([A-Za-z]+)$/.exec(unit);
  if (inverse) return `${inverse[1]}⁻¹`;
  return unit.replace(/\^(-?\d+)/g, (_, power: string) => superscript(Number(power)));
}

/**
 * Formats a figure with its interval. The power of ten is that of the value (of half the interval, for a value
 * a hundred times smaller), a multiple of 3, and is left out for sizes from 0.001 to 99 999. The last digit kept is the second significant digit of half the interval,
 * within 2 to 4 significant digits of the value (3 without an interval); value and interval are
 * rounded at the same digit; an end of the interval that is not zero is not rounded to it while
 * four digits allow. Null or non-finite values give "—".
 */
export function quantityText(quantity: Quantity): QuantityText {
  const { value, low, high } = quantity;
  const unit = unitText(quantity.unit);
  if (value === null || !Number.isFinite(value)) return { value: '—', interval: '', unit: '' };
  const bounded =
    low !== null && high !== null && Number.isFinite(low) && Number.isFinite(high)
      ? { low, high }
      : undefined;
  const halfWidth = bounded ? (bounded.high - bounded.low) / 2 : 0;
  const isLost = Math.abs(value) < halfWidth / 100;
  const power = sharedPower(isLost ? halfWidth : value);
  const scale = 10 ** power;
  const ends = bounded ?? { low: value, high: value };
  const decimals = decimalPlaces(value / scale, ends.low / scale, ends.high / scale);
  const write = (number: number) => fixed(number / scale, decimals);
  return {
    value: write(value),
    interval: bounded ? `${write(bounded.low)} to ${write(bounded.high)}` : '',
    unit: [power === 0 ? '' : `× 10${superscript(power)}`, unit].filter(Boolean).join(' '),
  };
}

/** One number with its unit at `digits` significant digits: 1.234e24, "J" -> "1.23 × 10²⁴ J". */
export function numberText(value: number, unit: string, digits = 3): string {
  if (!Number.isFinite(value)) return '—';
  const power = sharedPower(value);
  const scaled = value / 10 ** power;
  const number = fixed(scaled, value === 0 ? 0 : digits - 1 - exponent(scaled));
  const scale = power === 0 ? '' : `× 10${superscript(power)}`;
  return [number, scale, unitText(unit)].filter(Boolean).join(' ');
}

/** Shortest plain form for axis labels and levels: 1500 -> "1500", -0.5 -> "−0.5". */
export function plainNumber(value: number): string {
  return withMinus(String(Number(value.toPrecision(6))));
}

function sharedPower(value: number): number {
  const size = Math.abs(value);
  if (size === 0 || (size >= 1e-3 && size < 99_999.5)) return 0;
  return 3 * Math.floor(exponent(size) / 3);
}

/** Power of ten of the leading digit. */
function exponent(value: number): number {
  return value === 0 ? 0 : Number(Math.abs(value).toExponential(9).split('e')[1]);
}

function decimalPlaces(value: number, low: number, high: number): number {
  const halfWidth = (high - low) / 2;
  if (!(halfWidth > 0)) return value === 0 ? 0 : 2 - exponent(value);
  const byInterval = 1 - exponent(halfWidth);
  const spansZero = low <= 0 && high >= 0;
  // A value lost in its own interval (net flux near zero) is cut where the interval says.
  if (value === 0 || (spansZero && Math.abs(value) < halfWidth)) return byInterval;
  const least = 1 - exponent(value);
  // The end nearer to zero must not round to zero, which would claim too much.
  const byNearEnd = spansZero ? least : -exponent(Math.min(Math.abs(low), Math.abs(high)));
  return Math.min(3 - exponent(value), Math.max(byInterval, least, byNearEnd));
}

/** Rounds at 10^-decimals (may be negative) and writes without an exponent, thousands apart. */
function fixed(value: number, decimals: number): string {
  const cut = Math.max(-15, Math.min(15, decimals));
  const rounded = cut >= 0 ? value : Math.round(value * 10 ** cut) / 10 ** cut;
  const text = rounded.toFixed(Math.max(0, cut));
  if (text.includes('e')) return withMinus(text);
  const [whole, fraction] = text.replace('-', '').split('.');
  const spaced = whole.length > 4 ? whole.replace(/\B(?=(\d{3})+$)/g, '\u2009') : whole;
  const body = fraction === undefined ? spaced : `${spaced}.${fraction}`;
  return text.startsWith('-') && /[1-9]/.test(body) ? `−${body}` : body;
}

function withMinus(text: string): string {
  return text.replaceAll('-', '−');
}
