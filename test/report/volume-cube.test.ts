import { spawnSync } from 'node:child_process';
import { existsSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { UsageError } from '../../src/errors.js';
import { analyseMap } from '../../src/figures/analyse-map.js';
import { regionFieldLines, regionVolume } from '../../src/figures/region-volume.js';
import { parseFits, readFitsFile, readImage, stringAt } from '../../src/fits/index.js';
import { stonyhurstToPatch } from '../../src/geometry/patch-position.js';
import { readSolarMap } from '../../src/geometry/solar-map.js';
import { volumeCube } from '../../src/report/volume-cube.js';
import { MARROW_HILL, scratchFolder } from '../support/command.js';

const map = readSolarMap(readFitsFile(`${MARROW_HILL}/mh-1-20310514-small.fits`));
const analysis = analyseMap(map, {
  center: { lonDeg: 12, latDeg: -18 },
  extentMm: 150,
});
const folder = scratchFolder();
const volume = regionVolume(analysis, { levels: 5, topMm: 20, every: 2 });
const bytes = volumeCube(volume, 0, analysis, map, '0.0.0');

const PYTHON = '/usr/bin/python3';
/** Prints what astropy makes of a cube: shapes, units, the world position of two voxels, a few numbers. */
const READER = `
import json, sys, warnings
from astropy.io import fits
from astropy.wcs import WCS
warnings.simplefilter('ignore')
with fits.open(sys.argv[1], checksum=True) as hdus:
    hdus.verify('exception')
    wcs = WCS(hdus[2].header)
    print(json.dumps({
        'names': [h.name for h in hdus], 'shape': list(hdus[0].data.shape),
        'units': [h.header['BUNIT'] for h in hdus], 'axes': list(wcs.world_axis_units),
        'places': [[float(c) for c in wcs.pixel_to_world_values(*p)] for p in ((10, 20, 0), (15, 5, 4))],
        'values': [float(h.data[3, 20, 15]) for h in hdus]}))
`;

/** Voxels, 0-based, and the Carrington longitude and latitude that astropy 5.2.1 gives them. */
const PLACES = [
  { voxel: [10, 20, 0], lonLat: [9.000368052916087, -18.048221262770635] },
  { voxel: [15, 5, 4], lonLat: [10.536864658277004, -22.580204264219063] },
] as const;

/** Column and row of the patch by our own projection. */
function patchPixel(lonDeg: number, latDeg: number): readonly [number, number] {
  const { patch } = analysis;
  const { stonyhurstLongitudeDeg, carringtonLongitudeDeg } = patch.center;
  return stonyhurstToPatch(
    patch,
    lonDeg + stonyhurstLongitudeDeg - carringtonLongitudeDeg,
    latDeg,
  )!;
}

describe('a volume as FITS cubes', () => {
  it('reads back with names, units and a linear height', () => {
    const file = parseFits(bytes, 'volume.fits');
    expect(file.hdus).toHaveLength(3);
    const at = 15 + volume.nx * (20 + volume.ny * 3);
    [volume.x, volume.y, volume.z].forEach((component, hdu) => {
      const image = readImage(file, hdu, { plane: 3 });
      expect(image.bunit).toBe('G');
      expect(stringAt(image.header, 'EXTNAME')).toBe(['BX', 'BY', 'BZ'][hdu]);
      expect(stringAt(image.header, 'CUNIT3')).toBe('Mm');
      expect(image.values[15 + volume.nx * 20]).toBe(component[at]);
    });
  });

  it('is read by astropy with the places of the patch', () => {
    const path = join(folder, 'volume.fits');
    writeFileSync(path, bytes);
    const run = existsSync(PYTHON)
      ? spawnSync(PYTHON, ['-c', READER, path], { encoding: 'utf8' })
      : undefined;
    if (!run || /No module named/.test(run.stderr)) {
      console.warn('astropy is not here (Debian python3-astropy): the cube is not read by it');
      return;
    }
    expect(run.stderr).toBe('');
    const seen = JSON.parse(run.stdout);
    expect(seen.names).toEqual(['BX', 'BY', 'BZ']);
    expect(seen.shape).toEqual([5, volume.ny, volume.nx]);
    expect(seen.units).toEqual(['G', 'G', 'G']);
    expect(seen.axes).toEqual(['deg', 'deg', 'Mm']);
    const at = 15 + volume.nx * (20 + volume.ny * 3);
    expect(seen.values).toEqual([volume.x[at], volume.y[at], volume.z[at]]);
    seen.places.forEach(([lon, lat, heightMm]: number[], i: number) => {
      expect(lon).toBeCloseTo(PLACES[i].lonLat[0], 8);
      expect(lat).toBeCloseTo(PLACES[i].lonLat[1], 8);
      expect(heightMm).toBeCloseTo(5 * PLACES[i].voxel[2], 9);
    });
  });

  it('has the places that astropy was seen to give it', () => {
    for (const { voxel, lonLat } of PLACES) {
      const [column, row] = patchPixel(lonLat[0], lonLat[1]);
      expect(column).toBeCloseTo(2 * voxel[0], 6);
      expect(row).toBeCloseTo(2 * voxel[1], 6);
    }
  });

  it('must have equal steps of height', () => {
    const uneven = { ...volume, heightsMm: Float64Array.of(0, 1, 3, 4, 5) };
    expect(() => volumeCube(uneven, 0, analysis, map, '0')).toThrow(/equally far apart/);
  });
});

describe('the volume of a region', () => {
  it('starts with its radial field and ends at half the shorter side by default', () => {
    const whole = regionVolume(analysis, { levels: 2 });
    const { data } = analysis.radialField.values;
    const peak = Math.max(...data.filter((b) => !Number.isNaN(b)).map(Math.abs));
    const known = data.findIndex((b) => Math.abs(b) > peak / 2);
    expect(Math.abs(whole.z[known] - data[known])).toBeLessThan(1e-5 * peak);
    const [ny, nx] = analysis.radialField.values.shape;
    expect(whole.heightsMm[1]).toBeCloseTo(0.5 * Math.min(nx, ny) * analysis.patch.pixelMm, 9);
  });

  it('is refused when too large, or with an alpha the patch does not allow', () => {
    expect(() => regionVolume({ ...analysis }, { levels: 100_000 })).toThrow(UsageError);
    expect(() => regionVolume(analysis, { alphaPerMm: 1 })).toThrow(/too large/);
    expect(() => regionFieldLines(analysis, 3, -1)).toThrow(UsageError);
  });

  it('has field lines, closed ones between opposite polarities', () => {
    const lines = regionFieldLines(analysis, 40);
    expect(lines).toHaveLength(40);
    expect(lines.filter(({ closed }) => closed).length).toBeGreaterThan(15);
    const { data } = analysis.radialField.values;
    const [, nx] = analysis.radialField.values.shape;
    const field = (x: number, y: number) =>
      data[Math.round(x / analysis.patch.pixelMm) + nx * Math.round(y / analysis.patch.pixelMm)];
    const strong = lines.filter(
      ({ closed, points }) =>
        closed && Math.abs(field(points[0], points[1])) > 200 && points.length > 30,
    );
    expect(strong.length).toBeGreaterThan(3);
    for (const { points } of strong) {
      expect(field(points[0], points[1])).toBeGreaterThan(0);
      expect(field(points.at(-3)!, points.at(-2)!)).toBeLessThan(0);
    }
  });
});
