import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { headerFromText } from '../../src/fits/header.js';
import { readGeometry } from '../../src/geometry/image-geometry.js';
import { readPlacement } from '../../src/geometry/solar-map.js';
import { pixelToWorld, type Wcs } from '../../src/geometry/wcs.js';
import { type Cards, headerOf, OBSERVER, REAL_DATA } from './support.js';

const ANGULAR_RADIUS = Math.asin(OBSERVER.solarRadiusM / OBSERVER.distanceM);

function read(cards: Cards, nx = 200, ny = 100, options = {}) {
  const input = { header: headerOf(cards), nx, ny, observer: OBSERVER, options };
  return readGeometry({ ...input, angularRadius: ANGULAR_RADIUS });
}

/** Arcsec west and north at a pixel counted from 1. */
function arcsec(wcs: Wcs | undefined, x: number, y: number): [number, number] {
  const out = [0, 0];
  if (!wcs || !pixelToWorld(wcs, x - 1, y - 1, out)) throw new Error('no position');
  return [out[0] * 3600, out[1] * 3600];
}

describe('headers without a celestial WCS', () => {
  it('reads linear solar-x axes in arcsec, with rotation about CRPIX', () => {
    const cards = {
      CTYPE1: 'Solar-X',
      CTYPE2: 'Solar-Y',
      CRPIX1: 100,
      CRPIX2: 50,
      CRVAL1: -8,
      CRVAL2: -230,
      CDELT1: 0.2,
      CDELT2: 0.2,
      CROTA1: 90,
      CROTA2: 90,
    };
    const { geometry, warnings } = read(cards);
    expect(warnings).toEqual([]);
    const [x, y] = arcsec(geometry?.wcs, 110, 50);
    // 3 digits: a plane tangent at disk centre differs from small angles by theta^3 / 3.
    expect(x).toBeCloseTo(-8, 3);
    expect(y).toBeCloseTo(-228, 3);
  });
  it('takes scale in solar radii', () => {
    const cards = {
      CTYPE1: 'SOLX',
      CTYPE2: 'SOLY',
      CUNIT1: 'solRad',
      CUNIT2: 'solRad',
      CRPIX1: 50,
      CRPIX2: 50,
      CDELT1: 0.01,
      CDELT2: 0.01,
    };
    expect(arcsec(read(cards).geometry?.wcs, 150, 50)[0]).toBeCloseTo(959.231, 2);
  });
  it('takes scale from the disk radius in pixels where there is no CDELT', () => {
    const cards = {
      CTYPE1: 'GONGX',
      CTYPE2: 'GONGY',
      CRPIX1: 50,
      CRPIX2: 50,
      CRVAL1: 0,
      CRVAL2: 0,
      FNDLMBMI: 39.9,
      FNDLMBMA: 40.1,
    };
    expect(arcsec(read(cards).geometry?.wcs, 90, 50)[0]).toBeCloseTo(959.231, 2);
  });
  it('turns the picture by the angle of solar north where there is no rotation keyword', () => {
    const plain = {
      CTYPE1: 'solar-x',
      CTYPE2: 'solar-y',
      CRPIX1: 50,
      CRPIX2: 50,
      CDELT1: 2,
      CDELT2: 2,
    };
    const [x, y] = arcsec(read({ ...plain, SOLAR_P0: -180 }).geometry?.wcs, 60, 55);
    expect(x).toBeCloseTo(-20, 4);
    expect(y).toBeCloseTo(-10, 4);
    // North 90 degrees counter-clockwise from up points left, so going left is going north.
    expect(arcsec(read({ ...plain, SOLAR_P0: 90 }).geometry?.wcs, 40, 50)[1]).toBeCloseTo(20, 4);
    const both = { ...plain, CROTA2: 0, SOLAR_P0: 90 };
    expect(arcsec(read(both).geometry?.wcs, 60, 50)[0]).toBeCloseTo(20, 4);
  });
  it('takes XCEN, YCEN, XSCALE, YSCALE, in quotes, where the axes are something else', () => {
    const cards = {
      CTYPE1: 'Wavelength',
      CTYPE2: 'Solar-Y',
      CRPIX1: '      56.5000',
      CDELT1: '     0.021549000',
      CRVAL1: '      6302.08',
      XCEN: '      184.501',
      YCEN: '      527.821',
      XSCALE: '      0.29714000',
      YSCALE: '      0.31998000',
    };
    const wcs = read(cards, 512, 512).geometry?.wcs;
    const [x, y] = arcsec(wcs, 256.5, 256.5);
    expect(x).toBeCloseTo(184.501, 2);
    expect(y).toBeCloseTo(527.821, 2);
    expect(arcsec(wcs, 257.5, 256.5)[0] - x).toBeCloseTo(0.29714, 3);
    expect(arcsec(wcs, 256.5, 257.5)[1] - y).toBeCloseTo(0.31998, 3);
  });
  it('names what is missing', () => {
    expect(read({}).missing).toEqual(['--pixel-scale ARCSEC', '--at LON,LAT']);
    expect(read({ XSCALE: 0.5, YSCALE: 0.5 }).missing).toEqual(['--at LON,LAT']);
    const centred = { CTYPE1: 'GONGX', CTYPE2: 'GONGY', CRPIX1: 50, CRPIX2: 50 };
    expect(read(centred).missing).toEqual(['--pixel-scale ARCSEC']);
  });
});

describe('options win', () => {
  it('--pixel-scale alone completes a header that lacks only the scale', () => {
    const centred = { CTYPE1: 'HPLN-TAN', CTYPE2: 'HPLT-TAN', CRPIX1: 50, CRPIX2: 50 };
    const { geometry } = read(centred, 200, 100, { pixelScaleArcsec: 3 });
    expect(arcsec(geometry?.wcs, 60, 50)[0]).toBeCloseTo(30, 3);
  });
  it('--pixel-scale keeps the rotation of the header', () => {
    const cards = { CTYPE1: 'HPLN-TAN', CTYPE2: 'HPLT-TAN', CUNIT1: 'arcsec', CUNIT2: 'arcsec' };
    const turned = { ...cards, CRPIX1: 50, CRPIX2: 50, CDELT1: 1, CDELT2: 1, CROTA2: 90 };
    const { geometry } = read(turned, 200, 100, { pixelScaleArcsec: 3 });
    expect(arcsec(geometry?.wcs, 60, 50)[1]).toBeCloseTo(30, 3);
  });
  it('--at refuses places out of sight', () => {
    const options = { pixelScaleArcsec: 1, at: { lonDeg: 120, latDeg: 0 } };
    expect(() => read({}, 200, 100, options)).toThrow(/120,0 of --at is not on the visible disk/);
  });
});

describe.skipIf(!REAL_DATA)('geometry of real headers', () => {
  const place = (name: string, nx: number, ny: number) => {
    const text = readFileSync(`${REAL_DATA}/headers/${name}.header.txt`, 'latin1');
    return readPlacement(headerFromText(text), nx, ny);
  };
  it('GONG: scale from the radius in radians and the limb fit in pixels', () => {
    const { geometry, missing } = place('gong_magnetogram', 860, 860);
    expect(missing).toEqual([]);
    // Limb: 385.256 pixels from FNDLMBXC, FNDLMBYC, seen at 0.0047311 rad.
    expect(arcsec(geometry?.wcs, 422.5472 + 385.2565, 442.6184)[0]).toBeCloseTo(975.86, 1);
    expect(arcsec(geometry?.wcs, 422.5472, 442.6184)[1]).toBeCloseTo(0, 6);
  });
  it('SOLIS: solar radii', () => {
    const { geometry } = place('svsm_e3100_S2_20110625_1856', 2048, 2048);
    expect(arcsec(geometry?.wcs, 1024.5 + 1 / 0.00105924, 1024.5)[0]).toBeCloseTo(944.07, 1);
  });
  it('HMI patch in the camera frame: far west of centre, upside down', () => {
    const { geometry } = place('hmi_patch_camera_frame', 432, 381);
    const [x, y] = arcsec(geometry?.wcs, 216, 190);
    // (216 + 1238.09) and (190 - 316.11) pixels of 0.504042 arcsec, turned by 180.013 degrees.
    expect(x).toBeCloseTo(-732.93, 0);
    expect(y).toBeCloseTo(63.4, 0);
  });
  it('HMI patch on its own grid: Carrington', () => {
    const { geometry } = place('hmi_patch_cea_frame', 689, 363);
    expect(geometry?.frame).toBe('carrington');
    const out = [0, 0];
    pixelToWorld(geometry!.wcs, 344, 181, out);
    expect(out[0]).toBeCloseTo(-27.3923531, 9);
    expect(out[1]).toBeCloseTo(5.34054995, 9);
  });
  it('PHI: PC matrix without a warning, the bare CROTA agrees', () => {
    const name = 'solo_L2_phi-hrt-blos_20241004T003104_V202506050052_0450040601';
    const { geometry, warnings } = place(name, 1792, 1792);
    expect(warnings).toEqual([]);
    const [x, y] = arcsec(geometry?.wcs, 1112.0914, 759.0711);
    expect(x).toBeCloseTo(-164.0915, 6);
    expect(y).toBeCloseTo(-482.0414, 6);
  });
});
