import { type ErrorContext, FitsError } from '../errors.js';
import { compressedImageHeader } from './compressed-header.js';
import { booleanAt, type FitsHeader, numberAt, stringAt } from './header.js';

export type HduKind = 'image' | 'compressed-image' | 'table' | 'empty' | 'other';

/** One header and data unit. For a compressed image all but `tableHeader` is the image's own view. */
export interface FitsHdu {
  /** 0 for the primary HDU. */
  readonly index: number;
  readonly kind: HduKind;
  /** EXTNAME, or an empty string. */
  readonly name: string;
  readonly header: FitsHeader;
  /** Axis lengths, NAXIS1 first; for compressed images those of the picture (ZNAXISn). */
  readonly shape: readonly number[];
  /** BITPIX, for compressed images ZBITPIX. */
  readonly bitpix: number;
  /** ZCMPTYPE of a compressed image. */
  readonly compression?: string;
  readonly dataOffset: number;
  /** Bytes the header asks for, without padding; may be more than the file has. */
  readonly dataLength: number;
  /** Of a compressed image: the header of the binary table that holds it. */
  readonly tableHeader?: FitsHeader;
}

const BITPIX_VALUES = [8, 16, 32, 64, -32, -64];
const MAX_AXES = 999; // Standard 4.0, 4.4.1.1

/** Describes the HDU of `header`; throws FitsError when its mandatory keywords make no sense. */
export function describeHdu(
  header: FitsHeader,
  index: number,
  dataOffset: number,
  context: ErrorContext,
): FitsHdu {
  const where = { ...context, hdu: index };
  const bitpix = bitpixAt(header, 'BITPIX', where);
  const shape = axesAt(header, 'NAXIS', where);
  const dataLength = dataBytes(header, bitpix, shape, index, where);
  const name = stringAt(header, 'EXTNAME') ?? '';
  const base = { index, name, header, shape, bitpix, dataOffset, dataLength };
  const kind = kindOf(header, shape, index);
  if (kind !== 'compressed-image') return { ...base, kind };
  const view = compressedImageHeader(header, index);
  return {
    ...base,
    kind,
    name: stringAt(view, 'EXTNAME') ?? '',
    header: view,
    shape: axesAt(header, 'ZNAXIS', where),
    bitpix: bitpixAt(header, 'ZBITPIX', where),
    compression: compressionAt(header, where),
    tableHeader: header,
  };
}

function kindOf(header: FitsHeader, shape: readonly number[], index: number): HduKind {
  const extension = index === 0 ? 'IMAGE' : (stringAt(header, 'XTENSION') ?? '').toUpperCase();
  if (extension === 'IMAGE' || extension === 'IUEIMAGE') {
    if (shape.length > 0 && shape[0] === 0 && booleanAt(header, 'GROUPS') === true) return 'other';
    return shape.length === 0 || shape.includes(0) ? 'empty' : 'image';
  }
  if (extension === 'BINTABLE' || extension === 'A3DTABLE') {
    return booleanAt(header, 'ZIMAGE') === true ? 'compressed-image' : 'table';
  }
  return extension === 'TABLE' ? 'table' : 'other';
}

function bitpixAt(header: FitsHeader, keyword: string, where: ErrorContext): number {
  const bitpix = numberAt(header, keyword);
  if (bitpix !== undefined && BITPIX_VALUES.includes(bitpix)) return bitpix;
  const found = bitpix === undefined ? `no number at ${keyword}` : `${keyword} is ${bitpix}`;
  throw new FitsError(`${found}, one of ${BITPIX_VALUES.join(', ')} wanted`, { ...where, keyword });
}

function axesAt(header: FitsHeader, keyword: string, where: ErrorContext): number[] {
  const count = countAt(header, keyword, where);
  if (count > MAX_AXES) {
    throw new FitsError(`${keyword} is ${count}, at most ${MAX_AXES} wanted`, {
      ...where,
      keyword,
    });
  }
  return Array.from({ length: count }, (_, axis) =>
    countAt(header, `${keyword}${axis + 1}`, where),
  );
}

function countAt(
  header: FitsHeader,
  keyword: string,
  where: ErrorContext,
  missing?: number,
): number {
  const value = numberAt(header, keyword) ?? missing;
  if (value !== undefined && Number.isSafeInteger(value) && value >= 0) return value;
  const found = value === undefined ? `no number at ${keyword}` : `${keyword} is ${value}`;
  throw new FitsError(`${found}, a whole number from 0 wanted`, { ...where, keyword });
}

function compressionAt(header: FitsHeader, where: ErrorContext): string {
  const name = stringAt(header, 'ZCMPTYPE')?.toUpperCase();
  if (name === undefined) {
    throw new FitsError('compressed image without ZCMPTYPE', { ...where, keyword: 'ZCMPTYPE' });
  }
  return name === 'RICE_ONE' ? 'RICE_1' : name; // RICE_ONE is an allowed alias in old files
}

/** Standard 4.0, equations 1, 2 and 4: |BITPIX| / 8 x GCOUNT x (PCOUNT + the product of the axes). */
function dataBytes(
  header: FitsHeader,
  bitpix: number,
  shape: readonly number[],
  index: number,
  where: ErrorContext,
): number {
  if (shape.length === 0) return 0;
  const groups = index === 0 && shape[0] === 0 && booleanAt(header, 'GROUPS') === true;
  const counted = index > 0 || groups;
  const extra = counted ? countAt(header, 'PCOUNT', where, 0) : 0;
  const times = counted ? countAt(header, 'GCOUNT', where, 1) : 1;
  const elements = (groups ? shape.slice(1) : shape).reduce(
    (product, length) => product * length,
    1,
  );
  if (times === 0) return 0; // the product below may be infinite
  return (Math.abs(bitpix) / 8) * times * (extra + elements);
}
