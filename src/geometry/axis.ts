import { ARCSEC_PER_RADIAN, RADIANS_PER_DEGREE } from '../units.js';

/** World that an image is drawn in. */
export type Frame = 'helioprojective' | 'stonyhurst' | 'carrington';

/** What one CTYPE says. */
export interface Axis {
  readonly frame: Frame;
  readonly isLatitude: boolean;
  /** Three-letter algorithm; absent for a plainly linear axis ("solar-x"). */
  readonly algorithm?: string;
}

const FRAMES: Readonly<Record<string, Frame>> = {
  HP: 'helioprojective',
  HG: 'stonyhurst',
  CR: 'carrington',
};

/**
 * Reads a CTYPE: HPLN/HPLT, HGLN/HGLT, CRLN/CRLT with an algorithm (Thompson 2006, table 1), or the
 * linear names of older instruments (Solar-X, SOLX, GONGX). `undefined` for any other axis.
 */
export function readAxis(ctype: string | undefined): Axis | undefined {
  const text = (ctype ?? '').trim().toUpperCase();
  const paper = /^(HP|HG|CR)(LN|LT)(?:-+([A-Z0-9]{3}))?-*$/.exec(text);
  if (paper) {
    const axis = { frame: FRAMES[paper[1]], isLatitude: paper[2] === 'LT' };
    return paper[3] === undefined ? axis : { ...axis, algorithm: paper[3] };
  }
  const old = /^(?:SOLAR[-_ ]?|SOL|GONG)([XY])$/.exec(text);
  return old ? { frame: 'helioprojective', isLatitude: old[1] === 'Y' } : undefined;
}

/**
 * Radians per unit of a CUNIT: degrees, arcminutes, arcseconds, radians, or solar radii seen at
 * `angularRadius` [rad]. `undefined` where the text is no such unit or the radius is not known.
 */
export function radiansPerUnit(
  cunit: string,
  angularRadius: number | undefined,
): number | undefined {
  const text = cunit.trim().toLowerCase().replace(/s$/, '');
  if (text === 'deg' || text === 'degree') return RADIANS_PER_DEGREE;
  if (text === 'arcmin') return RADIANS_PER_DEGREE / 60;
  if (text === 'arcsec' || text === 'arcsecond' || text === 'asec') return 1 / ARCSEC_PER_RADIAN;
  if (text === 'mas') return 1e-3 / ARCSEC_PER_RADIAN;
  if (text === 'rad' || text === 'radian') return 1;
  const isRadius = /^(sol(ar)?[-_ ]?rad(iu|ii)?|rsun|r_sun)$/.test(text);
  return isRadius && angularRadius !== undefined ? Math.tan(angularRadius) : undefined;
}
