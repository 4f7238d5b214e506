// Physical constants, each with its source. SI unless the name says otherwise.

/** Vacuum permeability [H/m]; the exact pre-2019 SI value, which CODATA 2018 keeps to 1.5e-10. */
export const VACUUM_PERMEABILITY = 4e-7 * Math.PI;

/** Nominal solar radius [m]: IAU 2015 Resolution B3. */
export const SOLAR_RADIUS_M = 6.957e8;

/** Astronomical unit [m]: IAU 2012 Resolution B2. */
export const ASTRONOMICAL_UNIT_M = 1.495978707e11;

/** Proton mass [kg]: CODATA 2018. */
export const PROTON_MASS_KG = 1.67262192369e-27;
