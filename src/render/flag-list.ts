import { type Drawing, drawText, type Rect } from './drawing.js';
import { BODY, HEADING, LINE_HEIGHT } from './style.js';
import { oneLine, wrapText } from './text-fit.js';

const MOST_LINES_PER_FLAG = 4;
const MOST_LINES = 24;
const INDENT = 14;

/** A line of the flag list; `bullet` marks the first of a flag. */
interface FlagLine {
  readonly text: string;
  readonly bullet: boolean;
}

/** The flags wrapped at `width`; a very long one and a very long list are cut, and say so. */
export function flagLines(
  flags: readonly string[],
  width: number,
  mostLines = MOST_LINES,
): readonly FlagLine[] {
  const lines: FlagLine[] = [];
  for (let i = 0; i < flags.length; i++) {
    if (oneLine(flags[i]) === '') continue;
    const wrapped = wrapText(flags[i], width - INDENT, BODY, MOST_LINES_PER_FLAG);
    if (lines.length + wrapped.length > mostLines) {
      const left = flags.length - i;
      lines.push({
        text: `${left} more ${left === 1 ? 'flag' : 'flags'} in the JSON file`,
        bullet: true,
      });
      break;
    }
    wrapped.forEach((text, k) => {
      lines.push({ text, bullet: k === 0 });
    });
  }
  return lines.length > 0 ? lines : [{ text: 'none', bullet: false }];
}

export function flagsHeight(lines: readonly FlagLine[]): number {
  return 24 + LINE_HEIGHT * lines.length;
}

/** Draws the heading and the wrapped flags. */
export function drawFlags(drawing: Drawing, box: Rect, lines: readonly FlagLine[]): void {
  drawText(drawing, 'Flags', box.x, box.y + 14, HEADING);
  lines.forEach(({ text, bullet }, i) => {
    const baseline = box.y + 24 + 14 + LINE_HEIGHT * i;
    if (bullet) drawText(drawing, '•', box.x, baseline, BODY);
    drawText(drawing, text, box.x + INDENT, baseline, BODY);
  });
}
