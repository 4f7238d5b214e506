export { type FitsFile, imageHdus, parseFits, readFitsFile } from './file.js';
export type { FitsHdu, HduKind } from './hdu.js';
export {
  booleanAt,
  type Card,
  type CardValue,
  type FitsHeader,
  hasCard,
  headerFromText,
  numberAt,
  parseHeader,
  stringAt,
} from './header.js';
export { type FitsImage, readImage } from './image.js';
export { DEFAULT_LIMITS, type FitsLimits } from './limits.js';
export { type WritableHdu, type WritableValues, writeFits } from './write.js';
