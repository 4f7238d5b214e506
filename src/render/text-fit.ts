import { styledWidth, type TextStyle } from './drawing.js';

/** Removes what cannot be drawn on one line: control characters and runs of blanks. */
export function oneLine(text: string): string {
  // biome-ignore lint/suspicious/noControlCharactersInRegex: they are what is looked for
  return text.replace(/[\s\u0000-\u001f\u007f-\u009f]+/g, ' ').trim();
}

/** Shortens `text` in the middle with an ellipsis until it is at most `widthPx` wide. */
export function shortenMiddle(text: string, widthPx: number, style: TextStyle): string {
  // Far more than fits anywhere: bounds the work on an absurd name.
  const all = [...oneLine(text)];
  const signs = all.length > 600 ? [...all.slice(0, 300), ...all.slice(-300)] : all;
  if (styledWidth(all.length > 600 ? '' : all.join(''), style) <= widthPx && all.length <= 600) {
    return all.join('');
  }
  let low = 0;
  let high = signs.length - 1;
  const keep = (count: number) => {
    const head = Math.ceil(count / 2);
    return `${signs.slice(0, head).join('')}…${signs.slice(signs.length - (count - head)).join('')}`;
  };
  while (low < high) {
    const middle = Math.ceil((low + high) / 2);
    if (styledWidth(keep(middle), style) <= widthPx) low = middle;
    else high = middle - 1;
  }
  return keep(low);
}

/**
 * Breaks `text` into lines at most `widthPx` wide, at blanks, or inside a word too long for a line;
 * at most `maxLines`, the last one then ending in an ellipsis.
 */
export function wrapText(
  text: string,
  widthPx: number,
  style: TextStyle,
  maxLines = Number.POSITIVE_INFINITY,
): readonly string[] {
  const lines: string[] = [];
  let line = '';
  const words = oneLine(text.slice(0, 20_000)).split(' ');
  for (let i = 0; i < words.length && lines.length <= maxLines; i++) {
    const longer = line === '' ? words[i] : `${line} ${words[i]}`;
    if (styledWidth(longer, style) <= widthPx) {
      line = longer;
      continue;
    }
    if (line !== '') lines.push(line);
    line = words[i];
    while (styledWidth(line, style) > widthPx && lines.length <= maxLines) {
      const head = fittingHead(line, widthPx, style);
      lines.push(head);
      line = line.slice(head.length);
    }
  }
  if (line !== '') lines.push(line);
  if (lines.length <= maxLines) return lines;
  const kept = lines.slice(0, maxLines);
  kept[maxLines - 1] = endWithEllipsis(kept[maxLines - 1], widthPx, style);
  return kept;
}

/** The longest start of a word that fits, at least one character. */
function fittingHead(word: string, widthPx: number, style: TextStyle): string {
  let width = 0;
  let head = '';
  for (const sign of word) {
    width += styledWidth(sign, style);
    if (head !== '' && width > widthPx) break;
    head += sign;
  }
  return head;
}

function endWithEllipsis(line: string, widthPx: number, style: TextStyle): string {
  const signs = [...line];
  while (signs.length > 0 && styledWidth(`${signs.join('')}…`, style) > widthPx) signs.pop();
  return `${signs.join('').trimEnd()}…`;
}
