/** Everything asked for is done. */
export const DONE = 0;
/** Failed: trust nothing. */
export const FAILED = 1;
/** The command line is wrong. */
export const USAGE = 2;
/** Finished, but some of several inputs failed. */
export const PARTLY = 3;
