import { describe, expect, it } from 'vitest';
import { type FieldLine, traceFieldLines } from '../../src/field/field-lines.js';
import { uniformHeights } from '../../src/field/heights.js';
import { composePicture } from '../../src/render/compose.js';
import { shapesSvg } from '../../src/render/drawing.js';
import { fieldLinePaths } from '../../src/render/field-line-layer.js';
import { BIPOLE_SPOTS } from './sample-patch.js';
import { samplePicture } from './sample-picture.js';

const SAMPLE = { nx: 120, ny: 100, spots: BIPOLE_SPOTS, widthMm: 100 };

function line(points: readonly number[], closed: boolean): FieldLine {
  return {
    points: Float64Array.from(points),
    ends: ['surface', closed ? 'surface' : 'top'],
    closed,
    lengthMm: 1,
    apexMm: 1,
    meanFieldG: 1,
  };
}

describe('field lines on the picture', () => {
  it('lie where their places in the patch are, closed and open apart', () => {
    const frame = { x: 10, y: 20, width: 400, height: 200, nx: 40, ny: 20 };
    const lines = [line([0, 0, 0, 20, 10, 5], true), line([0, 0, 0, 0, 30, 9], false)];
    const { closed, open } = fieldLinePaths(lines, 2, frame);
    // Pixel (0, 0) has its centre half a pixel of 10 from the corner; (20, 10) Mm are pixel (10, 5).
    expect(closed).toEqual([[15, 215, 115, 165]]);
    expect(open).toEqual([[15, 215, 15, 65]]);
    expect(fieldLinePaths([line([0, 0, 0], false)], 2, frame)).toEqual({ closed: [], open: [] });
  });

  const uniform = { nx: 4, ny: 4, stepMm: 1, heightsMm: uniformHeights(2, 1) };
  const [b, none] = [new Float64Array(32).fill(1), new Float64Array(32)];
  const [leaving] = traceFieldLines({ ...uniform, x: none, y: none, z: b }, [[1, 1, 0]]);

  it('differ in more than colour and are named with their numbers', () => {
    expect(leaving.closed).toBe(false);
    const lines = [
      line([5, 5, 0, 20, 20, 9], true),
      line([9, 5, 0, 20, 25, 9], true),
      line([9, 5, 0, 0, 25, 9], false),
    ];
    const picture = samplePicture(SAMPLE, { fieldLines: lines });
    const { drawing, layout } = composePicture(picture);
    const words = drawing.texts.map(({ text }) => text).join(' ');
    expect(words).toMatch(/both feet in the patch \(2 of 3\)/);
    expect(words).toMatch(/leaves it \(1 of 3\)/);
    const svg = shapesSvg(drawing, layout.width, layout.height);
    const strokes = [...svg.matchAll(/<path [^>]*stroke="(#6a1b9a|#a8005c)"[^>]*>/g)];
    const dotted = (ink: string) =>
      strokes.filter(([, found]) => found === ink).map(([tag]) => /dasharray/.test(tag));
    expect(dotted('#6a1b9a')).toEqual([false, false]);
    expect(dotted('#a8005c')).toEqual([true, true]);
  });

  it('are not mentioned where there are none', () => {
    const { drawing } = composePicture(samplePicture(SAMPLE));
    expect(drawing.texts.map(({ text }) => text).join(' ')).not.toMatch(/[Ff]ield line/);
  });
});
