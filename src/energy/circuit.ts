import { PROTON_MASS_KG, VACUUM_PERMEABILITY } from '../constants.js';

/** Inductance [H] of the circuit that holds `freeJ` [J] with a current of `amperes`: L = 2 W / I^2. */
export function inductance(freeJ: number, amperes: number): number {
  return (2 * freeJ) / (amperes * amperes);
}

/** Coulomb logarithm of the corona: common practice, no source. */
const COULOMB_LOGARITHM = 20;
const ELECTRONVOLTS_PER_KELVIN = 8.617333262e-5; // CODATA 2018

/** Resistivity along the field of a fully ionised hydrogen plasma [ohm m] at a temperature [K] (Spitzer 1962). */
export function spitzerResistivity(temperatureK: number): number {
  return 5.2e-5 * COULOMB_LOGARITHM * (ELECTRONVOLTS_PER_KELVIN * temperatureK) ** -1.5;
}

/** Alfven speed [m/s] in `fieldT` [T] and `protonsPerM3` protons per cubic metre (pure hydrogen). */
export function alfvenSpeed(fieldT: number, protonsPerM3: number): number {
  return fieldT / Math.sqrt(VACUUM_PERMEABILITY * PROTON_MASS_KG * protonsPerM3);
}

/**
 * Lundquist number S = mu0 L v_A / eta of a body of size `lengthM` [m]: how many times longer its
 * currents last against resistance than a wave needs to cross it.
 */
export function lundquistNumber(
  lengthM: number,
  fieldT: number,
  protonsPerM3: number,
  temperatureK: number,
): number {
  const speed = alfvenSpeed(fieldT, protonsPerM3);
  return (VACUUM_PERMEABILITY * lengthM * speed) / spitzerResistivity(temperatureK);
}
