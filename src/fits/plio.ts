// PLIO_1 (Standard 4.0, 10.4.3): run-length coding of masks, in 16-bit words of a 4-bit operation and
// 12 bits of data. A "high value" is kept and runs of it, and of zeros, are written.

// 0 is a run of zeros
const SET_HIGH = 1;
const RAISE_HIGH = 2;
const LOWER_HIGH = 3;
const HIGHS = 4;
const ZEROS_THEN_HIGH = 5;
const RAISE_AND_WRITE = 6;
const LOWER_AND_WRITE = 7;

/**
 * Decodes `words` 16-bit words from byte `start` into the first `count` values of `out`. Pixels after
 * the last run are zero. Throws RangeError when the list is longer than its bytes, runs past the
 * tile or holds an unknown operation.
 */
export function decodePlio(
  view: DataView,
  start: number,
  words: number,
  count: number,
  out: Int32Array,
): void {
  const { first, end } = listExtent(view, start, words);
  let pixel = 0;
  let high = 1;
  for (let at = first; at < end; at++) {
    const word = view.getUint16(start + 2 * at);
    const operation = word >> 12;
    const data = word & 0xfff;
    if (operation === SET_HIGH) {
      at++;
      if (at >= end) throw new RangeError('ends inside an instruction');
      high = (view.getUint16(start + 2 * at) << 12) | data;
    } else if (operation === RAISE_HIGH) high += data;
    else if (operation === LOWER_HIGH) high -= data;
    else {
      const write = operation === RAISE_AND_WRITE || operation === LOWER_AND_WRITE;
      const run = write ? 1 : data;
      if (operation > LOWER_AND_WRITE)
        throw new RangeError(`holds an unknown operation ${operation}`);
      if (pixel + run > count) {
        throw new RangeError(`claims at least ${pixel + run} pixels, the tile has ${count}`);
      }
      if (operation === RAISE_AND_WRITE) high += data;
      if (operation === LOWER_AND_WRITE) high -= data;
      out.fill(write || operation === HIGHS ? high : 0, pixel, pixel + run);
      pixel += run;
      if (operation === ZEROS_THEN_HIGH && run > 0) out[pixel - 1] = high;
    }
  }
  out.fill(0, pixel, count);
}

/** Words [first, end) of the instructions: the header has its own length and that of the list. */
function listExtent(view: DataView, start: number, words: number): { first: number; end: number } {
  if (words < 3) throw new RangeError(`has ${words} words, no room for its header`);
  const oldLength = view.getInt16(start + 4);
  if (oldLength <= 0 && words < 5)
    throw new RangeError(`has ${words} words, no room for its header`);
  const end =
    oldLength > 0 ? oldLength : (view.getUint16(start + 8) << 15) + view.getUint16(start + 6);
  const first = oldLength > 0 ? 3 : view.getInt16(start + 2);
  if (end > words || first < 3) {
    throw new RangeError(`claims words ${first} to ${end}, has ${words}`);
  }
  return { first, end };
}
