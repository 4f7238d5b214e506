import { describe, expect, it } from 'vitest';
import { readField, resolveField } from '../../src/field/disambiguation/ambiguous-field.js';
import type { FitsFile } from '../../src/fits/file.js';
import { parseAzimuthZero } from '../../src/geometry/azimuth-zero.js';
import type { LocalPatch } from '../../src/geometry/patch.js';
import { patchToStonyhurst } from '../../src/geometry/patch-position.js';
import {
  type ComponentSource,
  readVectorMap,
  type VectorMapOptions,
} from '../../src/geometry/vector-map.js';
import { makeVectorPatch, type PatchVector } from '../../src/geometry/vector-patch.js';
import {
  type Camera,
  dot,
  fieldAt,
  fieldSeen,
  fileOf,
  heliographicGrid,
  type Observation,
  observe,
  seen,
  unit,
  upAt,
  type Vec,
} from '../support/vector-sky.js';

const DEG = Math.PI / 180;

/** The axes of patch pixel (x, y): steps along its rows and columns, and the vertical. */
function pixelAxes(patch: LocalPatch, x: number, y: number): { point: Vec; axes: [Vec, Vec, Vec] } {
  const at = (dx: number, dy: number) => upAt(...patchToStonyhurst(patch, x + dx, y + dy));
  const step = (a: Vec, b: Vec): Vec => unit([b[0] - a[0], b[1] - a[1], b[2] - a[2]]);
  const h = 0.01;
  const point = at(0, 0);
  return { point, axes: [step(at(-h, 0), at(h, 0)), step(at(0, -h), at(0, h)), point] };
}

/** Exact components along the axes of every patch pixel. */
function truthOn(patch: LocalPatch, lonDeg: number, latDeg: number): Vec[] {
  return Array.from({ length: patch.nx * patch.ny }, (_, i) => {
    const { point, axes } = pixelAxes(patch, i % patch.nx, Math.floor(i / patch.nx));
    const field = fieldAt(point, lonDeg, latDeg);
    return axes.map((axis) => dot(field, axis)) as unknown as Vec;
  });
}

const vectorAt = ({ x, y, z }: PatchVector, i: number): Vec => [
  x.values.data[i],
  y.values.data[i],
  z.values.data[i],
];
const length = (v: Vec) => Math.hypot(...v);
const off = (a: Vec, b: Vec) => Math.hypot(a[0] - b[0], a[1] - b[1], a[2] - b[2]);

/** Greatest error over the strength, of pixels of 300 G or more; and how many those are. */
function worst(truth: readonly Vec[], found: (i: number) => Vec): [number, number] {
  let most = 0;
  let count = 0;
  truth.forEach((wanted, i) => {
    const error = off(found(i), wanted) / length(wanted);
    if (length(wanted) < 300 || Number.isNaN(error)) return;
    most = Math.max(most, error);
    count++;
  });
  return [most, count];
}

const NAMES = ['strength', 'inclination', 'azimuth'] as const;

/** An observation as a file of HDUs: strength, inclination, azimuth, flips. */
function fileFrom(seenBy: Observation, azimuth = seenBy.azimuth): FitsFile {
  const planes = [
    { values: seenBy.strength, cards: { BUNIT: 'G' } },
    { values: seenBy.inclination, cards: { BUNIT: 'deg' } },
    { values: azimuth, cards: { BUNIT: 'deg' } },
    { values: seenBy.flips },
  ];
  return fileOf('made.fits', planes, seenBy.shape, seenBy.cards);
}

const SOURCES: ComponentSource[] = NAMES.map((name, hdu) => ({ name, file: 'made.fits', hdu }));
const RESOLVED: ComponentSource[] = [...SOURCES, { name: 'ambiguity', file: 'made.fits', hdu: 3 }];

const read = (file: FitsFile, sources = SOURCES, options: VectorMapOptions = {}) =>
  readVectorMap(sources, options, () => file);

const CENTRE: Camera = { lonDeg: 2, latDeg: 6, nx: 150, ny: 140, cdelt: [1, 1], crotaDeg: 0 };
const FAR: Camera = { ...CENTRE, lonDeg: 42, latDeg: -14 };
const EXTENT = { extentMm: 70 };

/** Ways to hold the camera; the far place is 45 degrees from disk centre. */
const CAMERAS: readonly [string, Camera][] = [
  ['disk centre', CENTRE],
  ['45 degrees away', FAR],
  ['45 degrees away, turned by 30 degrees', { ...FAR, crotaDeg: 30 }],
  ['45 degrees away, upside down', { ...FAR, crotaDeg: 180 }],
  ['45 degrees away, mirrored and turned', { ...FAR, cdelt: [-1, 1], crotaDeg: 20 }],
  ['disk centre, pixels not square, turned', { ...CENTRE, cdelt: [0.9, 1.1], crotaDeg: -60 }],
  ['north-east, pixels not square', { ...FAR, lonDeg: -35, latDeg: 30, cdelt: [0.85, 1.1] }],
];

// 0.72 Mm pixels, charges 7 to 10 Mm deep. Tolerances: 0.4 % of the strength where the
// transverse field is interpolated itself; 1.5 % by way of Q and U, whose root is taken where it vanishes.
describe('camera-frame maps, against the exact field of charges', () => {
  it.each(CAMERAS)('%s', (_name, camera) => {
    const center = { lonDeg: camera.lonDeg, latDeg: camera.latDeg };
    const file = fileFrom(observe(camera));
    const found = makeVectorPatch(read(file), { center, ...EXTENT });
    if (found.kind !== 'camera') throw new Error('a camera patch was wanted');
    const truth = truthOn(found.patch, camera.lonDeg, camera.latDeg);
    expect(found.field).toBeUndefined();
    // The better of both readings, pixel by pixel.
    const readings = readField(found);
    const [as, turned] = [0, 1].map((flip) =>
      resolveField(readings, new Uint8Array(truth.length).fill(flip)),
    );
    const [error, count] = worst(truth, (i) => {
      const [a, b] = [vectorAt(as, i), vectorAt(turned, i)];
      return off(a, truth[i]) < off(b, truth[i]) ? a : b;
    });
    expect(count).toBeGreaterThan(1500);
    expect(error).toBeLessThan(0.015);

    const resolved = makeVectorPatch(read(file, RESOLVED), { center, ...EXTENT });
    if (!resolved.field || resolved.kind !== 'camera') throw new Error('a field was wanted');
    const { field } = resolved;
    expect(worst(truth, (i) => vectorAt(field, i))[0]).toBeLessThan(0.004);
    // The field folder's own way from azimuth to components agrees.
    const other = resolveField(readField(resolved), new Uint8Array(truth.length));
    for (let i = 0; i < truth.length; i += 17)
      expect(off(vectorAt(other, i), vectorAt(field, i))).toBeLessThan(1e-9 * 3000);
  });

  it.each([
    ['+x', (phi: number, rho: number) => phi + 90 + 0 * rho],
    ['-y,ccw', (phi: number) => phi + 180],
    ['-x,cw', (phi: number) => 90 - phi],
    ['north', (phi: number, rho: number) => phi + rho],
    ['west,cw', (phi: number, rho: number) => -90 - phi - rho],
  ] as const)('azimuth counted from %s', (zero, azimuthFrom) => {
    // phi from +y counter-clockwise; +y lies rho counter-clockwise of north.
    const camera = { ...FAR, crotaDeg: 25 };
    const made = observe(camera);
    const full = made.azimuth.map((phi, i) => phi + 180 * made.flips[i]);
    const azimuth = full.map((phi) => (azimuthFrom(phi, 25) + 720) % 360);
    const file = fileFrom({ ...made, flips: new Float32Array(azimuth.length) }, azimuth);
    const map = read(file, RESOLVED, { azimuthZero: parseAzimuthZero(zero) });
    const { patch, field } = makeVectorPatch(map, {
      center: { lonDeg: 42, latDeg: -14 },
      ...EXTENT,
    });
    const truth = truthOn(patch, 42, -14);
    expect(worst(truth, (i) => vectorAt(field!, i))[0]).toBeLessThan(0.004);
    expect(map.base.warnings.join()).toMatch(/azimuth counted .*, as given/);
  });

  it('errors are those of strength, inclination and azimuth, by differences of the exact transform', () => {
    const [sigmaB, sigmaGamma, sigmaPsi] = [40, 2, 5];
    const made = observe(FAR);
    const flat = (value: number) => new Float32Array(made.azimuth.length).fill(value);
    const planes = [
      ...[made.strength, made.inclination, made.azimuth, made.flips],
      ...[flat(sigmaB), flat(sigmaGamma), flat(sigmaPsi)],
    ].map((values, i) => (i === 0 ? { values, cards: { BUNIT: 'G' } } : { values }));
    const file = fileOf('made.fits', planes, made.shape, made.cards);
    const errors = NAMES.map(
      (name, i) => ({ name: `error-${name}`, file: 'made.fits', hdu: 4 + i }) as const,
    );
    const center = { lonDeg: 42, latDeg: -14 };
    const resolved = makeVectorPatch(read(file, [...RESOLVED, ...errors]), { center, ...EXTENT });
    const ambiguous = makeVectorPatch(read(file, [...SOURCES, ...errors]), { center, ...EXTENT });
    const { patch } = resolved;
    // Foreshortened source pixels are larger than the patch's: no averaging.
    for (let y = 5; y < patch.ny; y += 9) {
      for (let x = 5; x < patch.nx; x += 9) {
        const i = x + patch.nx * y;
        const { point, axes } = pixelAxes(patch, x, y);
        const { strength, inclination, psi } = seen(fieldAt(point, 42, -14), point);
        if (strength < 300) continue;
        const variances = (turn: number) => {
          const from = (b: number, gamma: number, angle: number) =>
            axes.map((axis) => dot(fieldSeen(b, gamma, angle, point), axis));
          const here = from(strength, inclination, psi + turn);
          const steps = [
            from(strength + sigmaB / 100, inclination, psi + turn),
            from(strength, inclination + (sigmaGamma * DEG) / 100, psi + turn),
            from(strength, inclination, psi + turn + (sigmaPsi * DEG) / 100),
          ];
          return here.map((value, axis) =>
            steps.reduce((sum, step) => sum + (100 * (step[axis] - value)) ** 2, 0),
          );
        };
        const [one, two] = [variances(0), variances(Math.PI)];
        [resolved.errors!.x, resolved.errors!.y, resolved.errors!.z].forEach((sigma, axis) => {
          expect(Math.abs(sigma[i] / Math.sqrt(one[axis]) - 1)).toBeLessThan(0.05);
        });
        [ambiguous.errors!.x, ambiguous.errors!.y, ambiguous.errors!.z].forEach((sigma, axis) => {
          const mean = Math.sqrt((one[axis] + two[axis]) / 2);
          expect(Math.abs(sigma[i] / mean - 1)).toBeLessThan(0.05);
        });
      }
    }
  });

  it('averaging over coarse pixels lowers the error by the root of the areas', () => {
    const made = observe(CENTRE);
    const flat = new Float32Array(made.azimuth.length).fill(50);
    const planes = [made.strength, made.inclination, made.azimuth, flat].map((values, i) =>
      i % 3 === 0 ? { values, cards: { BUNIT: 'G' } } : { values },
    );
    const zero = { values: new Float32Array(flat.length), cards: { BUNIT: 'rad' } };
    const file = fileOf('made.fits', [...planes, zero], made.shape, made.cards);
    const map = read(file, [
      ...SOURCES,
      { name: 'error-strength', file: 'made.fits', hdu: 3 },
      { name: 'error-inclination', file: 'made.fits', hdu: 4 },
      { name: 'error-azimuth', file: 'made.fits', hdu: 4 },
    ]);
    const center = { lonDeg: 2, latDeg: 6 };
    const { patch, errors } = makeVectorPatch(map, {
      center,
      ...EXTENT,
      pixelMm: 4 * map.base.pixelMm,
    });
    const i = 3 + patch.nx * 4;
    const { x, y, z } = errors!;
    // The three sigmas make up 50 G along the field: their squares add up to it.
    expect(Math.hypot(x[i], y[i], z[i])).toBeCloseTo(50 / 4, 0);
  });
});

describe('heliographic maps', () => {
  const made = heliographicGrid(42, -34, 150, 0.06);
  const negative = (values: Float32Array) => values.map((value) => -value);
  const inTesla = (values: Float32Array) => values.map((value) => value * 1e-4);

  it('east and south turn the sign, units may differ; components fit the patch axes', () => {
    const planes = [
      { values: negative(made.west), cards: { BUNIT: 'G' } },
      { values: inTesla(negative(made.north)), cards: { BUNIT: 'T' } },
      { values: made.radial, cards: { BUNIT: 'Mx/cm^2' } },
    ];
    const file = fileOf('grid.fits', planes, made.shape, made.cards);
    const names = ['east', 'south', 'radial'] as const;
    const map = read(
      file,
      names.map((name, hdu) => ({ name, file: 'grid.fits', hdu })),
    );
    expect(map.base.component).toBe('radial');
    // Away from the region's centre, so that the axes of patch and grid differ.
    const found = makeVectorPatch(map, { center: { lonDeg: 40, latDeg: -31 }, extentMm: 90 });
    const truth = truthOn(found.patch, 42, -34);
    const [error, count] = worst(truth, (i) => vectorAt(found.field!, i));
    expect(count).toBeGreaterThan(1500);
    expect(error).toBeLessThan(0.004);
    expect(found.patch.component).toBe('radial');
  });

  it('errors turn with the axes', () => {
    const flat = (value: number) => ({
      values: new Float32Array(150 * 150).fill(value),
      cards: { BUNIT: 'G' },
    });
    const planes = [made.west, made.north, made.radial].map((values) => ({
      values,
      cards: { BUNIT: 'G' },
    }));
    const file = fileOf(
      'grid.fits',
      [...planes, flat(30), flat(90), flat(10)],
      made.shape,
      made.cards,
    );
    const names = ['west', 'north', 'radial', 'error-west', 'error-north', 'error-radial'] as const;
    const map = read(
      file,
      names.map((name, hdu) => ({ name, file: 'grid.fits', hdu })),
    );
    const { patch, errors } = makeVectorPatch(map, {
      center: { lonDeg: 42, latDeg: -34 },
      extentMm: 80,
      pixelMm: 0.5,
    });
    const corner = 3 + patch.nx * 3;
    const middle = (patch.nx >> 1) + patch.nx * (patch.ny >> 1);
    expect(errors!.x[middle]).toBeCloseTo(30, 1);
    expect(errors!.y[middle]).toBeCloseTo(90, 1);
    expect(errors!.z[corner]).toBeCloseTo(10, 6);
    const { axes } = pixelAxes(patch, 3, 3);
    const turn = Math.asin(
      dot(axes[0], unit([0, Math.cos(4 * DEG), Math.sin(4 * DEG)])) /
        Math.cos(Math.asin(dot(axes[2], [0, Math.cos(4 * DEG), Math.sin(4 * DEG)]))),
    );
    expect(Math.abs(turn)).toBeGreaterThan(0.02);
    expect(errors!.x[corner]).toBeCloseTo(Math.hypot(30 * Math.cos(turn), 90 * Math.sin(turn)), 3);
  });
});
