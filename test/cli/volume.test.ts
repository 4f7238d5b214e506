import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import sharp from 'sharp';
import { describe, expect, it } from 'vitest';
import { numberAt, parseFits } from '../../src/fits/index.js';
import { MARROW_HILL, scratchFolder, spotjoule } from '../support/command.js';

const folder = scratchFolder();
const MAP = join(MARROW_HILL, 'mh-1-20310514-small.fits');
const run = (...more: string[]) => spotjoule(folder, 'quicklook', MAP, ...more);

describe('spotjoule quicklook --volume, --lines', () => {
  it('writes the field above the patch with the levels, height and samples asked for', () => {
    const { status, stderr, stdout } = run(
      ...['--volume', '--levels', '6', '--top', '25', '--every', '3', '--out', 'a'],
    );
    expect([status, stderr]).toEqual([0, '']);
    expect(stdout).toMatch(/written: a\S+-volume\.fits/);
    const path = join(folder, 'a', 'mh-1-20310514-small-volume.fits');
    const { header } = parseFits(readFileSync(path), path).hdus[2];
    expect(numberAt(header, 'NAXIS3')).toBe(6);
    expect(numberAt(header, 'CDELT3')).toBe(5);
    expect(numberAt(header, 'ALPHA')).toBe(0);
    const plain = run('--volume', '--alpha', '0.002', '--no-picture', '--out', 'b');
    expect(plain.status).toBe(0);
    const other = join(folder, 'b', 'mh-1-20310514-small-volume.fits');
    const whole = parseFits(readFileSync(other), other).hdus[0].header;
    expect(numberAt(whole, 'ALPHA')).toBe(0.002);
    expect(numberAt(whole, 'NAXIS3')).toBe(32);
    expect(Math.ceil(numberAt(whole, 'NAXIS1')! / 3)).toBe(numberAt(header, 'NAXIS1'));
  });

  it('draws lines on the picture, the same in each run', async () => {
    const pixels = async (out: string, ...more: string[]) => {
      expect(run('--out', out, ...more).status).toBe(0);
      const path = join(folder, out, 'mh-1-20310514-small.png');
      return (await sharp(path).removeAlpha().raw().toBuffer()) as Buffer;
    };
    const violet = (data: Buffer) => {
      let count = 0;
      for (let i = 0; i < data.length; i += 3) {
        const [r, g, b] = [data[i], data[i + 1], data[i + 2]];
        if (b > g + 60 && r > g + 30 && b > r) count++;
      }
      return count;
    };
    const some = await pixels('c', '--lines', '50');
    expect((await pixels('d', '--lines', '50')).equals(some)).toBe(true);
    expect(violet(some)).toBeGreaterThan(violet(await pixels('e')) + 300);
  });

  it('refuses options that mean nothing, and volumes that are too large', () => {
    for (const [options, pattern] of [
      [['--levels', '4'], /--levels is for --volume/],
      [['--volume', '--levels', '2.5'], /not a whole number/],
      [['--lines', '5', '--no-picture'], /no-picture/],
      [['--lines', '0'], /a number of lines/],
      [['--volume', '--top', '-3'], /a height/],
    ] as const) {
      const { status, stderr } = run(...options, '--out', 'f');
      expect(status).toBe(2);
      expect(stderr).toMatch(pattern);
    }
    const large = run('--volume', '--pixel', '0.4', '--levels', '1024', '--out', 'f');
    expect(large.status).toBe(2);
    expect(large.stderr).toMatch(/MiB, more than 512: fewer --levels/);
    expect(existsSync(join(folder, 'f'))).toBe(false);
  });
});
