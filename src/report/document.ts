import type { Basis, QuantityKey } from '../figures/quantity.js';
import type { RegionFigures } from '../figures/region.js';

/** Where a report comes from. */
export interface Source {
  readonly path: string;
  readonly sha256: string;
  /** ISO 8601 UTC; null when neither the map nor the user says. */
  readonly observed: string | null;
  readonly hdu: number;
}

/** How the figures were worked out, where there is a choice. */
export interface Settings {
  /** `vector`: from all three components. */
  readonly radial_field: 'potential' | 'mu' | 'given' | 'vector';
  readonly sides: 'open' | 'periodic';
  readonly noise_G: number;
  readonly noise_basis: 'measured' | 'assumed';
}

interface QuantityJson {
  readonly value: number | null;
  readonly low: number | null;
  readonly high: number | null;
  readonly unit: string;
  readonly basis: Basis;
}

/** One region of the document. */
export interface RegionJson {
  readonly id: string;
  readonly center: {
    readonly stonyhurst_longitude: number;
    readonly stonyhurst_latitude: number;
    readonly carrington_longitude: number;
    readonly mu: number;
  };
  readonly patch: { readonly nx: number; readonly ny: number; readonly pixel_Mm: number };
  readonly settings: Settings;
  readonly quantities: Readonly<Partial<Record<QuantityKey, QuantityJson>>>;
  readonly flags: readonly string[];
}

/** The quick look as JSON; `quicklook.schema.json` describes it. */
export interface QuickLookDocument {
  readonly schema: 1;
  readonly source: Source;
  readonly regions: readonly RegionJson[];
  readonly tool: { readonly version: string };
}

/** Builds the JSON document of one map. Angles in degrees. */
export function quickLookDocument(
  source: Source,
  regions: readonly { readonly figures: RegionFigures; readonly settings: Settings }[],
  version: string,
): QuickLookDocument {
  return {
    schema: 1,
    source,
    regions: regions.map(({ figures, settings }) => ({
      id: figures.id,
      center: {
        stonyhurst_longitude: figures.center.stonyhurstLongitudeDeg,
        stonyhurst_latitude: figures.center.stonyhurstLatitudeDeg,
        carrington_longitude: figures.center.carringtonLongitudeDeg,
        mu: figures.center.mu,
      },
      patch: {
        nx: figures.patch.nx,
        ny: figures.patch.ny,
        pixel_Mm: figures.patch.pixelMm,
      },
      settings,
      quantities: figures.quantities,
      flags: figures.flags,
    })),
    tool: { version },
  };
}
