// One tagged class for each thing a caller can do differently. `code` survives a worker boundary.

/** Where an error was found: any part may be unknown. */
export interface ErrorContext {
  readonly file?: string;
  readonly hdu?: number;
  readonly keyword?: string;
}

/** Base of all faults that a user can mend; its message is one line: what was found, what was wanted. */
export class SpotjouleError extends Error {
  readonly code: string;
  readonly context: ErrorContext;
  constructor(code: string, message: string, context: ErrorContext = {}, cause?: unknown) {
    super(message.replace(/\s*\n\s*/g, ' '), cause === undefined ? undefined : { cause });
    this.name = code;
    this.code = code;
    this.context = context;
  }
}

/** The command line is wrong: exit code 2. */
export class UsageError extends SpotjouleError {
  constructor(message: string, context?: ErrorContext, cause?: unknown) {
    super('UsageError', message, context, cause);
  }
}

/** The bytes are not a FITS file we can read, or break its rules where the meaning is not clear. */
export class FitsError extends SpotjouleError {
  constructor(message: string, context?: ErrorContext, cause?: unknown) {
    super('FitsError', message, context, cause);
  }
}

/** The map cannot be placed on the Sun, or the place asked for is not on it. */
export class GeometryError extends SpotjouleError {
  constructor(message: string, context?: ErrorContext, cause?: unknown) {
    super('GeometryError', message, context, cause);
  }
}

/** The file is sound but its contents are not usable: wrong quantity, wrong unit, nothing left. */
export class DataError extends SpotjouleError {
  constructor(message: string, context?: ErrorContext, cause?: unknown) {
    super('DataError', message, context, cause);
  }
}
