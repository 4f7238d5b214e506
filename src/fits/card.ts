import type { Card, CardValue } from './header.js';

/** A card as read on its own, before CONTINUE cards are joined to it. */
export interface ParsedCard extends Card {
  /** What was out of order but understood, or undefined. */
  readonly warning?: string;
}

const COMMENTARY = new Set(['COMMENT', 'HISTORY', '']);
const NUMBER = /^[+-]?(\d+\.?\d*|\.\d+)([EDed][+-]?\d+)?$/;
const INTEGER = /^[+-]?\d+$/;
// Standard 4.0, 4.1.2.1 allows A-Z 0-9 - _ ; real files also hold $ and . and lower case.
const LOOSE_KEYWORD = /^[A-Za-z0-9_$.-]{1,8}$/;

/**
 * The number written in `text` (blanks around it allowed), or undefined. Exponents may be written
 * with D as in Fortran (Standard 4.0, 4.2.4). Never NaN or infinite.
 */
export function numberFromText(text: string): number | undefined {
  const trimmed = text.trim();
  if (!NUMBER.test(trimmed)) return undefined;
  const value = Number(trimmed.replace(/[Dd]/, 'E'));
  return Number.isFinite(value) ? value : undefined;
}

/**
 * Reads one card of up to 80 characters: fixed and free format, quoted strings with doubled quotes,
 * HIERARCH (keyword is what stands between HIERARCH and `=`, blanks made single), commentary.
 * Anything else out of order is read as far as its meaning is clear, with `warning` set.
 */
export function parseCard(text: string): ParsedCard {
  const field = text.slice(0, 8).trimEnd();
  const keyword = field.toUpperCase();
  if (COMMENTARY.has(keyword)) return { keyword, value: undefined, comment: rest(text) };
  if (keyword === 'HIERARCH') return parseHierarch(text);
  if (keyword === 'CONTINUE') return { keyword, ...parseValue(text.slice(8).replace(/^\s*=/, '')) };
  if (text.startsWith('= ', 8) || (text[8] === '=' && text.length <= 9)) {
    const odd = field === keyword && /^[A-Z0-9_-]+$/.test(field) ? undefined : field;
    return withNote(
      { keyword, ...parseValue(text.slice(10)) },
      odd,
      'keyword has illegal characters',
    );
  }
  return parseMisplaced(text, keyword);
}

/** A card without `= ` in columns 9 and 10: a misplaced equals sign, or no value at all. */
function parseMisplaced(text: string, keyword: string): ParsedCard {
  const equals = text.indexOf('=');
  const before = equals > 0 && equals <= 9 ? text.slice(0, equals).trim() : '';
  if (!LOOSE_KEYWORD.test(before)) return { keyword, value: undefined, comment: rest(text) };
  const upper = before.toUpperCase();
  const card = { keyword: upper, ...parseValue(text.slice(equals + 1)) };
  return withNote(card, upper, 'the equals sign and blank are not in columns 9 and 10');
}

function parseHierarch(text: string): ParsedCard {
  const equals = text.indexOf('=');
  const name = equals < 0 ? '' : text.slice(8, equals).trim().replace(/\s+/g, ' ').toUpperCase();
  if (name === '') return { keyword: 'HIERARCH', value: undefined, comment: rest(text) };
  return { keyword: name, ...parseValue(text.slice(equals + 1)) };
}

function rest(text: string): string {
  return text.slice(8).trimEnd();
}

function withNote(card: ParsedCard, subject: string | undefined, note: string): ParsedCard {
  if (subject === undefined) return card;
  const own = `${subject}: ${note}`;
  return { ...card, warning: card.warning === undefined ? own : `${own}; ${card.warning}` };
}

interface ParsedValue {
  readonly value: CardValue;
  readonly comment: string;
  readonly warning?: string;
}

/** The value field from just after `=`, with the comment after `/`. */
function parseValue(field: string): ParsedValue {
  const text = field.trimStart();
  if (text.startsWith("'")) return parseString(text);
  const slash = text.indexOf('/');
  const token = (slash < 0 ? text : text.slice(0, slash)).trim();
  const comment = slash < 0 ? '' : text.slice(slash + 1).trim();
  if (token === '') return { value: undefined, comment };
  if (token === 'T' || token === 'F') return { value: token === 'T', comment };
  const number = numberFromText(token);
  if (number !== undefined) {
    const exact = !INTEGER.test(token) || Number.isSafeInteger(number);
    return { value: exact ? number : token, comment };
  }
  if (/^[+-]?(nan|inf(inity)?)/i.test(token) || NUMBER.test(token)) {
    return { value: undefined, comment, warning: `value ${token} is not a finite number` };
  }
  if (/^\([^()]*\)$/.test(token)) return { value: token, comment }; // complex numbers, kept as text
  return { value: token, comment, warning: `text value ${token} without quotes` };
}

/** A quoted string: '' inside stands for one quote; trailing blanks do not count, leading ones do. */
function parseString(text: string): ParsedValue {
  let value = '';
  let at = 1;
  for (;;) {
    const quote = text.indexOf("'", at);
    if (quote < 0) {
      return {
        value: (value + text.slice(at)).trimEnd(),
        comment: '',
        warning: 'closing quote missing',
      };
    }
    value += text.slice(at, quote);
    if (text[quote + 1] !== "'") {
      const slash = text.indexOf('/', quote + 1);
      return { value: value.trimEnd(), comment: slash < 0 ? '' : text.slice(slash + 1).trim() };
    }
    value += "'";
    at = quote + 2;
  }
}
