import type { Card } from './header.js';
import { CARD_BYTES } from './header.js';

const PLAIN_KEYWORD = /^[A-Z0-9_-]{1,8}$/;
const COMMENTARY = new Set(['COMMENT', 'HISTORY', '']);

/**
 * `card` as one or more lines of 80 characters (Standard 4.0, chapter 4): fixed format where the
 * value fits in it, long strings by CONTINUE, long commentary over several cards, HIERARCH for
 * keywords that need it. What is not printable ASCII becomes `?`; a number that is not finite has no
 * value; a comment that finds no room is cut.
 */
export function formatCard(card: Card): string[] {
  const keyword = ascii(card.keyword).toUpperCase();
  const comment = ascii(card.comment);
  if (COMMENTARY.has(keyword)) return commentary(keyword, comment);
  const start = PLAIN_KEYWORD.test(keyword)
    ? `${keyword.padEnd(8)}= `
    : `HIERARCH ${keyword.replace(/=/g, '?')} = `;
  if (typeof card.value === 'string') return formatString(start, ascii(card.value), comment);
  return [fill(start + formatPlain(card.value).padStart(20), comment)];
}

function ascii(text: string): string {
  return text.replace(/[^\x20-\x7e]/g, '?');
}

function commentary(keyword: string, text: string): string[] {
  const parts = text.match(/.{1,72}/g) ?? [''];
  return parts.map((part) => (keyword.padEnd(8) + part).padEnd(CARD_BYTES));
}

function formatPlain(value: number | boolean | undefined): string {
  if (typeof value === 'boolean') return value ? 'T' : 'F';
  if (value === undefined || !Number.isFinite(value)) return '';
  if (Number.isSafeInteger(value)) return String(value);
  const [mantissa, exponent] = String(value).split('e');
  const decimal = mantissa.includes('.') ? mantissa : `${mantissa}.0`;
  return exponent === undefined ? decimal : `${decimal}E${exponent.replace('+', '')}`;
}

function fill(text: string, comment: string): string {
  const whole = comment === '' ? text : `${text} / ${comment}`;
  return whole.slice(0, CARD_BYTES).padEnd(CARD_BYTES);
}

/** Strings are closed after at least 8 characters, as fixed format wants. */
function formatString(start: string, value: string, comment: string): string[] {
  const quoted = value.replace(/'/g, "''");
  const room = CARD_BYTES - start.length - 2;
  if (quoted.length <= room) {
    return [fill(`${start}'${quoted.padEnd(8)}'`.padEnd(30), comment)];
  }
  const lines: string[] = [];
  let begin = start;
  let left = quoted;
  for (;;) {
    const space = CARD_BYTES - begin.length - 2;
    if (left.length <= space) {
      lines.push(fill(`${begin}'${left}'`, comment));
      return lines;
    }
    const cut = cutBefore(left, space - 1);
    lines.push(`${begin}'${left.slice(0, cut)}&'`.padEnd(CARD_BYTES));
    left = left.slice(cut);
    begin = 'CONTINUE  ';
  }
}

/** The place to cut at, at most `limit`, that does not part a doubled quote. */
function cutBefore(quoted: string, limit: number): number {
  const quotes = /'*$/.exec(quoted.slice(0, limit))?.[0].length ?? 0;
  return quotes % 2 === 1 ? limit - 1 : limit;
}
