import { encodeChecksum, sumWords } from './checksum.js';
import { BLOCK_BYTES, type Card } from './header.js';
import { formatCard } from './write-card.js';

export type WritableValues = Float32Array | Float64Array | Int16Array | Int32Array | Uint8Array;

/** One image to write. `values` are stored as they are: scaling keywords only describe them. */
export interface WritableHdu {
  readonly values: WritableValues;
  /** Axis lengths, NAXIS1 first. */
  readonly shape: readonly number[];
  readonly cards: readonly Card[];
  readonly bscale?: number;
  readonly bzero?: number;
  /** Stored integer that means missing; integer images only. In floating point NaN is missing. */
  readonly blank?: number;
}

// Written from the data themselves; cards of these keywords are left out of `cards`.
const OWN_CARD =
  /^(SIMPLE|XTENSION|BITPIX|NAXIS\d*|EXTEND|PCOUNT|GCOUNT|GROUPS|BSCALE|BZERO|BLANK|CHECKSUM|DATASUM|END|CONTINUE)$/;

/**
 * A FITS file of a primary image and IMAGE extensions (Standard 4.0), each with CHECKSUM and DATASUM.
 * Throws RangeError when a shape does not fit its values, or `blank` is given for floating point.
 */
export function writeFits(hdus: readonly WritableHdu[]): Uint8Array {
  if (hdus.length === 0) throw new RangeError('no HDU to write');
  const parts = hdus.flatMap((hdu, index) => writeHdu(hdu, index, hdus.length));
  const whole = new Uint8Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}

function writeHdu(hdu: WritableHdu, index: number, count: number): [Uint8Array, Uint8Array] {
  const data = bigEndian(hdu.values);
  const dataSum = sumWords(data);
  const cards = [...structureCards(hdu, index, count), ...scalingCards(hdu)];
  cards.push(...hdu.cards.filter(({ keyword }) => !OWN_CARD.test(keyword.toUpperCase())));
  const before = cards.flatMap(formatCard).join('');
  const withChecksum = (checksum: string) =>
    headerBytes(before + sumCards(checksum, dataSum).flatMap(formatCard).join(''));
  const sum = sumWords(withChecksum('0'.repeat(16)), dataSum);
  return [withChecksum(encodeChecksum(sum)), data];
}

function card(keyword: string, value: Card['value'], comment: string): Card {
  return { keyword, value, comment };
}

function structureCards(hdu: WritableHdu, index: number, count: number): Card[] {
  const { values, shape } = hdu;
  const pixels = shape.reduce((product, length) => product * length, 1);
  if (shape.length === 0 || pixels !== values.length) {
    throw new RangeError(`${values.length} values for a shape of ${shape.join(' x ')}`);
  }
  const cards = [
    index === 0
      ? card('SIMPLE', true, 'conforms to the FITS standard')
      : card('XTENSION', 'IMAGE', 'image extension'),
    card('BITPIX', bitpixOf(values), 'type of the stored numbers'),
    card('NAXIS', shape.length, 'number of axes'),
    ...shape.map((length, axis) => card(`NAXIS${axis + 1}`, length, '')),
  ];
  if (index > 0) cards.push(card('PCOUNT', 0, ''), card('GCOUNT', 1, ''));
  else if (count > 1) cards.push(card('EXTEND', true, 'extensions follow'));
  return cards;
}

function scalingCards({ values, bscale, bzero, blank }: WritableHdu): Card[] {
  const cards: Card[] = [];
  if (bscale !== undefined)
    cards.push(card('BSCALE', bscale, 'physical = BZERO + BSCALE * stored'));
  if (bzero !== undefined) cards.push(card('BZERO', bzero, ''));
  if (blank !== undefined) {
    if (bitpixOf(values) < 0) throw new RangeError('BLANK is for images of integers only');
    cards.push(card('BLANK', blank, 'stored value of missing pixels'));
  }
  return cards;
}

function sumCards(checksum: string, dataSum: number): Card[] {
  return [
    card('CHECKSUM', checksum, 'HDU checksum'),
    card('DATASUM', String(dataSum), 'data unit checksum'),
  ];
}

function headerBytes(cards: string): Uint8Array {
  const text = `${cards}END`;
  const padded = text.padEnd(Math.ceil(text.length / BLOCK_BYTES) * BLOCK_BYTES);
  return new Uint8Array(Buffer.from(padded, 'latin1'));
}

function bitpixOf(values: WritableValues): number {
  if (values instanceof Float32Array) return -32;
  if (values instanceof Float64Array) return -64;
  return values.BYTES_PER_ELEMENT * 8;
}

/** The values as big-endian bytes, filled up with zeros to whole blocks. */
function bigEndian(values: WritableValues): Uint8Array {
  const length = Math.ceil(values.byteLength / BLOCK_BYTES) * BLOCK_BYTES;
  const bytes = new Uint8Array(length);
  const view = new DataView(bytes.buffer);
  if (values instanceof Float32Array) {
    for (let i = 0; i < values.length; i++) view.setFloat32(4 * i, values[i]);
  } else if (values instanceof Float64Array) {
    for (let i = 0; i < values.length; i++) view.setFloat64(8 * i, values[i]);
  } else if (values instanceof Int32Array) {
    for (let i = 0; i < values.length; i++) view.setInt32(4 * i, values[i]);
  } else if (values instanceof Int16Array) {
    for (let i = 0; i < values.length; i++) view.setInt16(2 * i, values[i]);
  } else bytes.set(values);
  return bytes;
}
