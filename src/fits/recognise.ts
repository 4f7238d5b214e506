// First bytes of what people hand over instead of FITS; from the formats' own specifications.
const SIGNATURES: readonly (readonly [string, readonly number[]])[] = [
  ['a gzip file', [0x1f, 0x8b]],
  ['a PNG picture', [0x89, 0x50, 0x4e, 0x47]],
  ['a JPEG picture', [0xff, 0xd8, 0xff]],
  ['a JPEG 2000 picture', [0x00, 0x00, 0x00, 0x0c, 0x6a, 0x50]],
  ['a GIF picture', [0x47, 0x49, 0x46, 0x38]],
  ['a TIFF picture', [0x49, 0x49, 0x2a, 0x00]],
  ['a TIFF picture', [0x4d, 0x4d, 0x00, 0x2a]],
  ['a PDF document', [0x25, 0x50, 0x44, 0x46]],
  ['a zip archive', [0x50, 0x4b, 0x03, 0x04]],
  ['an HDF5 or netCDF-4 file', [0x89, 0x48, 0x44, 0x46]],
  ['a netCDF file', [0x43, 0x44, 0x46]],
  ['a bzip2 file', [0x42, 0x5a, 0x68]],
  ['an xz file', [0xfd, 0x37, 0x7a, 0x58, 0x5a]],
  ['a Zstandard file', [0x28, 0xb5, 0x2f, 0xfd]],
  ['a compress (.Z) file', [0x1f, 0x9d]],
  ['a NumPy array', [0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59]],
];

export function isGzip(bytes: Uint8Array): boolean {
  return bytes[0] === 0x1f && bytes[1] === 0x8b;
}

/** Says in a few words what `bytes` look like, for the message that refuses them. */
export function looksLike(bytes: Uint8Array): string {
  if (bytes.length === 0) return 'an empty file';
  for (const [name, signature] of SIGNATURES) {
    if (signature.every((byte, index) => bytes[index] === byte)) return name;
  }
  const start = bytes.subarray(0, 512);
  if (start.every((byte) => byte === 0)) return 'a file of zero bytes';
  if (!start.every((byte) => (byte >= 0x20 && byte < 0x7f) || (byte >= 9 && byte <= 13))) {
    return 'binary data of an unknown kind';
  }
  const text = String.fromCharCode(...start).trimStart();
  if (/^<(!doctype html|html)/i.test(text)) return 'an HTML page';
  if (text.startsWith('<')) return 'an XML or HTML document';
  return /^[{[]/.test(text) ? 'a JSON document' : 'a text file';
}
