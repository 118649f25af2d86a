/** Something a person has to put right; its message is one sentence that says what to do. */
export class PlainError extends Error {
  /** @param {string} message */
  constructor(message) {
    super(message);
    this.name = 'PlainError';
  }
}

/**
 * Says one step on the terminal.
 *
 * @param {string} text
 */
export function step(text) {
  process.stdout.write(`· ${text}\n`);
}

/**
 * Says why the command ends: the sentence of a {@link PlainError}, the stack of anything else.
 *
 * @param {unknown} error
 */
export function sayFailure(error) {
  const text =
    error instanceof PlainError ? error.message : error instanceof Error ? error.stack : String(error);
  const cause = error instanceof Error && error.cause !== undefined ? `\nCause: ${String(error.cause)}` : '';
  process.stderr.write(`\nRigwright cannot go on. ${text}${cause}\n`);
}
