/** A failure whose message is written for the person at the terminal: shown as it is, without a stack. */
export class PlainError extends Error {
  /** @param {string} message */
  constructor(message) {
    super(message);
    this.name = 'PlainError';
  }
}
