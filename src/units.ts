// The only place where one unit becomes another.

export const RADIANS_PER_DEGREE = Math.PI / 180;
export const ARCSEC_PER_DEGREE = 3600;
export const ARCSEC_PER_RADIAN = (180 / Math.PI) * 3600;

/** 10,000 G is 1 T. */
export const TESLA_PER_GAUSS = 1e-4;
export const METRES_PER_MEGAMETRE = 1e6;

/** Magnetic flux of 1 G over 1 Mm^2, in maxwell (G cm^2): 1 Mm = 1e8 cm. */
export const MAXWELL_PER_GAUSS_SQUARE_MEGAMETRE = 1e16;

/** 1 Mx is 1e-8 Wb. */
export const WEBER_PER_MAXWELL = 1e-8;

/** Wraps an angle in degrees to [-180, 180). */
export function wrapDegrees180(angleDeg: number): number {
  return ((((angleDeg + 180) % 360) + 360) % 360) - 180;
}

/** Wraps an angle in degrees to [0, 360). */
export function wrapDegrees360(angleDeg: number): number {
  return ((angleDeg % 360) + 360) % 360;
}
