import type { MapAnalysis } from '../figures/analyse-map.js';
import { type Card, writeFits } from '../fits/index.js';
import { patchWcsCards } from '../geometry/patch-wcs.js';
import type { SolarMap } from '../geometry/solar-map.js';

function card(keyword: string, value: Card['value'], comment = ''): Card {
  return { keyword, value, comment };
}

/**
 * The patch's maps as one FITS file: the radial field [G] in the primary HDU and, where there is one, the
 * current density [mA/m^2] in an extension, as float32 with world coordinates of the equal-area grid.
 * The header says what the current rests on. NaN is missing.
 */
export function regionMaps(analysis: MapAnalysis, map: SolarMap, version: string): Uint8Array {
  const { radialField, currentDensity, patch, figures } = analysis;
  const shape = [patch.nx, patch.ny];
  const common = (unit: string, content: string): Card[] => [
    card('BUNIT', unit),
    card('CONTENT', content),
    card('OBJECT', figures.id, 'region'),
    ...patchWcsCards(patch, map.observed, map.observer),
    card('CREATOR', `spotjoule ${version}`),
  ];
  const hdus = [
    {
      values: Float32Array.from(radialField.values.data),
      shape,
      cards: [
        ...common('G', 'radial magnetic field'),
        card('RADIAL', analysis.radialMethod, 'how the radial field was had'),
        card('NOISE', analysis.noiseG, '[G] 1 sigma of a source pixel'),
      ],
    },
  ];
  if (currentDensity) {
    const basis = figures.quantities.peak_current_density?.basis ?? 'prior';
    hdus.push({
      values: Float32Array.from(currentDensity.values.data),
      shape,
      cards: [
        card('EXTNAME', 'CURRENT_DENSITY'),
        ...common('mA/m2', 'vertical current density, linear force-free'),
        card('BASIS', basis, 'what the current rests on'),
      ],
    });
  }
  return writeFits(hdus);
}
