import { describe, expect, it } from 'vitest';
import { DataError } from '../../src/errors.js';
import type { FitsFile } from '../../src/fits/file.js';
import { gaussPerUnit } from '../../src/geometry/magnetic-unit.js';
import { chooseMagnetogramHdu, readQuantity } from '../../src/geometry/magnetogram.js';
import { type Cards, fitsOf, headerOf } from './support.js';

describe('magnetic units', () => {
  it.each([
    ['G', 1],
    ['Gauss', 1],
    ['gauss   ', 1],
    ['GAUSS', 1],
    ['Mx/cm^2', 1],
    ['Mx cm^-2', 1],
    ['Mx/cm2', 1],
    ['Mx cm-2', 1],
    ['Mx/cm**2', 1],
    ['Mx*cm**(-2)', 1],
    ['T', 1e4],
    ['Tesla', 1e4],
    ['mT', 10],
    ['uT', 0.01],
    ['kG', 1000],
    ['kilogauss', 1000],
    ['mG', 1e-3],
    ['microtesla', 0.01],
    ['nT', 1e-5],
  ])('%s is %d G', (unit, gauss) => expect(gaussPerUnit(unit)! / gauss).toBeCloseTo(1, 12));
  it.each(['', 'g', 't', 'MT', 'DN/s', 'Mx', 'Mx/m^2', 'G/m', 'Gs', 'gausses'])(
    '%s is none',
    (unit) => expect(gaussPerUnit(unit)).toBeUndefined(),
  );
});

describe('what an image shows', () => {
  it.each([
    [{ BUNIT: 'DN/s' }, /BUNIT = 'DN\/s'/],
    [{ BUNIT: 'cm/s' }, /BUNIT = 'cm\/s'/],
    [{ BUNIT: 'm/s' }, /BUNIT = 'm\/s'/],
    [{ BUNIT: 'Degrees' }, /BUNIT = 'Degrees'/],
    [{ BUNIT: 'Gauss', BTYPE: 'BMAG' }, /total field strength/],
    [{ BUNIT: 'G', CONTENT: 'CONTINUUM INTENSITY' }, /intensity/],
    [{ CONTENT: 'Dopplergram' }, /velocity/],
    [{ BUNIT: 'G', EXTNAME: 'BLOS_ERR' }, /not field values/],
    [{ BUNIT: 'Mx/cm^2', CONTENT: 'Carrington Synoptic Chart Of Br Field' }, /whole Sun/],
    [{ BUNIT: 'G', CTYPE1: 'CRLN-CEA', CDELT1: -1, NAXIS1: 360 }, /whole Sun/],
    [{ BUNIT: 'G', CTYPE1: 'CRLN-CEA', CUNIT2: 'Sine Latitude' }, /whole Sun/],
  ] as [Cards, RegExp][])('%o is something else', (cards, found) => {
    const quantity = readQuantity(headerOf(cards), 'G');
    expect(quantity.kind).toBe('other');
    expect(quantity.found).toMatch(found);
  });
  it.each([
    [{ BUNIT: 'Gauss', CONTENT: 'MDI Full Disk 96m Magnetogram' }, 'line-of-sight'],
    [{ BUNIT: 'G', BTYPE: 'LOS Magnetic Field Strength' }, 'line-of-sight'],
    [{ BUNIT: 'Mx/cm^2', CONTENT: 'HMI observable' }, 'line-of-sight'],
    [{ BUNIT: 'GAUSS', IMTYPE: 'MAGNETIC' }, 'line-of-sight'],
    [{ BUNIT: 'G', BTYPE: 'Br' }, 'radial'],
  ] as [Cards, string][])('%o is a magnetogram', (cards, component) => {
    expect(readQuantity(headerOf(cards))).toMatchObject({ kind: 'magnetic', component });
  });
  it('an unknown unit needs the option, which wins', () => {
    expect(readQuantity(headerOf({})).kind).toBe('unknown');
    expect(readQuantity(headerOf({ BUNIT: 'arb' })).kind).toBe('unknown');
    expect(readQuantity(headerOf({ BUNIT: 'arb' }), 'T').gaussPerUnit).toBe(1e4);
    expect(readQuantity(headerOf({ BUNIT: 'G' }), 'T').gaussPerUnit).toBe(1e4);
  });
});

describe('which HDU', () => {
  /** A file of several images, from files of one. */
  function several(...cards: Cards[]): FitsFile {
    const files = cards.map((more) => fitsOf(more, 4, 4));
    const hdus = files.map((file, index) => ({
      ...file.hdus[0],
      index,
      name: String(cards[index].EXTNAME ?? ''),
    }));
    return { ...files[0], hdus };
  }
  const continuum = { BUNIT: 'DN/s', EXTNAME: 'CONTINUUM' };
  it('takes the magnetic one, preferring one that is called so', () => {
    expect(chooseMagnetogramHdu(several(continuum, { BUNIT: 'G' }))).toBe(1);
    const named = { BUNIT: 'G', EXTNAME: 'MAGNETOGRAM' };
    expect(chooseMagnetogramHdu(several({ BUNIT: 'G' }, continuum, named))).toBe(2);
    expect(chooseMagnetogramHdu(several({}, { BUNIT: 'G' }))).toBe(1);
  });
  it('obeys a number or a name', () => {
    const file = several({ BUNIT: 'G' }, { BUNIT: 'G', EXTNAME: 'Second' });
    expect(chooseMagnetogramHdu(file, { hdu: 1 })).toBe(1);
    expect(chooseMagnetogramHdu(file, { hdu: '1' })).toBe(1);
    expect(chooseMagnetogramHdu(file, { hdu: 'SECOND' })).toBe(1);
    expect(() => chooseMagnetogramHdu(file, { hdu: 7 })).toThrow(/HDU 7 is not there.*0 \(image\)/);
    expect(() => chooseMagnetogramHdu(several(continuum), { hdu: 0 })).toThrow(DataError);
  });
  it('says what was found and what was wanted', () => {
    expect(() => chooseMagnetogramHdu(several(continuum))).toThrow(
      /shows intensity \(EXTNAME = 'CONTINUUM'\); a line-of-sight or radial magnetogram/,
    );
    const table = several(continuum);
    const hdus = [{ ...table.hdus[0], kind: 'table' as const }];
    expect(() => chooseMagnetogramHdu({ ...table, hdus })).toThrow(/no image of two axes/);
  });
});
