import { SpotjouleError } from '../errors.js';

/**
 * One line for stderr: the file and what is wrong with it. Faults that are not ours to foresee are
 * named as internal, still on one line; `debug` adds the stack trace.
 */
export function faultLine(error: unknown, file: string | undefined, debug: boolean): string {
  const known = error instanceof SpotjouleError;
  const message = error instanceof Error ? error.message : String(error);
  const where = (known ? error.context.file : undefined) ?? file;
  const hdu = known && error.context.hdu !== undefined ? ` (HDU ${error.context.hdu})` : '';
  const what = known
    ? message
    : `internal fault: ${message} (please report it; --debug shows where)`;
  const line = `spotjoule: ${where === undefined ? '' : `${where}${hdu}: `}${what}`;
  const stack = debug && error instanceof Error ? `\n${error.stack}` : '';
  return `${printable(line)}${stack}`;
}

/** One line without control characters: those of a file name or a header must not reach the terminal. */
export function printable(text: string): string {
  return text.replace(/[\p{Cc}\p{Zl}\p{Zp}]+/gu, ' ');
}
