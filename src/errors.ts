/** What an error carries besides its message; plain data, so that it crosses a worker boundary. */
export type ErrorFields = Readonly<Record<string, string | number | boolean | null>>;

/** Base of every error that Galewake raises on purpose. The message says where, what and how to mend it. */
export class GalewakeError extends Error {
  readonly code: string;
  readonly fields: ErrorFields;

  constructor(code: string, message: string, options: { fields?: ErrorFields; cause?: unknown } = {}) {
    super(message, options.cause === undefined ? undefined : { cause: options.cause });
    this.name = new.target.name;
    this.code = code;
    this.fields = options.fields ?? {};
  }
}

/** The input (a file, a recipe, a grid) cannot be right. Exit code 3. */
export class InputError extends GalewakeError {}

/** The command line or a call is wrong. Exit code 2. */
export class UsageError extends GalewakeError {}

/** The request is valid but too large for this machine or format. Exit code 3. */
export class LimitError extends GalewakeError {}

/** An error as plain data: what a worker posts. */
export interface PlainError {
  readonly kind: string;
  readonly code: string;
  readonly message: string;
  readonly fields: ErrorFields;
}

export function toPlainError(error: unknown): PlainError {
  if (error instanceof GalewakeError) {
    return { kind: error.name, code: error.code, message: error.message, fields: error.fields };
  }
  const message = error instanceof Error ? (error.stack ?? error.message) : String(error);
  return { kind: 'Error', code: 'internal', message, fields: {} };
}

/** Rebuilds the class of an error that came as plain data. */
export function fromPlainError(plain: PlainError): Error {
  const kinds: Record<string, typeof GalewakeError> = { InputError, UsageError, LimitError };
  const kind = kinds[plain.kind];
  return kind ? new kind(plain.code, plain.message, { fields: plain.fields }) : new Error(plain.message);
}
