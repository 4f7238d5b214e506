import { describe, expect, it } from 'vitest';
import { openEnergy } from '../../src/energy/open-energy.js';
import { evaluateForm, openForm } from '../../src/energy/spectral-energy.js';
import { paddedSpectrum } from '../../src/field/potential.js';
import { transformKernel } from '../../src/grid/fft.js';
import { type Grid2, makeGrid } from '../../src/grid/grid.js';
import { openPlaneSums } from '../../src/grid/open-sums.js';
import { uniform } from '../support/random.js';

const NOISE = { deviationG: 12, cellMm2: 1.3 };

function randomMap(nx: number, ny: number): Grid2<'G'> {
  const next = uniform(nx + 1000 * ny);
  const data = Float64Array.from({ length: nx * ny }, () => 900 * (next() - 0.4));
  if (data.length > 5) data[3] = Number.NaN;
  return makeGrid(data, nx, ny, 'G', 0.7);
}

describe('energy in free space by sums in tiles', () => {
  // Odd and even sides, whole and partial batches of rows and tiles, one wider than the near pairs.
  it.each([
    [1, 1],
    [2, 3],
    [3, 8],
    [8, 16],
    [9, 7],
    [17, 5],
    [40, 33],
    [45, 50],
    [64, 64],
    [121, 30],
    [200, 187],
  ])('%i x %i is that of the whole spectra', (nx, ny) => {
    const map = randomMap(nx, ny);
    const spectrum = paddedSpectrum(map, 'open');
    const form = openForm(spectrum.nx, spectrum.ny, map.pixelMm);
    const wanted = evaluateForm(spectrum, form, map.pixelMm, nx * ny, NOISE);
    for (let repeat = 0; repeat < 2; repeat++) {
      const found = openEnergy(map, nx * ny, NOISE);
      expect(found.joules / wanted.joules).toBeCloseTo(1, 11);
      expect(found.sigma / wanted.sigma).toBeCloseTo(1, 11);
    }
  });

  it('is done by the compiled kernels where the transforms are', () => {
    const sums = openPlaneSums(Float64Array.of(1), 1, 1, 2, 2, Float64Array.of(3));
    expect(sums !== undefined).toBe(transformKernel() === 'compiled');
    expect(() => openPlaneSums(Float64Array.of(1), 1, 1, 1, 2, Float64Array.of(3))).toThrow(
      RangeError,
    );
  });
});
