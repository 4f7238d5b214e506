import { type ErrorContext, FitsError } from '../errors.js';
import { type FitsHeader, numberAt, stringAt } from './header.js';

/** One column of a binary table (Standard 4.0, 7.3). */
export interface TableColumn {
  readonly name: string;
  /** Bytes from the start of a row. */
  readonly offset: number;
  readonly repeat: number;
  /** TFORM type letter; P and Q are descriptors of variable-length arrays. */
  readonly type: string;
  /** Type of the elements that a descriptor points at, else an empty string. */
  readonly elementType: string;
}

/** The parts of a binary table that lie in a file. */
export interface BinaryTable {
  readonly bytes: Uint8Array;
  readonly view: DataView;
  readonly columns: ReadonlyMap<string, TableColumn>;
  readonly rowBytes: number;
  readonly rows: number;
  readonly dataOffset: number;
  /** Where the variable-length arrays begin and end. */
  readonly heapStart: number;
  readonly heapEnd: number;
  readonly context: ErrorContext;
}

/** Bytes [start, end) of a variable-length array of `count` elements. */
export interface ArrayExtent {
  readonly start: number;
  readonly end: number;
  readonly count: number;
}

const ELEMENT_BYTES: Readonly<Record<string, number>> = {
  L: 1, X: 1, B: 1, A: 1, I: 2, J: 4, E: 4, K: 8, D: 8, C: 8, M: 16, P: 8, Q: 16,
}; // biome-ignore format: one line reads best
const MAX_FIELDS = 999;

/** Finds columns and heap; throws FitsError when they do not fit in the row or the data. */
export function openTable(
  bytes: Uint8Array,
  header: FitsHeader,
  dataOffset: number,
  dataLength: number,
  context: ErrorContext,
): BinaryTable {
  const rowBytes = numberAt(header, 'NAXIS1') ?? 0;
  const rows = numberAt(header, 'NAXIS2') ?? 0;
  const heap = numberAt(header, 'THEAP') ?? rowBytes * rows;
  if (!Number.isSafeInteger(heap) || heap < rowBytes * rows || heap > dataLength) {
    throw new FitsError(`THEAP is ${heap}, ${rowBytes * rows} to ${dataLength} wanted`, context);
  }
  return {
    bytes,
    view: new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength),
    columns: readColumns(header, rowBytes, context),
    rowBytes,
    rows,
    dataOffset,
    heapStart: dataOffset + heap,
    heapEnd: dataOffset + dataLength,
    context,
  };
}

function readColumns(
  header: FitsHeader,
  rowBytes: number,
  context: ErrorContext,
): Map<string, TableColumn> {
  const fields = numberAt(header, 'TFIELDS') ?? 0;
  if (!Number.isInteger(fields) || fields < 0 || fields > MAX_FIELDS) {
    throw new FitsError(`TFIELDS is ${fields}, 0 to ${MAX_FIELDS} wanted`, context);
  }
  const columns = new Map<string, TableColumn>();
  let offset = 0;
  for (let field = 1; field <= fields; field++) {
    const form = stringAt(header, `TFORM${field}`) ?? '';
    const match = /^(\d{0,9})([LXBIJKAEDCMPQ])([A-Z]?)/.exec(form.toUpperCase());
    if (match === null) {
      throw new FitsError(`TFORM${field} is '${form}', no format of a binary table`, context);
    }
    const repeat = match[1] === '' ? 1 : Number(match[1]);
    const type = match[2];
    const name = (stringAt(header, `TTYPE${field}`) ?? '').toUpperCase();
    if (!columns.has(name)) {
      columns.set(name, { name, offset, repeat, type, elementType: match[3] });
    }
    offset += type === 'X' ? Math.ceil(repeat / 8) : repeat * ELEMENT_BYTES[type];
  }
  if (offset > rowBytes) {
    throw new FitsError(`columns take ${offset} bytes of rows that have ${rowBytes}`, context);
  }
  return columns;
}

/**
 * The extent of the variable-length array in `column` of `row` (from 0); throws FitsError when it
 * is not all inside the heap. The caller has checked that the row is there.
 */
export function arrayExtent(table: BinaryTable, column: TableColumn, row: number): ArrayExtent {
  const at = table.dataOffset + row * table.rowBytes + column.offset;
  const wide = column.type === 'Q';
  const count = wide ? readUint64(table.view, at) : table.view.getUint32(at);
  const offset = wide ? readUint64(table.view, at + 8) : table.view.getUint32(at + 4);
  const width = ELEMENT_BYTES[column.elementType];
  if (count === 0 || column.repeat === 0) return { start: 0, end: 0, count: 0 };
  const start = table.heapStart + offset;
  const end = start + count * width;
  if (!(end <= table.heapEnd)) {
    const held = table.heapEnd - table.heapStart;
    throw new FitsError(
      `row ${row + 1} of column ${column.name} points at ${count} elements from byte ${offset}, the heap has ${held} bytes`,
      table.context,
    );
  }
  return { start, end, count };
}

function readUint64(view: DataView, at: number): number {
  return view.getUint32(at) * 2 ** 32 + view.getUint32(at + 4);
}

/** The single number in `column` of `row`; throws FitsError when the column holds none. */
export function numberInRow(table: BinaryTable, column: TableColumn, row: number): number {
  const at = table.dataOffset + row * table.rowBytes + column.offset;
  const { view } = table;
  if (column.repeat > 0) {
    if (column.type === 'D') return view.getFloat64(at);
    if (column.type === 'E') return view.getFloat32(at);
    if (column.type === 'J') return view.getInt32(at);
    if (column.type === 'I') return view.getInt16(at);
    if (column.type === 'B') return view.getUint8(at);
    if (column.type === 'K') return Number(view.getBigInt64(at));
  }
  throw new FitsError(`column ${column.name} holds no numbers (${column.type})`, table.context);
}
