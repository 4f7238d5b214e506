import type { MapAnalysis } from '../figures/analyse-map.js';
import type { VectorMapAnalysis } from '../figures/analyse-vector-map.js';
import { type Card, writeFits } from '../fits/index.js';
import type { LocalPatch } from '../geometry/patch.js';
import { patchWcsCards } from '../geometry/patch-wcs.js';
import type { SolarMap } from '../geometry/solar-map.js';
import type { Grid2 } from '../grid/grid.js';

function card(keyword: string, value: Card['value'], comment = ''): Card {
  return { keyword, value, comment };
}

/** One map to write: what it shows, under which extension name (none for the first). */
interface NamedMap {
  readonly grid: Grid2;
  readonly content: string;
  readonly name?: string;
  readonly cards?: readonly Card[];
}

/** Units as the FITS Standard 4.0 (4.3) writes them. */
const FITS_UNIT: Readonly<Record<Grid2['unit'], string>> = {
  G: 'G',
  'mA/m^2': 'mA/m2',
  '1/Mm': 'Mm-1',
  '1': '',
};

function writeMaps(
  maps: readonly NamedMap[],
  region: string,
  patch: LocalPatch,
  source: SolarMap,
  version: string,
): Uint8Array {
  return writeFits(
    maps.map(({ grid, content, name, cards = [] }) => ({
      values: Float32Array.from(grid.values.data),
      shape: [patch.nx, patch.ny],
      cards: [
        ...(name === undefined ? [] : [card('EXTNAME', name)]),
        card('BUNIT', FITS_UNIT[grid.unit]),
        card('CONTENT', content),
        card('OBJECT', region, 'region'),
        ...patchWcsCards(patch, source.observed, source.observer),
        card('CREATOR', `spotjoule ${version}`),
        ...cards,
      ],
    })),
  );
}

/**
 * The patch's maps as one FITS file: the radial field [G] in the primary HDU and, where there is one, the
 * current density [mA/m^2] in an extension, as float32 with world coordinates of the equal-area grid.
 * The header says what the current rests on. NaN is missing.
 */
export function regionMaps(analysis: MapAnalysis, map: SolarMap, version: string): Uint8Array {
  const { radialField, currentDensity, patch, figures } = analysis;
  const basis = figures.quantities.peak_current_density?.basis ?? 'prior';
  const maps: NamedMap[] = [
    {
      grid: radialField,
      content: 'radial magnetic field',
      cards: [
        card('RADIAL', analysis.radialMethod, 'how the radial field was had'),
        card('NOISE', analysis.noiseG, '[G] 1 sigma of a source pixel'),
      ],
    },
  ];
  if (currentDensity)
    maps.push({
      grid: currentDensity,
      content: 'vertical current density, linear force-free',
      name: 'CURRENT_DENSITY',
      cards: [card('BASIS', basis, 'what the current rests on')],
    });
  return writeMaps(maps, figures.id, patch, map, version);
}

/**
 * The same of a vector region: radial field in the primary HDU, then the field west and north, the current
 * density, its 1-sigma noise and alpha.
 */
export function vectorMaps(
  analysis: VectorMapAnalysis,
  map: SolarMap,
  version: string,
): Uint8Array {
  const { field, currents, currentNoise, alpha, patch, figures } = analysis;
  const basis = [card('BASIS', 'measured', 'what the map rests on')];
  const maps: NamedMap[] = [
    { grid: field.z, content: 'radial magnetic field' },
    { grid: field.x, content: 'magnetic field west', name: 'FIELD_WEST' },
    { grid: field.y, content: 'magnetic field north', name: 'FIELD_NORTH' },
    {
      grid: currents.density,
      content: 'vertical current density',
      name: 'CURRENT_DENSITY',
      cards: basis,
    },
    { grid: currentNoise, content: 'noise of the current density', name: 'CURRENT_NOISE' },
    { grid: alpha, content: 'force-free alpha', name: 'ALPHA', cards: basis },
  ];
  return writeMaps(maps, figures.id, patch, map, version);
}
