import { describe, expect, it } from 'vitest';
import { observe, type Region, skyPosition } from '../../scripts/marrow-hill.mjs';
import { analyseMap, withoutSpikes } from '../../src/figures/analyse-map.js';
import type { QuantityKey } from '../../src/figures/quantity.js';
import { parseFits } from '../../src/fits/file.js';
import { readSolarMap } from '../../src/geometry/solar-map.js';
import { bipoleFlux, chargeEnergy } from '../support/charges.js';
import { sphereTruth } from '../support/sphere.js';

/** A bipole small beside its patch of 220 Mm, so that little of its flux lies outside. */
const CHARGES = [
  [5e4, -7, 0, 5],
  [-5e4, 7, 0, 5],
] as const;
const EXACT = sphereTruth(CHARGES);

/** The whole path, FITS bytes to figures, for the bipole at a place on a round Sun. */
function figuresAt(lonDeg: number, latDeg: number) {
  const region: Region = { lonDeg, latDeg, charges: CHARGES };
  const bytes = observe({
    regions: [region],
    n: 512,
    arcsec: 0.6,
    centerArcsec: skyPosition(region),
    noiseG: 0.05,
    seed: 40,
    object: 'bipole',
  });
  const map = readSolarMap(parseFits(bytes, 'bipole.fits'));
  const { figures } = analyseMap(map);
  return { figures, value: (key: QuantityKey) => figures.quantities[key]?.value ?? Number.NaN };
}

describe('a bipole on a round Sun, from FITS to figures (exact field of submerged charges)', () => {
  it('differs from one below a plane by 3 % at most', () => {
    const flat = chargeEnergy(
      CHARGES.map(([strength, x, y, depth]) => ({ strength, x, y, depth })),
    );
    expect(EXACT.energy / flat).toBeGreaterThan(1.02);
    expect(EXACT.energy / flat).toBeLessThan(1.03);
    expect(Math.abs(EXACT.flux / bipoleFlux(5e4, 14, 5) - 1)).toBeLessThan(0.03);
  });

  it('at disk centre: energy within 2 %, flux within 1 %', () => {
    const { value } = figuresAt(0, -2.81);
    expect(Math.abs(value('potential_energy') / EXACT.energy - 1)).toBeLessThan(0.02);
    expect(Math.abs(value('positive_flux') / EXACT.flux - 1)).toBeLessThan(0.01);
    expect(Math.abs(value('flux_imbalance'))).toBeLessThan(0.01);
  });

  // Wanted are 10 % and 5 %; what is reached is 0.2 % and 1.5 %.
  it.each([
    ['west', 40, -2.81],
    ['north-east', -30, 24],
  ])('40 degrees to the %s: energy and flux within 2 %%', (_, lonDeg, latDeg) => {
    const { figures, value } = figuresAt(lonDeg, latDeg);
    expect(figures.center.mu).toBeLessThan(0.79);
    expect(figures.center.stonyhurstLongitudeDeg).toBeCloseTo(lonDeg, -1);
    expect(Math.abs(value('potential_energy') / EXACT.energy - 1)).toBeLessThan(0.02);
    expect(Math.abs(value('positive_flux') / EXACT.flux - 1)).toBeLessThan(0.02);
  });
});

describe('a map with a spike', () => {
  it('loses it, with a flag, and keeps its figures', () => {
    const region: Region = { lonDeg: 5, latDeg: 10, charges: CHARGES };
    const bytes = observe({
      regions: [region],
      n: 128,
      arcsec: 2,
      centerArcsec: skyPosition(region),
      noiseG: 8,
      seed: 3,
      object: 'bipole',
    });
    const map = readSolarMap(parseFits(bytes, 'bipole.fits'));
    const values = map.values.slice();
    values[20 + 128 * 100] = 3027;
    const clean = analyseMap(map).figures;
    const spiked = analyseMap({ ...map, values }).figures;
    expect(spiked.flags.join()).toMatch(/1 lone spike set aside/);
    expect(spiked.quantities.peak_positive_field!.value!).toBeCloseTo(
      clean.quantities.peak_positive_field!.value!,
      0,
    );
    expect(withoutSpikes(map, 8).spikes).toBe(0);
  });
});
