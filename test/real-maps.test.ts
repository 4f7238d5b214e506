import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { readFitsFile } from '../src/fits/index.js';
import { parseAzimuthZero } from '../src/geometry/azimuth-zero.js';
import { mapPixelToStonyhurst, readSolarMap } from '../src/geometry/solar-map.js';
import { estimateNoise } from '../src/grid/noise.js';
import { quickLook, vectorQuickLook } from '../src/report/quick-look.js';
import { realData, spotjoule } from './support/command.js';

const folder = realData();
const path = (file: string) => join(folder ?? '', file);

/**
 * Active regions as published (physics of the field, from memory unless a paper is named): unsigned flux 1e20 to
 * 2e23 Mx; potential energy up to 4e33 erg (Aschwanden, Xu & Jing 2014, ApJ 797, 50); spot fields up to
 * 6000 G.
 */
function expectPlausible(file: string, reading = {}) {
  const [region] = quickLook(path(file), { reading }).document.regions;
  const value = (key: keyof typeof region.quantities) =>
    region.quantities[key]?.value ?? Number.NaN;
  expect(value('unsigned_flux')).toBeGreaterThan(1e20);
  expect(value('unsigned_flux')).toBeLessThan(2e23);
  expect(value('potential_energy')).toBeGreaterThan(1e22);
  expect(value('potential_energy')).toBeLessThan(4e26);
  expect(value('free_energy')).toBeGreaterThan(0);
  expect(value('free_energy')).toBeLessThan(value('free_energy_ceiling'));
  expect(Math.max(value('peak_positive_field'), -value('peak_negative_field'))).toBeLessThan(6000);
  return region;
}

describe.skipIf(!folder)('real magnetograms', () => {
  it('of 15 October 2010 shows the big southern region, without the spike', () => {
    const region = expectPlausible('los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits');
    expect(Math.abs(region.center.stonyhurst_latitude + 20)).toBeLessThan(3);
    // The file's README: the true strongest field on that disk is about 1330 G along the line of sight.
    expect(
      Math.max(
        region.quantities.peak_positive_field!.value!,
        -region.quantities.peak_negative_field!.value!,
      ),
    ).toBeLessThan(1800);
    expect(region.flags.join()).toMatch(/lone spike/);
    expect(region.settings.noise_G).toBeGreaterThan(8);
    expect(region.settings.noise_G).toBeLessThan(20);
  });

  it.each([
    'los/mdi_fd_M_96m_19991211_000000_TAI_rice.fits',
    'los/mdi_fd_M_20101015_191200_TAI_rice_64x64.fits',
    'los/mdi_fd_M_20090131_080000_TAI_128x128_oldheader.fits',
    'derived/mdi_20101015_ar_cutout_256x256.fits',
    'derived/mdi_19991211_ar_cutout_256x256.fits',
    'derived/mdi_20101015_fulldisk_rebin_256x256.fits',
  ])('%s gives plausible figures', (file) => {
    expectPlausible(file);
  });

  it('without geometry is refused until the user gives it', () => {
    const file = 'los/hmi_blos_ar_cutout_200x200_nowcs.fits';
    expect(() => quickLook(path(file))).toThrow(
      /--date.*--pixel-scale ARCSEC.*--at LON,LAT.*--unit/,
    );
    const run = spotjoule(mkdtempSync(join(tmpdir(), 'spotjoule-test-')), 'quicklook', path(file));
    expect(run.status).toBe(1);
    expect(run.stderr.trimEnd().split('\n')).toHaveLength(1);
    const region = expectPlausible(file, {
      dateIso: '2011-02-14T00:00:00Z',
      at: { lonDeg: 0, latDeg: -20 },
      pixelScaleArcsec: 0.5,
      unit: 'G',
    });
    expect(region.center.stonyhurst_latitude).toBeCloseTo(-20, 0);
  });

  it.each([
    ['los/hinode_sotfg_MG4_VI_20110214_030443_1408x704.fits', /unit/],
    ['los/hinode_sotfg_MG4_VI_20110214_030443_640x300_stalecrpix.fits', /unit/],
    ['other/hmi_continuum_20140301_100x100_crota180.fits', /CONTINUUM INTENSITY/],
    ['other/solis_vsm_20110625_2048x2048_truncated.fits', /magnetogram|truncated|bytes/],
  ])('%s is refused with the reason', (file, reason) => {
    expect(() => quickLook(path(file))).toThrow(reason);
  });

  it('a region cut by hand and the same one on the full disk have the same peak within 5 %', () => {
    const disk = quickLook(path('los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits')).document
      .regions[0];
    const cut = quickLook(path('derived/mdi_20101015_ar_cutout_256x256.fits')).document.regions[0];
    expect(
      Math.abs(
        cut.quantities.peak_negative_field!.value! / disk.quantities.peak_negative_field!.value! -
          1,
      ),
    ).toBeLessThan(0.05);
  });

  it("the Sun's general field outside active regions, noise removed, is of order 1 to 25 G", () => {
    // Common practice, no source. Mean unsigned line-of-sight field of the disk within 60 degrees, away from every
    // pixel above 100 G; the noise's own mean is taken out in squares.
    for (const file of [
      'los/mdi_fd_M_96m_20101015_000000_TAI_rice.fits',
      'los/mdi_fd_M_96m_19991211_000000_TAI_rice.fits',
    ]) {
      const map = readSolarMap(readFitsFile(path(file)));
      const noise = estimateNoise(map.values, map.nx, map.ny);
      let sum = 0;
      let count = 0;
      for (let y = 0; y < map.ny; y += 3) {
        for (let x = 0; x < map.nx; x += 3) {
          const b = map.values[x + map.nx * y];
          const place = mapPixelToStonyhurst(map, x, y);
          if (Number.isNaN(b) || Math.abs(b) > 100 || !place || Math.hypot(...place) > 60) continue;
          sum += b * b;
          count++;
        }
      }
      const general = Math.sqrt(Math.max(0, sum / count - noise * noise));
      expect(count).toBeGreaterThan(10_000);
      expect(general).toBeGreaterThan(0.5);
      expect(general).toBeLessThan(25);
    }
  });

  it.each(['0647_field-inc-azi_512x512', '1132_field-inc-azi_508x512'])(
    'the vector map of 4 March 2011, %s, gives measured figures in published ranges',
    (name) => {
      const file = path(`vector/hinode_sotsp_20110304_${name}.fits`);
      const sources = (['strength', 'inclination', 'azimuth'] as const).map((component, plane) => ({
        name: component,
        file,
        plane,
      }));
      // The instrument's azimuth counts from the +x axis; half-arcsecond pixels keep the test short.
      const reading = { azimuthZero: parseAzimuthZero('+x,ccw') };
      const { document } = vectorQuickLook(sources, { reading, analysis: { pixelMm: 0.6 } });
      const [{ quantities, center, flags, settings }] = document.regions;
      const value = (key: keyof typeof quantities) => quantities[key]?.value ?? Number.NaN;
      expect(Math.abs(center.stonyhurst_latitude - 26)).toBeLessThan(1.5);
      expect(settings.radial_field).toBe('vector');
      // Unsigned flux 1e21 to 1e23 Mx; alpha 1e-8 per metre and up to 1e-7 (from memory); free energy 1 to 25 %
      // of the potential energy (Aschwanden, Xu & Jing 2014, ApJ 797, 50), doubled here for the proxy's error;
      // vertical net force mostly within -0.5 to 0.5 of the pressure (Zhang & Zhang 2023, arXiv 2309.15407).
      expect(value('unsigned_flux')).toBeLessThan(1e23);
      expect(Math.abs(value('force_free_alpha'))).toBeLessThan(0.1);
      expect(value('free_energy') / value('potential_energy')).toBeGreaterThan(0.005);
      expect(value('free_energy') / value('potential_energy')).toBeLessThan(0.5);
      expect(Math.abs(value('net_force_z'))).toBeLessThan(0.5);
      expect(quantities.free_energy?.basis).toBe('measured');
      expect(value('disambiguation_flux_fraction_changed')).toBeLessThan(0.3);
      expect(flags.join()).toMatch(/180 degree ambiguity resolved by minimum energy/);
      expect(flags.join()).not.toMatch(/another axis/);
      // Counted from the default axis, these azimuths lie across the potential field: the reader is told.
      const wrong = vectorQuickLook(sources, { analysis: { pixelMm: 1, disambiguation: 'acute' } });
      expect(wrong.document.regions[0].flags.join()).toMatch(/counted from another axis/);
    },
  );
});
