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
