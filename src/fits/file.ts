import { readFileSync, statSync } from 'node:fs';
import { gunzipSync } from 'node:zlib';
import { FitsError } from '../errors.js';
import { describeHdu, type FitsHdu } from './hdu.js';
import { BLOCK_BYTES, booleanAt, type FitsHeader, parseHeader } from './header.js';
import { DEFAULT_LIMITS, type FitsLimits } from './limits.js';
import { isGzip, looksLike } from './recognise.js';

export interface FitsFile {
  readonly name: string;
  /** The file's bytes, after gunzip. */
  readonly bytes: Uint8Array;
  readonly hdus: readonly FitsHdu[];
  readonly warnings: readonly string[];
  readonly limits: FitsLimits;
}

/**
 * Reads a FITS file from disk, gunzipping it when its content is gzip. Throws FitsError when there is
 * no such file, it is a directory, unreadable, larger than `limits.maxBytes` or not FITS.
 */
export function readFitsFile(path: string, limits: FitsLimits = DEFAULT_LIMITS): FitsFile {
  return parseFits(readBytes(path, limits), path, limits);
}

function readBytes(path: string, limits: FitsLimits): Uint8Array {
  try {
    const status = statSync(path);
    if (status.isDirectory())
      throw new FitsError('is a directory, a FITS file wanted', { file: path });
    if (!status.isFile()) throw new FitsError('is not a regular file', { file: path });
    if (status.size > limits.maxBytes) throw tooLarge(path, `has ${status.size} bytes`, limits);
    return readFileSync(path);
  } catch (error) {
    if (error instanceof FitsError) throw error;
    const code = (error as NodeJS.ErrnoException).code;
    const reasons: Record<string, string> = {
      ENOENT: 'no such file',
      ENOTDIR: 'no such file',
      EACCES: 'may not be read (permission denied)',
      EPERM: 'may not be read (permission denied)',
    };
    throw new FitsError(reasons[code ?? ''] ?? `cannot be read (${code})`, { file: path }, error);
  }
}

function tooLarge(name: string, found: string, limits: FitsLimits): FitsError {
  return new FitsError(`${found}, at most ${limits.maxBytes} are read`, { file: name });
}

/**
 * Finds the HDUs in `bytes` (gzip content is inflated, to `limits.maxBytes` at most). Only headers
 * are looked at: an HDU whose data is cut short is listed, with a warning, and refused by readImage.
 * Throws FitsError when the bytes are not FITS, or an HDU is damaged and no image comes before it.
 */
export function parseFits(
  bytes: Uint8Array,
  name: string,
  limits: FitsLimits = DEFAULT_LIMITS,
): FitsFile {
  const content = isGzip(bytes) ? inflate(bytes, name, limits) : bytes;
  if (!startsWith(content, 0, 'SIMPLE ')) {
    const wrapped = content === bytes ? '' : 'a gzip of ';
    throw new FitsError(
      `is not FITS: looks like ${wrapped}${looksLike(content)}, a file that starts with SIMPLE wanted`,
      { file: name },
    );
  }
  const { hdus, warnings } = findHdus(content, name);
  return { name, bytes: content, hdus, warnings, limits };
}

function inflate(bytes: Uint8Array, name: string, limits: FitsLimits): Uint8Array {
  try {
    return gunzipSync(bytes, { maxOutputLength: limits.maxBytes });
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code;
    if (code === 'ERR_BUFFER_TOO_LARGE') {
      throw tooLarge(name, `gunzips to more than ${limits.maxBytes} bytes`, limits);
    }
    const reason =
      code === 'Z_BUF_ERROR' ? 'is cut short' : `is damaged (${(error as Error).message})`;
    throw new FitsError(`the gzip stream ${reason}`, { file: name }, error);
  }
}

function startsWith(bytes: Uint8Array, offset: number, text: string): boolean {
  for (let i = 0; i < text.length; i++) {
    if (bytes[offset + i] !== text.charCodeAt(i)) return false;
  }
  return true;
}

/** More HDUs than this are not looked for; each costs at least one block of 2880 bytes. */
const MAX_HDUS = 4096;

function findHdus(bytes: Uint8Array, name: string): { hdus: FitsHdu[]; warnings: string[] } {
  const hdus: FitsHdu[] = [];
  const warnings: string[] = [];
  let offset = 0;
  while (offset < bytes.length) {
    const index = hdus.length;
    if (index === MAX_HDUS) {
      warnings.push(`more than ${MAX_HDUS} HDUs, the rest is not looked at`);
      break;
    }
    if (index > 0 && !startsWith(bytes, offset, 'XTENSION')) {
      warnings.push(
        `${bytes.length - offset} bytes after HDU ${index - 1} are no HDU, not looked at`,
      );
      break;
    }
    const hdu = readHdu(bytes, offset, index, name, hdus, warnings);
    if (hdu === undefined) break;
    hdus.push(hdu);
    warnings.push(...headerWarnings(hdu.tableHeader ?? hdu.header, index));
    const end = hdu.dataOffset + hdu.dataLength;
    const shortage = describeShortage(hdu, bytes.length);
    if (shortage !== undefined) warnings.push(`HDU ${index}: ${shortage}`);
    offset = Math.ceil(end / BLOCK_BYTES) * BLOCK_BYTES;
    if (shortage === undefined && bytes.length < offset) {
      warnings.push(`HDU ${index}: the last block is not filled up to ${BLOCK_BYTES} bytes`);
    }
  }
  return { hdus, warnings };
}

function readHdu(
  bytes: Uint8Array,
  offset: number,
  index: number,
  name: string,
  before: readonly FitsHdu[],
  warnings: string[],
): FitsHdu | undefined {
  const context = { file: name, hdu: index };
  try {
    const { header, nextOffset } = parseHeader(bytes, offset, context);
    return describeHdu(header, index, nextOffset, context);
  } catch (error) {
    if (!(error instanceof FitsError) || !before.some(isImage)) throw error;
    warnings.push(`HDU ${index} and what follows is left out: ${error.message}`);
    return undefined;
  }
}

function headerWarnings(header: FitsHeader, index: number): string[] {
  const own = header.warnings.map((warning) => `HDU ${index}: ${warning}`);
  if (index > 0 || booleanAt(header, 'SIMPLE') === true) return own;
  return [...own, 'HDU 0: SIMPLE is not T, the file says that it may not follow the standard'];
}

/** Says how many of how many data bytes are there, or undefined when all are. */
export function describeShortage(hdu: FitsHdu, fileBytes: number): string | undefined {
  const present = Math.max(0, fileBytes - hdu.dataOffset);
  if (present >= hdu.dataLength) return undefined;
  return `the file is cut short: ${present} of ${hdu.dataLength} data bytes are there`;
}

function isImage(hdu: FitsHdu): boolean {
  if (hdu.kind !== 'image' && hdu.kind !== 'compressed-image') return false;
  return hdu.shape.filter((length) => length > 1).length >= 2;
}

/** The HDUs that may hold a map: images, compressed or not, with two axes or more of several pixels. */
export function imageHdus(file: FitsFile): FitsHdu[] {
  return file.hdus.filter(isImage);
}
