import type { RegionFigures } from '../figures/region.js';
import type { FieldVolume } from '../figures/region-volume.js';
import { type Card, writeFits } from '../fits/index.js';
import type { LocalPatch } from '../geometry/patch.js';
import { patchWcsCards } from '../geometry/patch-wcs.js';
import type { SolarMap } from '../geometry/solar-map.js';

/** The components in the order of their HDUs: name, and the direction along the patch. */
const COMPONENTS = [
  ['x', 'BX', 'westward'],
  ['y', 'BY', 'northward'],
  ['z', 'BZ', 'upward'],
] as const;

function card(keyword: string, value: Card['value'], comment = ''): Card {
  return { keyword, value, comment };
}

/** The region that a volume stands on; `radialMethod` for one seen along the line of sight. */
export interface VolumeRegion {
  readonly figures: RegionFigures;
  readonly patch: LocalPatch;
  readonly sides: 'open' | 'periodic';
  readonly radialMethod?: string;
}

/**
 * A volume as a FITS file of three cubes in G, float32: BX (primary HDU), BY and BZ. Axes 1 and 2 have the
 * world coordinates of the patch, axis 3 is the height in Mm, linear from the surface. Heights must be
 * equally far apart: throws RangeError where they are not.
 */
export function volumeCube(
  volume: FieldVolume<Float32Array>,
  alphaPerMm: number,
  analysis: VolumeRegion,
  map: SolarMap,
  version: string,
): Uint8Array {
  const { nx, ny, heightsMm } = volume;
  const shared = [
    card('BUNIT', 'G'),
    card('OBJECT', analysis.figures.id, 'region'),
    ...sampledWcs(volume, patchWcsCards(analysis.patch, map.observed, map.observer), analysis),
    ...heightCards(heightsMm),
    card('MODEL', alphaPerMm === 0 ? 'current-free' : 'linear force-free'),
    card('ALPHA', alphaPerMm, '[1/Mm] curl B = alpha B'),
    card('SIDES', analysis.sides, 'what lies beyond the patch'),
    ...(analysis.radialMethod
      ? [card('RADIAL', analysis.radialMethod, 'how the radial field was had')]
      : []),
    card('CREATOR', `spotjoule ${version}`),
  ];
  return writeFits(
    COMPONENTS.map(([component, name, direction]) => ({
      values: volume[component],
      shape: [nx, ny, heightsMm.length],
      cards: [
        card('EXTNAME', name),
        card('CONTENT', `${direction} magnetic field above the patch`),
        ...shared,
      ],
    })),
  );
}

/** The patch's cards for a grid that takes every n-th of its pixels. */
function sampledWcs(volume: FieldVolume, cards: readonly Card[], { patch }: VolumeRegion): Card[] {
  const every = Math.round(volume.stepMm / patch.pixelMm);
  return cards.map((each) => {
    const value = Number(each.value);
    if (/^CRPIX[12]$/.test(each.keyword)) return { ...each, value: (value - 1) / every + 1 };
    return /^CDELT[12]$/.test(each.keyword) ? { ...each, value: value * every } : each;
  });
}

function heightCards(heightsMm: Float64Array): Card[] {
  const last = heightsMm.length - 1;
  const stepMm = last > 0 ? (heightsMm[last] - heightsMm[0]) / last : 1;
  const even = heightsMm.every(
    (height, i) => Math.abs(height - heightsMm[0] - i * stepMm) < 1e-6 * stepMm,
  );
  if (!even) throw new RangeError('the heights of a cube must be equally far apart');
  return [
    card('CTYPE3', 'HEIGHT', 'above the surface'),
    card('CUNIT3', 'Mm'),
    card('CRPIX3', 1),
    card('CRVAL3', heightsMm[0], '[Mm]'),
    card('CDELT3', stepMm, '[Mm]'),
  ];
}
