/** A mistake in the text of an expression: what was expected, what was found, and where. */
export class ExpressionError extends Error {
  readonly code = 'expression';

  /** @param position index into the text, 0-based, in UTF-16 units */
  constructor(
    readonly position: number,
    readonly expected: string,
    readonly found: string,
  ) {
    super(`expected ${expected}, found ${found}`);
    this.name = 'ExpressionError';
  }
}
