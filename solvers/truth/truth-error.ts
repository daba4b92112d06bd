/** A fault of a ground truth at one field of the phantom definition. */
export class TruthError extends RangeError {
  override readonly name = 'TruthError';
  constructor(
    message: string,
    /** Path of the field in the phantom definition. */
    readonly path: readonly (string | number)[],
    options?: { cause?: unknown },
  ) {
    super(message, options);
  }
}
