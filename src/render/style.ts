import type { TextStyle } from './drawing.js';

// Sizes in pixels. Nothing written is smaller than 12 px; contrast on white is at least 4.5 : 1.
export const MARGIN = 24;
export const LINE_HEIGHT = 18;

const INK = '#1b1f24';
const QUIET_INK = '#57606a';
/** For figures that rest on a prior or an assumption. */
const PRIOR_INK = '#5f6499';

export const INVERSION_INK = '#111111';
export const STRONG_CORE = '#ffe14d';
/** Strokes of the horizontal field. */
export const TICK_INK = '#14181d';
export const CURRENT_INK = '#0b6b3a';
export const FRAME_INK = '#2b3138';
export const RULE_INK = '#d0d7de';
export const ZEBRA_INK = '#f3f5f7';

export const TITLE: TextStyle = { sizePx: 20, weight: 'bold', ink: INK };
export const SUBTITLE: TextStyle = { sizePx: 14, weight: 'regular', ink: QUIET_INK };
export const HEADING: TextStyle = { sizePx: 13, weight: 'bold', ink: INK };
export const BODY: TextStyle = { sizePx: 13, weight: 'regular', ink: INK };
export const BODY_QUIET: TextStyle = { sizePx: 13, weight: 'regular', ink: QUIET_INK };
export const BODY_PRIOR: TextStyle = { ...BODY, ink: PRIOR_INK, slanted: true };
export const SMALL: TextStyle = { sizePx: 12, weight: 'regular', ink: INK };
export const SMALL_QUIET: TextStyle = { sizePx: 12, weight: 'regular', ink: QUIET_INK };
export const SMALL_PRIOR: TextStyle = { ...SMALL, ink: PRIOR_INK, slanted: true };
