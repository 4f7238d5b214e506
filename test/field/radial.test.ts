import { describe, expect, it } from 'vitest';
import { sumFlux } from '../../src/field/flux.js';
import { radialByMu, radialByPotential, radialField } from '../../src/field/radial.js';
import { PIXEL_MISSING } from '../../src/geometry/patch.js';
import { type Grid2, makeGrid } from '../../src/grid/grid.js';
import { BIPOLE, bipoleFlux, chargeField } from '../support/charges.js';
import { flatPatch, lineOfSightCharges } from '../support/patch.js';

const DEG = Math.PI / 180;

/** Sums by the sign of each pixel itself. */
const flux = (field: Grid2<'G'>) => sumFlux(field, Int8Array.from(field.values.data, Math.sign));

/** Root mean square difference of two maps over the rms of the second. */
function relativeError(a: Float64Array, b: Float64Array): number {
  let difference = 0;
  let size = 0;
  for (let i = 0; i < b.length; i++) {
    difference += (a[i] - b[i]) ** 2;
    size += b[i] ** 2;
  }
  return Math.sqrt(difference / size);
}

describe('radial field from the line of sight', () => {
  const views: [string, [number, number, number]][] = [
    ['40 degrees west', [-Math.sin(40 * DEG), 0, Math.cos(40 * DEG)]],
    [
      '40 degrees south-east',
      [Math.sin(40 * DEG) * 0.8, Math.sin(40 * DEG) * 0.6, Math.cos(40 * DEG)],
    ],
    ['60 degrees north', [0, -Math.sin(60 * DEG), Math.cos(60 * DEG)]],
  ];
  // Exact solution: charges. Leka, Barnes & Wagner 2017 find the potential way better for active regions.
  it.each(views)(
    'by potential reconstruction recovers charges seen %s, and beats the mu correction',
    (_, view) => {
      const truth = chargeField(BIPOLE, 256, 0.75);
      const patch = flatPatch(lineOfSightCharges(BIPOLE, 256, 0.75, view), view);
      const potential = relativeError(radialByPotential(patch).values.data, truth.values.data);
      const mu = relativeError(radialByMu(patch).values.data, truth.values.data);
      expect(potential).toBeLessThan(0.06);
      expect(potential).toBeLessThan(0.2 * mu);
    },
  );

  it('recovers the flux of a bipole at 40 degrees within 5 %', () => {
    const view: [number, number, number] = [-Math.sin(40 * DEG), 0, Math.cos(40 * DEG)];
    const patch = flatPatch(lineOfSightCharges(BIPOLE, 512, 0.5, view), view);
    const found = flux(radialByPotential(patch)).positiveMx;
    const whole = flux(chargeField(BIPOLE, 512, 0.5)).positiveMx;
    // What is lost lies beyond the edge: field of a few gauss over the whole map.
    expect(Math.abs(found / whole - 1)).toBeLessThan(0.05);
    expect(Math.abs(whole / bipoleFlux(1.6e5, 40, 10) - 1)).toBeLessThan(0.06);
  });

  it('is the measured field itself at disk centre', () => {
    const field = chargeField(BIPOLE, 96, 2);
    expect(
      relativeError(radialByPotential(flatPatch(field)).values.data, field.values.data),
    ).toBeLessThan(1e-6);
    expect(radialByMu(flatPatch(field)).values.data).toEqual(field.values.data);
  });

  it('leaves missing pixels missing and does not spread them', () => {
    const view: [number, number, number] = [-0.5, 0, 0.866];
    const field = lineOfSightCharges(BIPOLE, 96, 2, view);
    const data = Float64Array.from(field.values.data);
    data[10 + 96 * 70] = Number.NaN;
    const patch = flatPatch(makeGrid(data, 96, 96, 'G', 2), view);
    patch.mask[10 + 96 * 70] = PIXEL_MISSING;
    const radial = radialByPotential(patch).values.data;
    expect(radial.filter(Number.isNaN)).toHaveLength(1);
    expect(
      Math.abs(
        radial[11 + 96 * 70] - radialByPotential(flatPatch(field, view)).values.data[11 + 96 * 70],
      ),
    ).toBeLessThan(0.3 * Math.abs(field.values.data[10 + 96 * 70]));
  });

  it('is taken as given when the patch holds it', () => {
    const field = chargeField(BIPOLE, 32, 4);
    const given = radialField(flatPatch(field, [0.5, 0, 0.8], 'radial'), 'potential');
    expect(given).toEqual({ field, method: 'given' });
  });
});
