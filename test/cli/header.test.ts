import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { writeFits } from '../../src/fits/index.js';
import { MARROW_HILL, scratchFolder, spotjoule } from '../support/command.js';

const folder = scratchFolder();

describe('spotjoule header', () => {
  it('prints HDUs, geometry, observer, unit and noise', () => {
    const run = spotjoule(folder, 'header', join(MARROW_HILL, 'encodings', 'rice.fits'));
    expect(run.stderr).toBe('');
    expect(run.status).toBe(0);
    expect(run.stdout).toMatch(/HDU 0 +empty/);
    expect(run.stdout).toMatch(/HDU 1 +compressed-image, 96 x 96, BITPIX 16, RICE_1/);
    expect(run.stdout).toMatch(/magnetogram +HDU 1, 96 x 96 pixels, line-of-sight field/);
    expect(run.stdout).toMatch(/observed +2031-05-14T08:00:00/);
    expect(run.stdout).toMatch(/noise +[78]\.\d+ G/);
    expect(run.stdout).toMatch(/geometry +helioprojective, TAN/);
    expect(run.stdout).toMatch(/observer latitude B0 +-2\.810 deg \(header\)/);
    expect(run.stdout).toMatch(/observer distance +1\.01055 au \(header\)/);
  });

  it('shows the HDUs of a file it refuses, the reason on stderr, exit code 1', () => {
    const bare = join(folder, 'bare.fits');
    writeFileSync(
      bare,
      writeFits([{ values: new Float32Array(64).fill(5), shape: [8, 8], cards: [] }]),
    );
    const run = spotjoule(folder, 'header', bare);
    expect(run.status).toBe(1);
    expect(run.stdout).toMatch(/HDU 0 +image, 8 x 8, BITPIX -32, an image/);
    expect(run.stderr).toMatch(
      /^spotjoule: \S*bare\.fits.*--date.*--pixel-scale ARCSEC.*--at LON,LAT.*--unit/,
    );
    expect(run.stderr.trimEnd().split('\n')).toHaveLength(1);
  });

  it('takes what the user says', () => {
    const bare = join(folder, 'bare.fits');
    const run = spotjoule(
      folder,
      'header',
      bare,
      '--date',
      '2031-05-14',
      '--at',
      '10,-5',
      '--pixel-scale',
      '2',
      '--unit',
      'kG',
    );
    expect(run.status).toBe(0);
    expect(run.stdout).toMatch(/values +5000 G to 5000 G/);
    expect(run.stdout).toMatch(/observer latitude B0 +-2\.8\d+ deg \((option|ephemeris)\)/);
  });

  it('names a file that is not there', () => {
    const run = spotjoule(folder, 'header', 'missing.fits');
    expect(run.status).toBe(1);
    expect(run.stderr).toBe('spotjoule: missing.fits: no such file\n');
  });
});
