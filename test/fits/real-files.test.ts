// The published files, against the facts that their README states (found with an independent reader).
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';
import { imageHdus, numberAt, readFitsFile, readImage, stringAt } from '../../src/fits/index.js';

const root = process.env.SPOTJOULE_REAL_DATA ?? '../shared/data/real';
const present = existsSync(join(root, 'los'));
if (!present) console.log(`not run: no real files in ${root}`);

const open = (path: string) => readFitsFile(join(root, path));

describe.runIf(present)('real files', () => {
  test.each([
    ['los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits', 298_490],
    ['los/mdi_fd_M_96m_19991211_000000_TAI_rice.fits', 272_401],
  ])('%s: RICE_1 with a plain BLANK', (path, missing) => {
    const file = open(path);
    expect(file.hdus.map(({ kind }) => kind)).toEqual(['empty', 'compressed-image']);
    const image = readImage(file, imageHdus(file)[0].index);
    expect([image.nx, image.ny, image.bunit]).toEqual([1024, 1024, 'Gauss']);
    expect(image.missing).toBe(missing); // the README says 270 to 300 thousand; astropy on funpack's output: this
    expect(numberAt(image.header, 'BITPIX', 'NAXIS1')).toBe(32);
    expect(stringAt(image.header, 'TTYPE1', 'ZCMPTYPE')).toBeUndefined();
  });

  test('the spike of +3027 G at column 189, row 752 counted from 1', () => {
    const { values, nx } = readImage(open('los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits'), 1);
    const at = 188 + nx * 751;
    expect(Math.round(values[at])).toBe(3027);
    for (const step of [-1, 1, -nx, nx]) expect(Math.abs(values[at + step])).toBeLessThan(25);
    const rest = Float64Array.from(values).filter(
      (value, index) => index !== at && !Number.isNaN(value),
    );
    const strongest = rest.reduce((most, value) => Math.max(most, Math.abs(value)), 0);
    expect(strongest).toBeGreaterThan(1320);
    expect(strongest).toBeLessThan(1340);
    // quantised to 0.01 G
    for (const value of rest.slice(0, 1000))
      expect(value * 100).toBeCloseTo(Math.round(value * 100), 6);
  });

  test('the derived cut-outs hold the same pixels as the files they come from', () => {
    for (const [source, cut, x0, y0] of [
      [
        'los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits',
        'derived/mdi_20101015_ar_cutout_256x256.fits',
        384,
        180,
      ],
      [
        'los/mdi_fd_M_96m_19991211_000000_TAI_rice.fits',
        'derived/mdi_19991211_ar_cutout_256x256.fits',
        634,
        468,
      ],
    ] as const) {
      const whole = readImage(open(source), 1);
      const part = readImage(open(cut), 0);
      let wrong = 0;
      part.values.forEach((value, i) => {
        const at = x0 + (i % 256) + whole.nx * (y0 + Math.floor(i / 256));
        if (Math.fround(whole.values[at]) !== value) wrong++;
      });
      expect(wrong).toBe(0);
    }
    expect(readImage(open('derived/mdi_20101015_fulldisk_rebin_256x256.fits'), 0).missing).toBe(
      19_017,
    );
  });

  test.each([
    ['los/mdi_fd_M_20101015_191200_TAI_rice_64x64.fits', 64, 64, 'Float64Array'],
    ['los/mdi_fd_M_20090131_080000_TAI_128x128_oldheader.fits', 128, 128, 'Float64Array'],
    ['los/hmi_blos_ar_cutout_200x200_nowcs.fits', 200, 200, 'Float64Array'],
    ['los/hinode_sotfg_MG4_VI_20110214_030443_1408x704.fits', 1408, 704, 'Float32Array'],
    ['los/hinode_sotfg_MG4_VI_20110214_030443_640x300_stalecrpix.fits', 640, 300, 'Float32Array'],
  ])('%s', (path, nx, ny, kind) => {
    const file = open(path);
    const candidates = imageHdus(file);
    expect(candidates.length).toBe(1); // the DUMP extension is none
    const image = readImage(file, candidates[0].index);
    expect([image.nx, image.ny, image.values.constructor.name]).toEqual([nx, ny, kind]);
  });

  test('vector file: a cube whose planes must be asked for; 5000 G and angles as its README says', () => {
    const file = open('vector/hinode_sotsp_20110304_0647_field-inc-azi_512x512.fits');
    expect(() => readImage(file, 0)).toThrow(/cube of 512 x 512 x 3/);
    const planes = [0, 1, 2].map((plane) =>
      Float64Array.from(readImage(file, 0, { plane }).values),
    );
    const most = planes.map((values) => values.reduce((a, b) => Math.max(a, b), 0));
    expect(most).toEqual([5000, 180, 180]);
    expect(planes[0].filter((value) => value === 5000).length).toBe(18);
    const later = open('vector/hinode_sotsp_20110304_1132_field-inc-azi_508x512.fits');
    expect(numberAt(later.hdus[0].header, 'XCEN')).toBe(223.202);
    expect(stringAt(file.hdus[0].header, 'TIME_D$O')).toBeDefined();
  });

  test('integer BLANK on floating point: ignored with a warning, 2430 NaN', () => {
    const image = readImage(open('other/hmi_continuum_20140301_100x100_crota180.fits'), 0);
    expect(image.missing).toBe(2430);
    expect(image.warnings.join()).toMatch(/BLANK has no meaning/);
  });

  test('truncated file: listed, with its header, and its image refused with both numbers', () => {
    const file = open('other/solis_vsm_20110625_2048x2048_truncated.fits');
    expect(file.hdus[0].shape).toEqual([2048, 2048]);
    expect(file.warnings.join()).toMatch(/659392 of 16777216/);
    expect(() => readImage(file, 0)).toThrow(/659392 of 16777216 data bytes/);
  });
});
