import type { FitsHeader } from '../fits/header.js';
import { numberAt } from '../fits/header.js';
import { RADIANS_PER_DEGREE } from '../units.js';

/**
 * Linear part of a WCS (Greisen & Calabretta 2002, A&A 395, 1061): intermediate world coordinates are
 * `matrix` (m11, m12, m21, m22, units of the axes per pixel) times pixel minus `origin` (0-based).
 */
export interface LinearPart {
  readonly origin: readonly [number, number];
  readonly matrix: readonly [number, number, number, number];
  readonly hasScale: boolean;
  readonly hasOrigin: boolean;
  /** Whether the header states a rotation in any form. */
  readonly hasRotation: boolean;
  readonly warnings: readonly string[];
}

/** Difference in degrees beyond which two statements of a rotation contradict each other. */
const ROTATION_TOLERANCE_DEG = 0.05;

/** Rotation from CROTA2, CROTA1 or a bare CROTA [deg]; the latitude axis rules where they differ. */
function readRotation(header: FitsHeader, warnings: string[]): number | undefined {
  const first = numberAt(header, 'CROTA1');
  const second = numberAt(header, 'CROTA2');
  const differs = first !== undefined && second !== undefined && first !== second;
  if (differs && first !== 0)
    warnings.push(`CROTA1 ${first} differs from CROTA2 ${second}: CROTA2 used`);
  return second ?? first ?? numberAt(header, 'CROTA');
}

function scaled(pc: readonly number[], cdelt1: number, cdelt2: number) {
  return [cdelt1 * pc[0], cdelt1 * pc[1], cdelt2 * pc[2], cdelt2 * pc[3]] as const;
}

function elements(header: FitsHeader, prefix: 'PC' | 'CD', missing: readonly number[]) {
  const names = ['1_1', '1_2', '2_1', '2_2'];
  // PC001001 is the form of drafts of the paper, still met in old files.
  const old = ['001001', '001002', '002001', '002002'];
  const found = names.map((name, i) => numberAt(header, prefix + name, prefix + old[i]));
  return found.some((value) => value !== undefined)
    ? found.map((value, i) => value ?? missing[i])
    : undefined;
}

/** Rotated scale of CROTA2: x = CDELT1 cos dx - CDELT2 sin dy, y = CDELT1 sin dx + CDELT2 cos dy. */
function rotatedScale(cdelt1: number, cdelt2: number, rotationDeg: number) {
  const cos = Math.cos(rotationDeg * RADIANS_PER_DEGREE);
  const sin = Math.sin(rotationDeg * RADIANS_PER_DEGREE);
  return [cdelt1 * cos, -cdelt2 * sin, cdelt1 * sin, cdelt2 * cos] as const;
}

function checkRotation(
  matrix: readonly [number, number, number, number],
  rotationDeg: number | undefined,
  name: string,
  warnings: string[],
): void {
  if (rotationDeg === undefined || rotationDeg === 0) return;
  const stated = Math.atan2(matrix[2], matrix[0]) / RADIANS_PER_DEGREE;
  const off = Math.abs(((((stated - rotationDeg) % 360) + 540) % 360) - 180);
  if (off > ROTATION_TOLERANCE_DEG)
    warnings.push(
      `${name} rotates by ${stated.toFixed(2)} deg but CROTA says ${rotationDeg}: ${name} used`,
    );
}

/**
 * Reads CRPIX and PC with CDELT, CD, or CDELT with CROTA. Forbidden mixtures are resolved with a
 * warning: PC before CD before CROTA. `fallbackScale` stands in for a missing CDELT.
 */
export function readLinearPart(
  header: FitsHeader,
  fallbackScale?: readonly [number, number],
): LinearPart {
  const warnings: string[] = [];
  const pixel1 = numberAt(header, 'CRPIX1');
  const pixel2 = numberAt(header, 'CRPIX2');
  const pc = elements(header, 'PC', [1, 0, 0, 1]);
  const cd = elements(header, 'CD', [0, 0, 0, 0]);
  const stated1 = numberAt(header, 'CDELT1');
  const stated2 = numberAt(header, 'CDELT2');
  const cdelt1 = stated1 ?? fallbackScale?.[0] ?? 1;
  const cdelt2 = stated2 ?? fallbackScale?.[1] ?? 1;
  const rotation = readRotation(header, warnings);
  let matrix = rotatedScale(cdelt1, cdelt2, rotation ?? 0);
  if (pc) {
    matrix = scaled(pc, cdelt1, cdelt2);
    if (cd) warnings.push('both PC and CD matrices: PC used');
    checkRotation(matrix, rotation, 'PC', warnings);
  } else if (cd) {
    matrix = [cd[0], cd[1], cd[2], cd[3]];
    checkRotation(matrix, rotation, 'CD', warnings);
  }
  return {
    origin: [(pixel1 ?? 0) - 1, (pixel2 ?? 0) - 1],
    matrix,
    hasScale:
      (stated1 !== undefined && stated2 !== undefined) || pc !== undefined || cd !== undefined,
    hasOrigin: pixel1 !== undefined && pixel2 !== undefined,
    hasRotation: pc !== undefined || cd !== undefined || rotation !== undefined,
    warnings,
  };
}
