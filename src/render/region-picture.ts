import type { InversionLine } from '../field/inversion-line.js';
import type { RegionFigures } from '../figures/region.js';
import type { LocalPatch } from '../geometry/patch.js';
import type { Grid2 } from '../grid/grid.js';

/** What the picture of one region shows. */
export interface RegionPicture {
  /** File name, shown as the title. */
  readonly source: string;
  /** ISO 8601 UTC, or undefined when the map does not say. */
  readonly observed: string | undefined;
  readonly toolVersion: string;
  readonly region: RegionFigures;
  readonly patch: LocalPatch;
  readonly radialField: Grid2<'G'>;
  readonly currentDensity: Grid2<'mA/m^2'> | undefined;
  readonly inversionLines: readonly InversionLine[];
}
