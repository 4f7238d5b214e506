// The checksum convention of the standard (4.0, 4.4.2.7 and appendix J): the ones-complement sum of an
// HDU's big-endian 32-bit words, so encoded in CHECKSUM that the whole HDU sums to minus zero.

const WORD = 2 ** 32;

/** Adds the 32-bit words of `bytes` (a whole number of them) to `start`, carrying around the end. */
export function sumWords(bytes: Uint8Array, start = 0): number {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  let sum = start;
  for (let at = 0; at + 4 <= bytes.length; at += 4) {
    sum += view.getUint32(at);
    if (sum > 2 ** 52) sum = carryAround(sum);
  }
  return carryAround(sum);
}

function carryAround(sum: number): number {
  let folded = sum;
  while (folded >= WORD) folded = (folded % WORD) + Math.floor(folded / WORD);
  return folded;
}

/** The 16 characters that, put in place of sixteen `0`, add the complement of `sum` to the HDU's sum. */
export function encodeChecksum(sum: number): string {
  const value = WORD - 1 - sum;
  const characters = new Uint8Array(16);
  for (let byte = 0; byte < 4; byte++) {
    const part = Math.floor(value / 2 ** (24 - 8 * byte)) & 0xff;
    const quarters = spread(part);
    // the string stands one byte off the word boundary: rotated right by one
    quarters.forEach((code, quarter) => {
      characters[(4 * quarter + byte + 1) % 16] = code;
    });
  }
  return String.fromCharCode(...characters);
}

/** Four codes from `0` on that sum to `part` + 4 x 48, all of them digits or letters. */
function spread(part: number): number[] {
  const quarter = 48 + (part >> 2);
  const codes = [quarter + (part & 3), quarter, quarter, quarter];
  while (codes.some(isPunctuation)) {
    for (let pair = 0; pair < 4; pair += 2) {
      if (!isPunctuation(codes[pair]) && !isPunctuation(codes[pair + 1])) continue;
      codes[pair]++;
      codes[pair + 1]--;
    }
  }
  return codes;
}

function isPunctuation(code: number): boolean {
  return (code >= 0x3a && code <= 0x40) || (code >= 0x5b && code <= 0x60);
}
