import { describe, expect, it } from 'vitest';
import { analyseRegion } from '../../src/figures/analyse-region.js';
import {
  LINE_OF_SIGHT_KEYS,
  QUANTITY_FACTS,
  type QuantityKey,
  quantity,
  withSigma,
} from '../../src/figures/quantity.js';
import { makeGrid } from '../../src/grid/grid.js';
import { BIPOLE, bipoleFlux, chargeEnergy, chargeField } from '../support/charges.js';
import { flatPatch } from '../support/patch.js';
import { normalNoise } from '../support/random.js';

const OPTIONS = { noiseG: 0.01, sourcePixelMm: 0.5 };
const whole = analyseRegion(flatPatch(chargeField(BIPOLE, 512, 0.5)), OPTIONS);
const value = (key: QuantityKey) => whole.figures.quantities[key]?.value ?? Number.NaN;

describe('figures of a region with exact truth', () => {
  it('are all there, each with its unit, an interval that holds it and a basis', () => {
    expect(Object.keys(whole.figures.quantities).sort()).toEqual([...LINE_OF_SIGHT_KEYS].sort());
    for (const key of LINE_OF_SIGHT_KEYS) {
      const quantity = whole.figures.quantities[key]!;
      expect(quantity.unit).toBe(QUANTITY_FACTS[key].unit);
      expect(quantity.low!).toBeLessThanOrEqual(quantity.value!);
      expect(quantity.high!).toBeGreaterThanOrEqual(quantity.value!);
    }
  });

  it('give the flux on the map within 1 % and the energy within 2 % (closed forms)', () => {
    // A map of 256 Mm holds 98.6 % of the flux of one polarity on the infinite plane.
    let onMap = 0;
    for (const b of chargeField(BIPOLE, 512, 0.5).values.data) if (b > 0) onMap += b * 0.25e16;
    expect(onMap / bipoleFlux(1.6e5, 40, 10)).toBeGreaterThan(0.98);
    expect(Math.abs(value('positive_flux') / onMap - 1)).toBeLessThan(0.01);
    expect(Math.abs(value('potential_energy') / chargeEnergy(BIPOLE) - 1)).toBeLessThan(0.02);
    expect(Math.abs(value('net_flux') / value('unsigned_flux'))).toBeLessThan(1e-3);
  });

  it('say on which basis each rests: nothing a prior supports is called measured', () => {
    const basis = (key: QuantityKey) => whole.figures.quantities[key]?.basis;
    expect(basis('unsigned_flux')).toBe('measured');
    expect(basis('potential_energy')).toBe('extrapolated');
    for (const key of [
      'free_energy',
      'total_energy',
      'upward_current',
      'force_free_alpha',
      'inductance',
    ] as const)
      expect(basis(key)).toBe('prior');
    expect(basis('lundquist_number')).toBe('assumed');
    expect(whole.figures.flags.join()).toContain('prior');
  });

  it('keep free energy below its ceiling and inductance at its definition', () => {
    expect(value('free_energy')).toBeGreaterThan(0);
    expect(value('free_energy')).toBeLessThan(value('free_energy_ceiling'));
    expect(value('total_energy')).toBeCloseTo(
      value('potential_energy') + value('free_energy'),
      -15,
    );
    // Loops of this size hold tens of henry (half torus of 20 Mm: 16.5 H x 2).
    expect(value('inductance')).toBeGreaterThan(3);
    expect(value('inductance')).toBeLessThan(100);
  });

  it('turn to the alpha the user gives, with basis assumed', () => {
    const fixed = analyseRegion(flatPatch(chargeField(BIPOLE, 128, 2)), {
      ...OPTIONS,
      alphaPerMm: 0.01,
    });
    const current = fixed.figures.quantities.upward_current!;
    expect(current.basis).toBe('assumed');
    expect(
      current.value! /
        ((0.01e-6 * fixed.figures.quantities.positive_flux!.value! * 1e-8) / (4e-7 * Math.PI)),
    ).toBeCloseTo(1, 6);
    expect(fixed.figures.quantities.net_current_negative!.value).toBeLessThan(0);
    expect(fixed.figures.quantities.force_free_alpha!.value).toBe(0.01);
  });

  it('leave free energy and currents out with a reason when alpha is beyond the limit', () => {
    const beyond = analyseRegion(flatPatch(chargeField(BIPOLE, 64, 4)), {
      ...OPTIONS,
      alphaPerMm: 1,
    });
    expect(beyond.figures.quantities.free_energy).toBeUndefined();
    expect(beyond.figures.flags.join()).toMatch(/alpha 1 1\/Mm is not below the limit/);
    expect(beyond.currentDensity).toBeUndefined();
  });

  it('have no inductance when alpha is zero: null with a reason, never zero', () => {
    const still = analyseRegion(flatPatch(chargeField(BIPOLE, 64, 4)), {
      ...OPTIONS,
      alphaPerMm: 0,
    });
    expect(still.figures.quantities.inductance?.value).toBeNull();
    expect(still.figures.flags.join()).toMatch(/inductance cannot be had/);
  });

  it('flag a region cut by the edge', () => {
    const half = chargeField([BIPOLE[0]], 64, 2);
    expect(analyseRegion(flatPatch(half), OPTIONS).figures.flags.join()).toMatch(/out of balance/);
  });
});

describe('intervals under noise', () => {
  it('of flux and potential energy hold the truth about as often as they claim', () => {
    const clean = chargeField(BIPOLE, 128, 1);
    const truth = analyseRegion(flatPatch(clean), { noiseG: 1e-6, sourcePixelMm: 1 }).figures
      .quantities;
    let fluxHits = 0;
    let energyHits = 0;
    const runs = 30;
    for (let seed = 1; seed <= runs; seed++) {
      const random = normalNoise(seed);
      const noisy = makeGrid(
        clean.values.data.map((b) => b + 40 * random()),
        128,
        128,
        'G',
        1,
      );
      const found = analyseRegion(flatPatch(noisy), { noiseG: 40, sourcePixelMm: 1 }).figures
        .quantities;
      const holds = (key: 'net_flux' | 'potential_energy') =>
        truth[key]!.value! >= found[key]!.low! && truth[key]!.value! <= found[key]!.high!;
      if (holds('net_flux')) fluxHits++;
      if (holds('potential_energy')) energyHits++;
    }
    // 68 % of 30 is 20.5; 13 to 28 leaves room for three deviations of the count.
    expect(fluxHits).toBeGreaterThanOrEqual(13);
    expect(energyHits).toBeGreaterThanOrEqual(13);
    expect(energyHits).toBeLessThanOrEqual(29);
  });
});

describe('a quantity', () => {
  it('ends at zero where the law allows one sign only', () => {
    expect(withSigma('inductance', 3, 7, 'prior')).toMatchObject({ value: 3, low: 0, high: 10 });
    expect(withSigma('downward_current', -3, 7, 'prior')).toMatchObject({ low: -10, high: 0 });
    expect(withSigma('net_flux', 3, 7, 'measured')).toMatchObject({ low: -4, high: 10 });
    expect(withSigma('potential_energy', -3, 7, 'extrapolated')).toMatchObject({
      value: 0,
      high: 4,
    });
  });

  it('is null throughout where a number is missing', () => {
    expect(quantity('inductance', Number.NaN, 0, 1, 'prior')).toEqual({
      value: null,
      low: null,
      high: null,
      unit: 'H',
      basis: 'prior',
    });
  });
});
