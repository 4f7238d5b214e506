import { describe, expect, it } from 'vitest';
import { linearCurrent, linearCurrentDensity } from '../../src/currents/linear-current.js';
import {
  alfvenSpeed,
  inductance,
  lundquistNumber,
  spitzerResistivity,
} from '../../src/energy/circuit.js';
import { TESLA_PER_GAUSS } from '../../src/units.js';

describe('circuit equivalents', () => {
  it('a current of 1e12 A that holds 8.25e24 J has 16.5 H (half torus of 10 Mm, physics of a current loop)', () => {
    expect(inductance(8.25e24, 1e12)).toBeCloseTo(16.5, 10);
  });

  // Spitzer 1962, parallel, Z = 1, Coulomb logarithm 20: 1.30e-6 ohm m at 1 MK, 4.6e-7 at 2 MK.
  it.each([
    [1e6, 1.3e-6],
    [2e6, 4.6e-7],
  ])('resistivity at %f K is %f ohm m', (kelvin, eta) => {
    expect(spitzerResistivity(kelvin) / eta).toBeCloseTo(1, 1.8);
  });

  // v_A = B / sqrt(mu0 m_p n) by hand: 100 G and 1e15 m^-3 give 6.90e6 m/s.
  it.each([
    [0.01, 1e15, 6.9e6],
    [0.1, 1e16, 2.18e7],
    [0.001, 1e15, 6.9e5],
  ])('Alfven speed at %f T, %f per m^3', (b, n, v) => {
    expect(alfvenSpeed(b, n) / v).toBeCloseTo(1, 2);
  });

  it('Lundquist number of 10 Mm at 100 G and 1 MK is 6.7e13', () => {
    // S = L v_A / eta_m with the magnetic diffusivity 1.03 m^2/s: 1e7 x 6.9e6 / 1.03.
    expect(lundquistNumber(1e7, 0.01, 1e15, 1e6) / 6.67e13).toBeCloseTo(1, 1.5);
  });

  it('the field needed falls in proportion to the size: size up and field down by 1e10 is the same number', () => {
    // Common practice, no source.
    expect(
      lundquistNumber(1e-3 * 1e10, 1e4 * 1e-10, 1e15, 1e6) / lundquistNumber(1e-3, 1e4, 1e15, 1e6),
    ).toBeCloseTo(1, 12);
  });

  it('10,000 G is 1 T', () => {
    // Common practice, no source.
    expect(10_000 * TESLA_PER_GAUSS).toBe(1);
  });

  it('alpha of 3.8e-7 per metre at 1000 G carries 30 mA/m^2', () => {
    // alpha = mu0 Jz / Bz by hand: 4 pi 1e-7 x 0.03 / 0.1 = 3.77e-7.
    expect(linearCurrentDensity(0.377, 1000)).toBeCloseTo(30, 1);
  });

  it('alpha of 1e-8 per metre over 1e22 Mx drives 8e11 A', () => {
    // I = alpha Phi / mu0 = 1e-8 x 1e14 Wb / (4 pi 1e-7).
    expect(linearCurrent(0.01, 1e22) / 7.958e11).toBeCloseTo(1, 3);
  });
});
