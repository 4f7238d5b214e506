import { type ErrorContext, FitsError } from '../errors.js';
import { numberFromText, type ParsedCard, parseCard } from './card.js';

/** Value of a header card; `undefined` where the card has none, numbers beyond 2^53 as strings. */
export type CardValue = string | number | boolean | undefined;

/** One header card after joining CONTINUE and HIERARCH; `keyword` in upper case. */
export interface Card {
  readonly keyword: string;
  readonly value: CardValue;
  readonly comment: string;
}

export interface FitsHeader {
  readonly cards: readonly Card[];
  readonly warnings: readonly string[];
}

/** Bytes in a block and in a card (Standard 4.0, 3.1 and 4.1). */
export const BLOCK_BYTES = 2880;
export const CARD_BYTES = 80;

/** More cards than this (5 MB of header) is taken for damage; the longest real header seen has 810. */
const MAX_CARDS = 65_536;
const MAX_WARNINGS = 20;

/**
 * Reads the header that starts at byte `offset`, up to its END card. `nextOffset` is the start of
 * the block after it. A card is END only when its whole keyword field is END, so ENDSTATE is not.
 * Throws FitsError when END is missing.
 */
export function parseHeader(
  bytes: Uint8Array,
  offset: number,
  context: ErrorContext = {},
): { header: FitsHeader; nextOffset: number } {
  const texts: string[] = [];
  for (let at = offset; at + 3 <= bytes.length; at += CARD_BYTES) {
    const text = latin1(bytes, at, Math.min(at + CARD_BYTES, bytes.length));
    if (isEnd(text)) {
      const cards = Math.ceil((at + CARD_BYTES - offset) / BLOCK_BYTES);
      return { header: headerFromCards(texts), nextOffset: offset + cards * BLOCK_BYTES };
    }
    if (texts.length === MAX_CARDS) break;
    texts.push(text.trimEnd());
  }
  throw new FitsError(`header without an END card in ${texts.length} cards`, context);
}

/** Reads a header kept as text, one card per line, trailing blanks removed; END may be absent. */
export function headerFromText(text: string): FitsHeader {
  const lines = text.split(/\r?\n/);
  const end = lines.findIndex(isEnd);
  const cards = end < 0 ? lines : lines.slice(0, end);
  while (cards.at(-1)?.trim() === '') cards.pop();
  return headerFromCards(cards);
}

function latin1(bytes: Uint8Array, start: number, end: number): string {
  return String.fromCharCode(...bytes.subarray(start, end));
}

function isEnd(text: string): boolean {
  // biome-ignore lint/suspicious/noControlCharactersInRegex: some writers fill up with zero bytes
  return /^END[\s\x00]{0,5}$/i.test(text.slice(0, 8)) && !text.startsWith('=', 8);
}

function headerFromCards(texts: readonly string[]): FitsHeader {
  const cards: Card[] = [];
  const notes: string[] = [];
  for (const [index, text] of texts.entries()) {
    // biome-ignore lint/suspicious/noControlCharactersInRegex: control characters are what is looked for
    const clean = text.replace(/[\x00-\x1f\x7f-\xff]/g, '?');
    if (clean !== text) notes.push(`card ${index + 1} holds bytes that are not printable ASCII`);
    addCard(cards, parseCard(clean), notes);
  }
  noteDuplicates(cards, notes);
  const more = notes.length - MAX_WARNINGS;
  const warnings = more > 0 ? [...notes.slice(0, MAX_WARNINGS), `and ${more} more`] : notes;
  return { cards: cards.map(closeLongString), warnings };
}

/** A string value that ends in `&` is open for a CONTINUE card (Standard 4.0, 4.2.1.2). */
interface OpenCard extends Card {
  readonly open?: boolean;
}

function addCard(cards: OpenCard[], parsed: ParsedCard, notes: string[]): void {
  const { warning, ...card } = parsed;
  const name = card.keyword === '' ? 'a card' : card.keyword;
  if (warning !== undefined) notes.push(warning.startsWith(name) ? warning : `${name}: ${warning}`);
  const last = cards.at(-1);
  if (card.keyword !== 'CONTINUE') {
    cards.push(
      typeof card.value === 'string' && card.value.endsWith('&') ? { ...card, open: true } : card,
    );
  } else if (last?.open === true && typeof card.value === 'string') {
    const value = (last.value as string).slice(0, -1) + card.value;
    const comment = [last.comment, card.comment].filter((part) => part !== '').join(' ');
    cards[cards.length - 1] = { ...last, value, comment, open: card.value.endsWith('&') };
  } else {
    notes.push('CONTINUE card that continues nothing, taken as a comment');
    const text = card.value === undefined ? card.comment : String(card.value);
    cards.push({ keyword: 'COMMENT', value: undefined, comment: text });
  }
}

/** A last `&` that no CONTINUE followed stays, as part of the text (Standard 4.0, 4.2.1.2). */
function closeLongString({ keyword, value, comment }: OpenCard): Card {
  return { keyword, value, comment };
}

function noteDuplicates(cards: readonly Card[], notes: string[]): void {
  const seen = new Map<string, CardValue>();
  const noted = new Set<string>();
  for (const { keyword, value } of cards) {
    if (value === undefined || noted.has(keyword)) continue;
    if (!seen.has(keyword)) seen.set(keyword, value);
    else if (seen.get(keyword) !== value) {
      noted.add(keyword);
      notes.push(`${keyword} given twice with different values, the first one counts`);
    }
  }
}

const indexes = new WeakMap<FitsHeader, Map<string, Card>>();

/** The first card of that keyword that has a value, else the first without one. */
function find(header: FitsHeader, keyword: string): Card | undefined {
  let index = indexes.get(header);
  if (index === undefined) {
    index = new Map();
    for (const card of header.cards) {
      const known = index.get(card.keyword);
      if (known === undefined || (known.value === undefined && card.value !== undefined)) {
        index.set(card.keyword, card);
      }
    }
    indexes.set(header, index);
  }
  return index.get(keyword.toUpperCase());
}

/** True when the header has a card of that keyword, with or without a value. */
export function hasCard(header: FitsHeader, keyword: string): boolean {
  return find(header, keyword) !== undefined;
}

/**
 * The first of `keywords` that holds a number, or a quoted string with a number in it as real files
 * have; undefined when none does. Where a keyword is given twice its first value counts (the
 * standard leaves it open; this is common practice). Never NaN or infinite.
 */
export function numberAt(header: FitsHeader, ...keywords: readonly string[]): number | undefined {
  for (const keyword of keywords) {
    const value = find(header, keyword)?.value;
    const number = typeof value === 'string' ? numberFromText(value) : value;
    if (typeof number === 'number') return number;
  }
  return undefined;
}

/** The first of `keywords` that holds a string which is not blank, without blanks around it. */
export function stringAt(header: FitsHeader, ...keywords: readonly string[]): string | undefined {
  for (const keyword of keywords) {
    const value = find(header, keyword)?.value;
    if (typeof value === 'string' && value.trim() !== '') return value.trim();
  }
  return undefined;
}

/** The first of `keywords` that holds T or F, or in quotes or not one of T, F, 1, 0. */
export function booleanAt(header: FitsHeader, ...keywords: readonly string[]): boolean | undefined {
  for (const keyword of keywords) {
    const value = find(header, keyword)?.value;
    if (typeof value === 'boolean') return value;
    const text = value === undefined ? '' : String(value).trim().toUpperCase();
    if (text === 'T' || text === '1') return true;
    if (text === 'F' || text === '0') return false;
  }
  return undefined;
}
