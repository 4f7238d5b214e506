/** A region as charges [G Mm^2] at x west, y north and depth [Mm] of its centre. */
export interface Region {
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly charges: readonly (readonly [number, number, number, number])[];
}
export const REGIONS: Readonly<Record<string, Region>>;
export function observe(scene: {
  readonly regions: readonly Region[];
  readonly n: number;
  readonly arcsec: number;
  readonly centerArcsec: readonly number[];
  readonly noiseG: number;
  readonly seed: number;
  readonly object: string;
  readonly wide?: boolean;
}): Uint8Array;
export function skyPosition(region: Region): number[];
export function marrowHillFiles(): Record<string, Uint8Array>;
