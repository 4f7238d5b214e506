import { VACUUM_PERMEABILITY } from '../constants.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS, WEBER_PER_MAXWELL } from '../units.js';

/** Current [A] that crosses a polarity of `fluxMx` [Mx] where curl B = alpha B: alpha Phi / mu0. */
export function linearCurrent(alphaPerMm: number, fluxMx: number): number {
  return ((alphaPerMm / METRES_PER_MEGAMETRE) * fluxMx * WEBER_PER_MAXWELL) / VACUUM_PERMEABILITY;
}

/** Vertical current density [mA/m^2] of a linear force-free field: alpha Bz / mu0. */
export function linearCurrentDensity(alphaPerMm: number, fieldG: number): number {
  const amperesPerSquareMetre =
    ((alphaPerMm / METRES_PER_MEGAMETRE) * fieldG * TESLA_PER_GAUSS) / VACUUM_PERMEABILITY;
  return 1e3 * amperesPerSquareMetre;
}

/** Map of the vertical current density of a linear force-free field; NaN where the field is. */
export function linearCurrentMap(radial: Grid2<'G'>, alphaPerMm: number): Grid2<'mA/m^2'> {
  const [ny, nx] = radial.values.shape;
  const scale = linearCurrentDensity(alphaPerMm, 1);
  return makeGrid(
    radial.values.data.map((b) => scale * b),
    nx,
    ny,
    'mA/m^2',
    radial.pixelMm,
  );
}
