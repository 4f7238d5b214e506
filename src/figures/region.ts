import type { PatchCenter } from '../geometry/patch.js';
import type { Quantity, QuantityKey } from './quantity.js';

/** Everything one region's report says; plain data, safe to send to a worker or a file. */
export interface RegionFigures {
  readonly id: string;
  readonly center: PatchCenter;
  readonly patch: { readonly nx: number; readonly ny: number; readonly pixelMm: number };
  readonly quantities: Readonly<Partial<Record<QuantityKey, Quantity>>>;
  /** Plain sentences for the reader: what was assumed, what is missing and why. */
  readonly flags: readonly string[];
}
