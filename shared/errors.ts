/** Error codes of the API, their status and their standing title (RFC 9457 problem details). */
export const errorTable = {
  'bad-request': { status: 400, title: 'The request cannot be read' },
  'validation-failed': { status: 422, title: 'Some fields need a correction' },
  'file-rejected': { status: 422, title: 'The file cannot be used' },
  'not-signed-in': { status: 401, title: 'Sign in first' },
  forbidden: { status: 403, title: 'Your roles do not allow this' },
  'origin-refused': { status: 403, title: 'The request came from another site' },
  'not-found': { status: 404, title: 'Nothing is registered here' },
  conflict: { status: 409, title: 'The state does not allow this' },
  duplicate: { status: 409, title: 'The same content is registered already' },
  'too-large': { status: 413, title: 'The upload is too large' },
  'too-many-requests': { status: 429, title: 'Too many requests' },
  'simulation-failed': { status: 422, title: 'The phantom cannot be simulated' },
  internal: { status: 500, title: 'The server failed' },
} as const;
export type ErrorCode = keyof typeof errorTable;

/** One fault at one place: a field by its path, or a row and a column of a file. */
export interface Issue {
  readonly path: readonly (string | number)[];
  readonly message: string;
  readonly row?: number;
  readonly column?: number;
}

export class AppError extends Error {
  override readonly name = 'AppError';
  constructor(
    readonly code: ErrorCode,
    /** For the reader: what is wrong and a value that works. */
    readonly detail: string,
    readonly issues?: readonly Issue[],
    options?: { cause?: unknown; extra?: Record<string, unknown> },
  ) {
    super(detail, options);
    this.extra = options?.extra;
  }
  readonly extra?: Record<string, unknown>;
  get status(): number {
    return errorTable[this.code].status;
  }
}
