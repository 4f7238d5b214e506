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
/** Zero crossings in weaker horizontal field than this share of the least are not even traced. */
const TRACED_SHARE = 0.4;

/** One piece of the zero line between two pixel edges, with the field at its middle. */
interface Segment {
  readonly fromX: number;
  readonly fromY: number;
  readonly toX: number;
  readonly toY: number;
  readonly lengthMm: number;
  readonly horizontalG: number;
  readonly gradient: number;
}

/** The zero line of a smoothed field: chains of segments in the field's order. */
export interface ZeroLine {
  readonly chains: readonly (readonly Segment[])[];
  /** Standard deviation of the smoothing [Mm]. */
  readonly blurMm: number;
}

interface Box {
  readonly west: number;
  readonly south: number;
  readonly nx: number;
  readonly ny: number;
}

/** Box around the pixels of at least `least`, wider by `margin` where the map is; undefined without any. */
function boxAbove(
  values: Float64Array,
  nx: number,
  ny: number,
  least: number,
  margin: number,
): Box | undefined {
  let [west, east, south, north] = [nx, -1, ny, -1];
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      if (!(values[x + nx * y] >= least)) continue;
      if (x < west) west = x;
      if (x > east) east = x;
      if (y < south) south = y;
      north = y;
    }
  }
  if (east - west < 1 || north - south < 1) return undefined;
  west = Math.max(0, west - margin);
  south = Math.max(0, south - margin);
  const right = Math.min(nx - 1, east + margin);
  const top = Math.min(ny - 1, north + margin);
  return { west, south, nx: right - west + 1, ny: top - south + 1 };
}

function cutOut(values: Float64Array, nx: number, box: Box): Float64Array {
  const out = new Float64Array(box.nx * box.ny);
  for (let y = 0; y < box.ny; y++) {
    const start = box.west + nx * (box.south + y);
    out.set(values.subarray(start, start + box.nx), y * box.nx);
  }
  return out;
}

/** Closed rings of the zero level in pixels, also along the edges of what is known. */
function zeroRings(values: Float64Array, nx: number, ny: number): [number, number][][] {
  const filled: number[] = new Array(values.length);
  for (let i = 0; i < values.length; i++) filled[i] = Number.isNaN(values[i]) ? 0 : values[i];
  // A shade above zero, so that missing pixels lie on one side and not on the line.
  const shapes = contours().size([nx, ny]).smooth(true).contour(filled, 1e-9);
  return shapes.coordinates.flatMap((polygon) =>
    polygon.map((ring) => ring.map(([x, y]): [number, number] => [x - 0.5, y - 0.5])),
  );
}

/**
 * Zero line of the radial field [G] smoothed to 1.5 Mm, wherever the current-free horizontal field [G]
 * is at least two fifths of `leastHorizontalG`; it ends at missing pixels and at the edges.
 */
export function traceZeroLine(
  radial: Grid2<'G'>,
  horizontal: { readonly x: Grid2<'G'>; readonly y: Grid2<'G'> },
  leastHorizontalG: number,
): ZeroLine {
  const [ny, nx] = radial.values.shape;
  const { pixelMm } = radial;
  const blurPixels = Math.max(SMOOTHING_WIDTH_MM / pixelMm, 1.5) / WIDTH_PER_DEVIATION;
  const blurMm = blurPixels * pixelMm;
  const hx = horizontal.x.values.data;
  const hy = horizontal.y.values.data;
  const strength = new Float64Array(nx * ny);
  for (let i = 0; i < strength.length; i++) strength[i] = Math.sqrt(hx[i] * hx[i] + hy[i] * hy[i]);
  const least = TRACED_SHARE * leastHorizontalG;
  const box = boxAbove(strength, nx, ny, least, Math.ceil(4 * blurPixels));
  if (!box) return { chains: [], blurMm };
  const strengthInside = cutOut(strength, nx, box);
  const smoothed = gaussianBlur(cutOut(radial.values.data, nx, box), box.nx, box.ny, blurPixels);
  const gradient = gradientSize(smoothed, box.nx, box.ny, pixelMm);
  // Outside the region the zero line of noise is endless: take it for missing.
  for (let i = 0; i < smoothed.length; i++) if (strengthInside[i] < least) smoothed[i] = Number.NaN;
  const at = (map: Float64Array, x: number, y: number) => bilinear(map, box.nx, box.ny, x, y);
  const chains: Segment[][] = [];
  for (const ring of zeroRings(smoothed, box.nx, box.ny)) {
    let chain: Segment[] = [];
    for (let i = 0; i + 1 < ring.length; i++) {
      const [fromX, fromY] = ring[i];
      const [toX, toY] = ring[i + 1];
      const middle = [0.5 * (fromX + toX), 0.5 * (fromY + toY)] as const;
      // All four pixels around are known, so this is a zero of the field and no outline.
      if (Number.isNaN(at(smoothed, ...middle))) {
        if (chain.length > 0) chains.push(chain);
        chain = [];
        continue;
      }
      chain.push({
        fromX: fromX + box.west,
        fromY: fromY + box.south,
        toX: toX + box.west,
        toY: toY + box.south,
        lengthMm: pixelMm * Math.hypot(toX - fromX, toY - fromY),
        horizontalG: at(strengthInside, ...middle),
        gradient: at(gradient, ...middle),
      });
    }
    if (chain.length > 0) chains.push(chain);
  }
  return { chains, blurMm };
}

function isStrong(segment: Segment): boolean {
  return segment.horizontalG >= STRONG_HORIZONTAL_G && segment.gradient >= STRONG_GRADIENT_G_PER_MM;
}

/**
 * The polarity inversion line: the parts of the zero line where the current-free horizontal field reaches
 * `leastHorizontalG`. Segments where it reaches 150 G and the gradient 50 G/Mm are marked strong.
 */
export function inversionLines(zero: ZeroLine, leastHorizontalG: number): InversionLine[] {
  const lines: InversionLine[] = [];
  const finish = (run: readonly Segment[]) => {
    if (run.length === 0) return;
    lines.push({
      x: Float64Array.of(run[0].fromX, ...run.map(({ toX }) => toX)),
      y: Float64Array.of(run[0].fromY, ...run.map(({ toY }) => toY)),
      strong: run.map(isStrong),
    });
  };
  for (const chain of zero.chains) {
    let run: Segment[] = [];
    for (const segment of chain) {
      if (segment.horizontalG >= leastHorizontalG) {
        run.push(segment);
        continue;
      }
      finish(run);
      run = [];
    }
    finish(run);
  }
  return lines;
}

/**
 * Length [Mm] where the horizontal field reaches `leastHorizontalG`, strong-gradient length [Mm] and
 * gradient-weighted length [G], the integral of |grad Bz| along the line where the current-free horizontal
 * field exceeds 150 G (Falconer, Moore & Gary 2008, ApJ 689, 1433). The shifts move the other thresholds,
 * for intervals.
 */
export function measureInversionLine(
  zero: ZeroLine,
  leastHorizontalG: number,
  horizontalShiftG = 0,
  gradientShift = 0,
): InversionLineMeasures {
  let [lengthMm, strongLengthMm, gradientWeightedG] = [0, 0, 0];
  for (const segment of zero.chains.flat()) {
    if (segment.horizontalG >= leastHorizontalG) lengthMm += segment.lengthMm;
    if (!(segment.horizontalG >= STRONG_HORIZONTAL_G + horizontalShiftG)) continue;
    gradientWeightedG += segment.gradient * segment.lengthMm;
    if (segment.gradient >= STRONG_GRADIENT_G_PER_MM + gradientShift)
      strongLengthMm += segment.lengthMm;
  }
  return { lengthMm, strongLengthMm, gradientWeightedG };
}
