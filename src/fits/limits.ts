/** What a file may ask of memory. Everything is checked before it is allocated. */
export interface FitsLimits {
  /** Bytes of a file, before and after gunzip. */
  readonly maxBytes: number;
  /** Pixels of one image plane; each takes up to 8 bytes, and up to 8 more while it is unpacked. */
  readonly maxPixels: number;
}

/** 512 MiB of file and 8192 x 8192 pixels: four times the largest full-disk map in use (4096 x 4096). */
export const DEFAULT_LIMITS: FitsLimits = { maxBytes: 512 * 1024 * 1024, maxPixels: 8192 * 8192 };
