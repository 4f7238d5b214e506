declare module 'opentype.js/dist/opentype.mjs' {
  /** One drawing step in font units, y up. */
  export type PathCommand =
    | { readonly type: 'M' | 'L'; readonly x: number; readonly y: number }
    | {
        readonly type: 'Q';
        readonly x1: number;
        readonly y1: number;
        readonly x: number;
        readonly y: number;
      }
    | {
        readonly type: 'C';
        readonly x1: number;
        readonly y1: number;
        readonly x2: number;
        readonly y2: number;
        readonly x: number;
        readonly y: number;
      }
    | { readonly type: 'Z' };

  export interface Glyph {
    readonly index: number;
    readonly advanceWidth?: number;
    readonly path: { readonly commands: readonly PathCommand[] };
  }

  export interface Font {
    readonly unitsPerEm: number;
    charToGlyph(character: string): Glyph;
  }

  export function parse(buffer: ArrayBuffer, options?: { readonly lowMemory?: boolean }): Font;
}
