import type { Card } from '../fits/header.js';
import { METRES_PER_MEGAMETRE, RADIANS_PER_DEGREE } from '../units.js';
import type { Observer } from './observer.js';
import { type PatchGrid, sphereRadiusMm } from './patch-position.js';

/**
 * Cards that describe the grid of a patch in an output map: an oblique cylindrical equal-area projection
 * whose native equator passes through the patch centre along its parallel (Calabretta & Greisen 2002,
 * sections 2.4 and 5.2.2), in Carrington coordinates, or Stonyhurst ones where no Carrington longitude
 * is known. The native pole lies on the centre's meridian 90 degrees north of the centre, hence LONPOLE
 * 0 or 180. BUNIT is left to the caller.
 */
export function patchWcsCards(
  patch: PatchGrid,
  observed: string | undefined,
  observer: Observer,
): Card[] {
  const { stonyhurstLongitudeDeg, stonyhurstLatitudeDeg, carringtonLongitudeDeg } = patch.center;
  const isCarrington = Number.isFinite(carringtonLongitudeDeg);
  const system = isCarrington ? 'CR' : 'HG';
  const stepDeg = patch.pixelMm / sphereRadiusMm(patch) / RADIANS_PER_DEGREE;
  const card = (keyword: string, value: Card['value'], comment: string): Card => ({
    keyword,
    value,
    comment,
  });
  const cards = [
    card('WCSNAME', isCarrington ? 'Carrington Heliographic' : 'Stonyhurst Heliographic', ''),
    card('CTYPE1', `${system}LN-CEA`, 'longitude, equal-area about the patch centre'),
    card('CTYPE2', `${system}LT-CEA`, 'latitude'),
    card('CUNIT1', 'deg', ''),
    card('CUNIT2', 'deg', ''),
    card('CRPIX1', (patch.nx + 1) / 2, 'patch centre'),
    card('CRPIX2', (patch.ny + 1) / 2, 'patch centre'),
    card('CRVAL1', isCarrington ? carringtonLongitudeDeg : stonyhurstLongitudeDeg, '[deg]'),
    card('CRVAL2', stonyhurstLatitudeDeg, '[deg]'),
    card('CDELT1', stepDeg, '[deg] of arc on the sphere'),
    card('CDELT2', stepDeg, '[deg] of arc at the patch centre'),
    card('LONPOLE', stonyhurstLatitudeDeg >= 0 ? 0 : 180, '[deg] native longitude of the pole'),
    card('LATPOLE', 90 - Math.abs(stonyhurstLatitudeDeg), '[deg] latitude of the native pole'),
    card('RSUN_REF', sphereRadiusMm(patch) * METRES_PER_MEGAMETRE, '[m] radius of the sphere'),
    card('DSUN_OBS', observer.distanceM, '[m] observer to Sun centre'),
    card('HGLN_OBS', observer.stonyhurstLongitudeDeg, '[deg] observer, Stonyhurst longitude'),
    card('HGLT_OBS', observer.latitudeDeg, '[deg] observer, latitude'),
  ];
  if (Number.isFinite(observer.carringtonLongitudeDeg))
    cards.push(
      card('CRLN_OBS', observer.carringtonLongitudeDeg, '[deg] observer, Carrington longitude'),
      card('CRLT_OBS', observer.latitudeDeg, '[deg] observer, latitude'),
    );
  if (observed !== undefined)
    cards.push(card('DATE-OBS', observed.replace(/Z$/, ''), 'UTC, time of observation'));
  return cards;
}
