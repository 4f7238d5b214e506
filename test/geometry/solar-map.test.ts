import { describe, expect, it } from 'vitest';
import { DataError, GeometryError, UsageError } from '../../src/errors.js';
import { readFitsFile } from '../../src/fits/file.js';
import { makePatch } from '../../src/geometry/make-patch.js';
import {
  type MapOptions,
  mapPixelToStonyhurst,
  readSolarMap,
  stonyhurstToMapPixel,
} from '../../src/geometry/solar-map.js';
import { arcsecCards, fitsOf, REAL_DATA } from './support.js';

const DATE = { 'DATE-OBS': '2031-05-01T12:00:00' };
const bare = () => fitsOf({}, 50, 40);

describe('a bare image', () => {
  it('is refused with the options that would make it usable, only those missing', () => {
    expect(() => readSolarMap(bare())).toThrow(GeometryError);
    const attempt = (options: MapOptions, cards = {}) => {
      try {
        readSolarMap(fitsOf(cards, 50, 40), options);
      } catch (error) {
        return (error as Error).message.replace(/^.*; give /, '');
      }
      return 'accepted';
    };
    expect(attempt({})).toBe('--date DATE, --pixel-scale ARCSEC, --at LON,LAT and --unit G');
    expect(attempt({ dateIso: '2031-05-01', unit: 'G' })).toBe(
      '--pixel-scale ARCSEC and --at LON,LAT',
    );
    expect(attempt({}, { BUNIT: 'G', ...DATE })).toBe('--pixel-scale ARCSEC and --at LON,LAT');
    const at = { lonDeg: 10, latDeg: -12 };
    expect(attempt({ at, pixelScaleArcsec: 0.5, unit: 'G' })).toBe('--date DATE');
    expect(attempt({ at, dateIso: '2031-05-01', unit: 'G' })).toBe('--pixel-scale ARCSEC');
    expect(attempt({ at, dateIso: '2031-05-01', unit: 'G', pixelScaleArcsec: 0.5 })).toBe(
      'accepted',
    );
  });
  it('is placed by them', () => {
    const options = {
      at: { lonDeg: 10, latDeg: -12 },
      pixelScaleArcsec: 0.5,
      dateIso: '2031-05-01',
      unit: 'mT',
    };
    const map = readSolarMap(bare(), options);
    const [lon, lat] = mapPixelToStonyhurst(map, 24.5, 19.5)!;
    expect(lon).toBeCloseTo(10, 9);
    expect(lat).toBeCloseTo(-12, 9);
    expect(map.values[3]).toBe(30); // 3 mT
    expect(map.observer.basis.latitude).toBe('option');
    expect(map.observed).toBe('2031-05-01T00:00:00.000Z');
    const [x, y] = stonyhurstToMapPixel(map, lon, lat)!;
    expect(Math.hypot(x - 24.5, y - 19.5)).toBeLessThan(1e-7);
    // 0.5 arcsec at 1.0075 au less the radius: 0.3637 Mm a pixel, foreshortened by mu.
    const [nextLon] = mapPixelToStonyhurst(map, 25.5, 19.5)!;
    const step = ((nextLon - lon) * Math.PI) / 180;
    expect(step * 695.7 * Math.cos((12 * Math.PI) / 180)).toBeCloseTo(0.3637 / 0.98, 2);
  });
  it('refuses senseless options as usage', () => {
    expect(() => readSolarMap(bare(), { dateIso: 'soon' })).toThrow(UsageError);
    expect(() => readSolarMap(bare(), { unit: 'DN' })).toThrow(UsageError);
  });
});

describe('a placed image', () => {
  const cards = { ...arcsecCards(20, 110, 110), ...DATE, BUNIT: 'Mx/cm^2' };
  it('is read with nothing but a date', () => {
    const map = readSolarMap(fitsOf(cards, 110, 110));
    expect(map).toMatchObject({
      nx: 110,
      ny: 110,
      fullDisk: true,
      component: 'line-of-sight',
      hdu: 0,
    });
    expect(map.unit).toBe('Mx/cm^2');
    expect(map.warnings).toEqual([]);
    expect(mapPixelToStonyhurst(map, 0, 0)).toBeUndefined();
    expect(stonyhurstToMapPixel(map, 150, 0)).toBeUndefined();
    expect(mapPixelToStonyhurst(map, 54.5, 54.5)![1]).toBeCloseTo(map.observer.latitudeDeg, 9);
  });
  it('needs a unit', () => {
    const { BUNIT: _, ...unitless } = cards;
    expect(() => readSolarMap(fitsOf(unitless, 110, 110))).toThrow(DataError);
    expect(() => readSolarMap(fitsOf(unitless, 110, 110))).toThrow(/no BUNIT.*--unit/);
    expect(readSolarMap(fitsOf(unitless, 110, 110), { unit: 'T' }).values[1]).toBe(1e4);
  });
  it('is refused off the disk, blank, and warned of where XCEN contradicts', () => {
    const away = fitsOf({ ...cards, CRPIX1: 500 }, 110, 110);
    expect(() => readSolarMap(away)).toThrow(
      /no pixel lies on the visible disk.*-88\d\d, -?0 arcsec/,
    );
    const values = new Float32Array(110 * 110).fill(Number.NaN);
    expect(() => readSolarMap(fitsOf(cards, 110, 110, values))).toThrow(
      /all of its pixels are blank/,
    );
    const stale = fitsOf({ ...cards, XCEN: 400, YCEN: 0 }, 110, 110);
    expect(readSolarMap(stale).warnings.join()).toMatch(/XCEN, YCEN say 400, 0/);
    const fine = fitsOf({ ...cards, XCEN: 100, YCEN: 0 }, 110, 110);
    expect(readSolarMap(fine).warnings).toEqual([]);
  });
  it('is no full disk when the limb is cut off', () => {
    const cut = fitsOf({ ...cards, CRPIX1: 75 }, 110, 110);
    expect(readSolarMap(cut).fullDisk).toBe(false);
  });
});

describe.skipIf(!REAL_DATA)('real files', () => {
  const map = (name: string, options: MapOptions = {}) =>
    readSolarMap(readFitsFile(`${REAL_DATA}/${name}`), options);
  const unsigned = (name: string, options: MapOptions = {}) => {
    const { patch } = makePatch(map(name, options));
    const sum = patch.field.values.data.reduce(
      (a, b) => a + (Number.isNaN(b) ? 0 : Math.abs(b)),
      0,
    );
    return { patch, flux: sum * patch.pixelMm ** 2 * 1e16 };
  };

  it('MDI 2010-10-15: the whole disk, and its big region at S20 in spite of the spike', () => {
    const disk = map('los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits');
    expect(disk.fullDisk).toBe(true);
    expect(disk.hdu).toBe(1);
    expect(disk.observed).toBe('2010-10-15T00:02:56.000Z');
    const { patch, warnings } = makePatch(disk);
    expect(warnings).toEqual([]);
    expect(Math.abs(patch.center.stonyhurstLatitudeDeg + 20)).toBeLessThan(3);
    expect(Math.abs(patch.center.stonyhurstLongitudeDeg)).toBeLessThan(5);
    const strongest = Math.max(...patch.field.values.data.map(Math.abs));
    expect(strongest).toBeGreaterThan(1000);
    expect(strongest).toBeLessThan(1500);
  });
  it('MDI 2010-10-15 rebinned and as 64 x 64 of 19 hours later: the same region', () => {
    const rebinned = unsigned('derived/mdi_20101015_fulldisk_rebin_256x256.fits').patch.center;
    expect(Math.abs(rebinned.stonyhurstLatitudeDeg + 20)).toBeLessThan(3);
    const small = makePatch(map('los/mdi_fd_M_20101015_191200_TAI_rice_64x64.fits')).patch.center;
    expect(Math.abs(small.stonyhurstLatitudeDeg + 20)).toBeLessThan(5);
    // Carrington longitude stays while the Sun turns by 10 degrees.
    const turned = small.carringtonLongitudeDeg - rebinned.carringtonLongitudeDeg;
    expect(Math.abs(turned)).toBeLessThan(8);
  });
  it('MDI 1999-12-11: strongest region 0.53 radii from centre, where the derived cut-out is', () => {
    const disk = map('los/mdi_fd_M_96m_19991211_000000_TAI_rice.fits');
    const { patch } = makePatch(disk);
    const { stonyhurstLongitudeDeg: lon, stonyhurstLatitudeDeg: lat } = patch.center;
    const [x, y] = stonyhurstToMapPixel(disk, lon, lat)!;
    expect(x).toBeGreaterThan(634);
    expect(x).toBeLessThan(634 + 256);
    expect(y).toBeGreaterThan(468);
    expect(y).toBeLessThan(468 + 256);
  });
  it('derived cut-outs lie where the disk has them', () => {
    const disk = map('los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits');
    const cut = map('derived/mdi_20101015_ar_cutout_256x256.fits');
    expect(cut.fullDisk).toBe(false);
    const [lon, lat] = mapPixelToStonyhurst(cut, 100, 50)!;
    const [diskLon, diskLat] = mapPixelToStonyhurst(disk, 384 + 100, 180 + 50)!;
    expect(lon).toBeCloseTo(diskLon, 3);
    expect(lat).toBeCloseTo(diskLat, 3);
    const cutPatch = unsigned('derived/mdi_20101015_ar_cutout_256x256.fits').patch;
    expect(Math.abs(cutPatch.center.stonyhurstLatitudeDeg + 20)).toBeLessThan(2);
  });
  it('keeps the flux of a real cut-out: sums over source pixels at their true area', () => {
    for (const name of ['mdi_20101015_ar_cutout_256x256', 'mdi_19991211_ar_cutout_256x256']) {
      const cut = map(`derived/${name}.fits`);
      const corner = (x: number, y: number) => {
        const at = mapPixelToStonyhurst(cut, x, y)!;
        const [lon, lat] = at.map((v) => (v * Math.PI) / 180);
        return [lon, Math.sin(lat)];
      };
      let net = 0;
      let unsignedFlux = 0;
      for (let y = 0; y < 256; y++)
        for (let x = 0; x < 256; x++) {
          // On (longitude, sine of latitude) areas are those of the sphere.
          const [a, b] = [corner(x - 0.5, y - 0.5), corner(x + 0.5, y - 0.5)];
          const [c, d] = [corner(x + 0.5, y + 0.5), corner(x - 0.5, y + 0.5)];
          const area =
            0.5 * Math.abs((c[0] - a[0]) * (d[1] - b[1]) - (d[0] - b[0]) * (c[1] - a[1]));
          const flux = cut.values[x + 256 * y] * area * 696 ** 2 * 1e16;
          net += flux;
          unsignedFlux += Math.abs(flux);
        }
      const { patch } = makePatch(cut);
      const data = patch.field.values.data;
      const found = data.reduce((sum, v) => sum + (Number.isNaN(v) ? 0 : v), 0);
      // Cells at the ragged edge are in or out as a whole: a thousandth of the unsigned flux.
      const difference = Math.abs(found * patch.pixelMm ** 2 * 1e16 - net);
      expect(difference / unsignedFlux).toBeLessThan(1e-3);
    }
  });
  it('MDI 2009 with the old header: upside down, and the radius wins over the distance', () => {
    const old = map('los/mdi_fd_M_20090131_080000_TAI_128x128_oldheader.fits');
    expect(old.fullDisk).toBe(true);
    expect(old.warnings.join()).toMatch(/contradicts the solar radius 985\.0/);
    expect(mapPixelToStonyhurst(old, 20, 63.5)![0]).toBeGreaterThan(30); // left is west
    expect(mapPixelToStonyhurst(old, 63.5, 20)![1]).toBeGreaterThan(20); // below is north
    // The limb by the values: the field is given up to 62 pixels from the middle.
    const limb = stonyhurstToMapPixel(old, 89, old.observer.latitudeDeg)!;
    expect(63.5 - limb[0]).toBeCloseTo(984.95 / 15.8848, 0);
    expect(makePatch(old).patch.nx).toBeGreaterThanOrEqual(8);
  });
  it('Hinode 2011-02-14: V/I needs a unit; NOAA 11158 at S20; the crop with stale CRPIX is flagged', () => {
    const name = 'los/hinode_sotfg_MG4_VI_20110214_030443_1408x704.fits';
    expect(() => map(name)).toThrow(/no BUNIT.*--unit/);
    const { patch } = makePatch(map(name, { unit: 'G' }));
    expect(Math.abs(patch.center.stonyhurstLatitudeDeg + 20)).toBeLessThan(2);
    const crop = map('los/hinode_sotfg_MG4_VI_20110214_030443_640x300_stalecrpix.fits', {
      unit: 'G',
    });
    expect(crop.warnings.join()).toMatch(/XCEN, YCEN say/);
    expect(map(name, { unit: 'G' }).warnings).toEqual([]);
  });
  it('Hinode vector file: placed by XCEN, XSCALE near N26 W12, pixels not square', () => {
    const name = 'vector/hinode_sotsp_20110304_0647_field-inc-azi_512x512.fits';
    const strength = map(name, { plane: 0, unit: 'G' });
    const [lon, lat] = mapPixelToStonyhurst(strength, 255.5, 255.5)!;
    expect(Math.abs(lon - 12)).toBeLessThan(1);
    expect(Math.abs(lat - 26)).toBeLessThan(1);
    expect(() => map(name, { unit: 'G' })).toThrow(/cube/);
  });
  it('bare HMI cut-out: refused with the options, read with them', () => {
    const name = 'los/hmi_blos_ar_cutout_200x200_nowcs.fits';
    expect(() => map(name)).toThrow(/--date DATE, --pixel-scale ARCSEC, --at LON,LAT and --unit G/);
    const options = { unit: 'G', dateIso: '2014-02-01', at: { lonDeg: 10, latDeg: -12 } };
    const { patch } = makePatch(map(name, { ...options, pixelScaleArcsec: 0.5 }));
    expect(patch.center.stonyhurstLongitudeDeg).toBeCloseTo(10, 0);
  });
  it('refuses the continuum picture and the truncated file', () => {
    expect(() => map('other/hmi_continuum_20140301_100x100_crota180.fits')).toThrow(
      /shows intensity \(CONTENT = 'CONTINUUM INTENSITY'\)/,
    );
    expect(() => map('other/solis_vsm_20110625_2048x2048_truncated.fits')).toThrow(
      /shows a line profile|cut short/,
    );
  });
});
