import { describe, expect, it } from 'vitest';
import { analyseMap } from '../../src/figures/analyse-map.js';
import type { RegionFigures } from '../../src/figures/region.js';
import { parseFits, readFitsFile, readImage, stringAt } from '../../src/fits/index.js';
import { readSolarMap } from '../../src/geometry/solar-map.js';
import { quickLookDocument } from '../../src/report/document.js';
import { regionMaps } from '../../src/report/maps.js';
import { regionSummary } from '../../src/report/summary.js';
import { quickLookCsv } from '../../src/report/table.js';
import { MARROW_HILL } from '../support/command.js';

const map = readSolarMap(readFitsFile(`${MARROW_HILL}/mh-1-20310514-small.fits`));
const analysis = analyseMap(map);

describe('maps of a patch as FITS', () => {
  const file = parseFits(regionMaps(analysis, map, '0.0.0'), 'maps.fits');

  it('hold radial field and current density with units and coordinates', () => {
    expect(file.hdus.map(({ kind }) => kind)).toEqual(['image', 'image']);
    const [field, current] = [0, 1].map((hdu) => readImage(file, hdu));
    expect([field.bunit, current.bunit]).toEqual(['G', 'mA/m2']);
    expect(stringAt(current.header, 'EXTNAME')).toBe('CURRENT_DENSITY');
    expect(stringAt(current.header, 'BASIS')).toBe('prior');
    const source = analysis.radialField.values.data;
    for (let i = 0; i < source.length; i += 97)
      expect(field.values[i]).toBe(Math.fround(source[i]));
  });

  it('read back as a magnetogram: the same region, the same flux', () => {
    const again = readSolarMap(file);
    expect(again.component).toBe('radial');
    const figures = analyseMap(again, { noiseG: analysis.noiseG }).figures;
    expect(figures.center.stonyhurstLongitudeDeg).toBeCloseTo(
      analysis.figures.center.stonyhurstLongitudeDeg,
      0,
    );
    expect(figures.center.carringtonLongitudeDeg).toBeCloseTo(
      analysis.figures.center.carringtonLongitudeDeg,
      0,
    );
    const flux = (of: RegionFigures) => of.quantities.unsigned_flux!.value!;
    expect(Math.abs(flux(figures) / flux(analysis.figures) - 1)).toBeLessThan(0.02);
  });
});

describe('summary', () => {
  const context = { source: 'm.fits', observed: null, noise: '8 G', files: ['out/m.json'] };

  it('says the same with and without colour', () => {
    const plain = regionSummary(analysis.figures, context, false);
    const coloured = regionSummary(analysis.figures, context, true);
    expect(plain).not.toContain('\u001b');
    expect(coloured).toContain('\u001b[33m');
    // biome-ignore lint/suspicious/noControlCharactersInRegex: terminal colour codes are what it is about
    expect(coloured.replace(/\u001b\[\d+m/g, '')).toBe(plain);
  });

  it('marks what no observation stands behind', () => {
    const lines = regionSummary(analysis.figures, context, false).split('\n');
    for (const line of lines.filter((text) => /(prior|assumed)$/.test(text)))
      expect(line).toContain('~ ');
    for (const line of lines.filter((text) => /measured$/.test(text)))
      expect(line).not.toContain('~');
  });

  it('shows a figure that cannot be had as a dash, not as zero', () => {
    const quantities = {
      ...analysis.figures.quantities,
      inductance: { value: null, low: null, high: null, unit: 'H', basis: 'prior' } as const,
    };
    expect(regionSummary({ ...analysis.figures, quantities }, context, false)).toMatch(
      /inductance +— +prior/,
    );
  });
});

describe('table', () => {
  it('quotes what holds commas and leaves missing figures empty', () => {
    const figures = { ...analysis.figures, id: 'a "b", c', quantities: {}, flags: ['one, two'] };
    const settings = {
      radial_field: 'mu',
      sides: 'open',
      noise_G: 8,
      noise_basis: 'measured',
    } as const;
    const source = { path: 'x.fits', sha256: '0'.repeat(64), observed: null, hdu: 0 };
    const [names, cells] = quickLookCsv(
      quickLookDocument(source, [{ figures, settings }], '0'),
    ).split('\r\n');
    expect(cells).toContain('"a ""b"", c"');
    expect(cells).toContain('"one, two"');
    expect(cells.replace(/"[^"]*(""[^"]*)*"/g, 'q').split(',')).toHaveLength(
      names.split(',').length,
    );
    expect(cells).toMatch(/,,,,/);
  });
});
