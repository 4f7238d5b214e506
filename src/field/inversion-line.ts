import { contours } from 'd3-contour';
import { bilinear, gradientSize } from '../grid/gradient.js';
import type { Grid2 } from '../grid/grid.js';
import { gaussianBlur, WIDTH_PER_DEVIATION } from '../grid/smooth.js';

/**
 * A piece of the polarity inversion line as joined points in patch pixels (x west, y north, pixel
 * centres on integers); `strong[i]` tells whether the segment from point i to i + 1 is part of the
 * strong-gradient line.
 */
export interface InversionLine {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly strong: readonly boolean[];
}

/** Lengths [Mm] and the gradient-weighted length [G] of the inversion line of a region. */
export interface InversionLineMeasures {
  readonly lengthMm: number;
  readonly strongLengthMm: number;
  readonly gradientWeightedG: number;
}

/** Current-free horizontal field that a strong line must reach [G]: Falconer, Moore & Gary 2008, ApJ 689, 1433. */
export const STRONG_HORIZONTAL_G = 150;
/** Gradient that a strong line must reach [G/Mm]: Falconer, Moore & Gary 2003, JGR 108, 1380 (from memory). */
export const STRONG_GRADIENT_G_PER_MM = 50;
/** Below this horizontal field a zero crossing is quiet-Sun salt and pepper, no line of a region [G]. */
export const LEAST_HORIZONTAL_G = 100;
/** The field is smoothed to this width before its zero line is drawn [Mm], or to 1.5 pixels. */
export const SMOOTHING_WIDTH_MM = 1.5;

/** The smoothed field and what is sampled along its zero line. */
export interface InversionLineInputs {
  readonly nx: number;
  readonly ny: number;
  readonly pixelMm: number;
  readonly smoothed: Float64Array;
  readonly gradient: Float64Array;
  readonly horizontal: Float64Array;
  /** Standard deviation of the smoothing [pixels]. */
  readonly blurPixels: number;
  /** Closed rings of the zero level in patch pixels, also along the edges of what is known. */
  readonly rings: readonly (readonly [number, number])[][];
}

/** Smooths the radial field [G] and takes its gradient [G/Mm]; `horizontal` is the current-free strength [G]. */
export function prepareInversionLine(
  radial: Grid2<'G'>,
  horizontal: { readonly x: Grid2<'G'>; readonly y: Grid2<'G'> },
): InversionLineInputs {
  const [ny, nx] = radial.values.shape;
  const { pixelMm } = radial;
  const blurPixels = Math.max(SMOOTHING_WIDTH_MM / pixelMm, 1.5) / WIDTH_PER_DEVIATION;
  const smoothed = gaussianBlur(radial.values.data, nx, ny, blurPixels);
  const hx = horizontal.x.values.data;
  const hy = horizontal.y.values.data;
  return {
    nx,
    ny,
    pixelMm,
    smoothed,
    gradient: gradientSize(smoothed, nx, ny, pixelMm),
    horizontal: hx.map((value, i) => Math.sqrt(value * value + hy[i] * hy[i])),
    blurPixels,
    rings: zeroRings(smoothed, nx, ny),
  };
}

function zeroRings(smoothed: Float64Array, nx: number, ny: number): [number, number][][] {
  const filled = Array.from(smoothed, (value) => (Number.isNaN(value) ? 0 : value));
  // A shade above zero, so that missing pixels lie on one side and not on the line.
  const shapes = contours().size([nx, ny]).smooth(true).contour(filled, 1e-9);
  return shapes.coordinates.flatMap((polygon) =>
    polygon.map((ring) => ring.map(([x, y]): [number, number] => [x - 0.5, y - 0.5])),
  );
}

/** The pixels beside (x, y) are all known and inside the map. */
function isInside(inputs: InversionLineInputs, x: number, y: number): boolean {
  return !Number.isNaN(bilinear(inputs.smoothed, inputs.nx, inputs.ny, x, y));
}

/**
 * The polarity inversion line: zero contour of the smoothed radial field where the current-free
 * horizontal field reaches `leastHorizontalG`. Segments where it reaches 150 G and the gradient 50 G/Mm
 * are marked strong.
 */
export function traceInversionLines(
  inputs: InversionLineInputs,
  leastHorizontalG: number,
): InversionLine[] {
  const { nx, ny, horizontal, gradient } = inputs;
  const lines: InversionLine[] = [];
  for (const ring of inputs.rings) {
    let x: number[] = [];
    let y: number[] = [];
    let strong: boolean[] = [];
    const finish = () => {
      if (strong.length > 0)
        lines.push({ x: Float64Array.from(x), y: Float64Array.from(y), strong });
      x = [];
      y = [];
      strong = [];
    };
    for (let i = 0; i + 1 < ring.length; i++) {
      const [ax, ay] = ring[i];
      const [bx, by] = ring[i + 1];
      const mx = 0.5 * (ax + bx);
      const my = 0.5 * (ay + by);
      const h = bilinear(horizontal, nx, ny, mx, my);
      if (!(isInside(inputs, ax, ay) && isInside(inputs, bx, by) && h >= leastHorizontalG)) {
        finish();
        continue;
      }
      if (x.length === 0) {
        x.push(ax);
        y.push(ay);
      }
      x.push(bx);
      y.push(by);
      strong.push(
        h >= STRONG_HORIZONTAL_G && bilinear(gradient, nx, ny, mx, my) >= STRONG_GRADIENT_G_PER_MM,
      );
    }
    finish();
  }
  return lines;
}

/**
 * Length [Mm], strong-gradient length [Mm] and gradient-weighted length [G], the integral of |grad Bz|
 * along the line where the current-free horizontal field exceeds 150 G (Falconer, Moore & Gary 2008,
 * ApJ 689, 1433). `horizontalShiftG` and `gradientShift` move the thresholds, for intervals.
 */
export function measureInversionLines(
  lines: readonly InversionLine[],
  inputs: InversionLineInputs,
  horizontalShiftG = 0,
  gradientShift = 0,
): InversionLineMeasures {
  const { nx, ny, pixelMm, horizontal, gradient } = inputs;
  let [lengthMm, strongLengthMm, gradientWeightedG] = [0, 0, 0];
  for (const { x, y } of lines) {
    for (let i = 0; i + 1 < x.length; i++) {
      const mx = 0.5 * (x[i] + x[i + 1]);
      const my = 0.5 * (y[i] + y[i + 1]);
      const step = pixelMm * Math.hypot(x[i + 1] - x[i], y[i + 1] - y[i]);
      lengthMm += step;
      const slope = bilinear(gradient, nx, ny, mx, my);
      const h = bilinear(horizontal, nx, ny, mx, my);
      if (!(h >= STRONG_HORIZONTAL_G + horizontalShiftG)) continue;
      gradientWeightedG += slope * step;
      if (slope >= STRONG_GRADIENT_G_PER_MM + gradientShift) strongLengthMm += step;
    }
  }
  return { lengthMm, strongLengthMm, gradientWeightedG };
}
