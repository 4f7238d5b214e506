import { type Card, type CardValue, type FitsHeader, numberAt, stringAt } from './header.js';

// Keywords of the table and of the compression, none of which belongs to the picture
// (Standard 4.0, 10.1.1 to 10.1.3).
const TABLE_CARD =
  /^(XTENSION|SIMPLE|BITPIX|NAXIS\d*|PCOUNT|GCOUNT|TFIELDS|THEAP|CHECKSUM|DATASUM|EXTEND|(TTYPE|TFORM|TUNIT|TNULL|TSCAL|TZERO|TDISP|TDIM|TBCOL)\d+)$/;
const COMPRESSION_CARD =
  /^(ZIMAGE|ZCMPTYPE|ZBITPIX|ZSIMPLE|ZTENSION|ZEXTEND|ZBLOCKED|ZPCOUNT|ZGCOUNT|ZHECKSUM|ZDATASUM|ZQUANTIZ|ZDITHER0|ZBLANK|ZSCALE|ZZERO|ZMASKCMP|(ZNAXIS|ZTILE|ZNAME|ZVAL)\d*)$/;

/**
 * The header of the picture in a tile-compressed image: structure keywords from ZBITPIX and ZNAXISn,
 * table and compression keywords removed, ZBLANK of an integer picture as BLANK. Without ZBLANK a plain
 * BLANK stays and acts: archives write it so.
 */
export function compressedImageHeader(table: FitsHeader, index: number): FitsHeader {
  const blank = numberAt(table, 'ZBLANK');
  const integer = (numberAt(table, 'ZBITPIX') ?? 0) > 0;
  const translated = integer && blank !== undefined;
  const kept = table.cards.filter(
    ({ keyword, value }) =>
      !TABLE_CARD.test(keyword) &&
      !COMPRESSION_CARD.test(keyword) &&
      !(keyword === 'EXTNAME' && value === 'COMPRESSED_IMAGE') && // the table's, not the picture's
      !(keyword === 'BLANK' && translated),
  );
  const cards = [...structureCards(table, index), ...kept];
  if (translated) cards.push(card('BLANK', blank, 'stored value of missing pixels'));
  return { cards, warnings: table.warnings };
}

function structureCards(table: FitsHeader, index: number): Card[] {
  const axes = numberAt(table, 'ZNAXIS') ?? 0;
  const first =
    index === 0
      ? card('SIMPLE', true, '')
      : card('XTENSION', stringAt(table, 'ZTENSION') ?? 'IMAGE', '');
  const cards = [first, card('BITPIX', numberAt(table, 'ZBITPIX'), ''), card('NAXIS', axes, '')];
  for (let axis = 1; axis <= Math.min(axes, 999); axis++) {
    cards.push(card(`NAXIS${axis}`, numberAt(table, `ZNAXIS${axis}`), ''));
  }
  return [...cards, card('PCOUNT', 0, ''), card('GCOUNT', 1, '')];
}

function card(keyword: string, value: CardValue, comment: string): Card {
  return { keyword, value, comment };
}
