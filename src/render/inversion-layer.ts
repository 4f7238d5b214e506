import type { InversionLine } from '../field/inversion-line.js';
import { lineLength, thin } from './current-contours.js';
import { type MapFrame, toPictureX, toPictureY } from './map-frame.js';

/** Inversion lines as the picture shows them: x, y pairs of the whole line and its strong parts. */
export interface InversionPaths {
  readonly plain: readonly number[][];
  readonly strong: readonly number[][];
}

/** Pieces shorter than this are noise specks at this scale. */
const LEAST_LENGTH_PX = 12;
/** Most points drawn; the longest lines are kept. A map of pure noise has a line around every pixel. */
const MOST_POINTS = 30_000;

/** Brings inversion lines to picture pixels, leaves out specks, and picks the strong-gradient runs. */
export function inversionPaths(lines: readonly InversionLine[], frame: MapFrame): InversionPaths {
  const plain: number[][] = [];
  const strong: number[][] = [];
  for (const line of lines) {
    const points = pictureLine(line, frame, 0, line.x.length - 1);
    if (lineLength(points) >= LEAST_LENGTH_PX) plain.push(points);
    for (const [first, last] of strongRuns(line.strong, line.x.length)) {
      strong.push(pictureLine(line, frame, first, last));
    }
  }
  return { plain: longest(plain), strong: longest(strong) };
}

/** Leaves out strong parts too short to be told from the strokes of the horizontal field. */
export function withoutSpecks({ plain, strong }: InversionPaths): InversionPaths {
  return { plain, strong: strong.filter((line) => lineLength(line) >= LEAST_LENGTH_PX) };
}

/** First and last point of each run of strong segments. */
function strongRuns(strong: readonly boolean[], points: number): readonly [number, number][] {
  const runs: [number, number][] = [];
  let start = -1;
  for (let i = 0; i <= points - 1; i++) {
    const on = i < points - 1 && strong[i] === true;
    if (on && start < 0) start = i;
    if (!on && start >= 0) {
      runs.push([start, i]);
      start = -1;
    }
  }
  return runs;
}

function pictureLine(line: InversionLine, frame: MapFrame, first: number, last: number): number[] {
  const points: number[] = [];
  for (let i = first; i <= last; i++) {
    points.push(toPictureX(frame, line.x[i]), toPictureY(frame, line.y[i]));
  }
  return thin(points);
}

function longest(lines: number[][]): number[][] {
  const order = [...lines].sort((a, b) => b.length - a.length);
  let points = 0;
  return order.filter((line) => {
    points += line.length / 2;
    return points <= MOST_POINTS;
  });
}
