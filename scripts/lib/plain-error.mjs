/** Something a person can put right; its message is shown without a stack. */
export class PlainError extends Error {
  /** @param {string} message */
  constructor(message) {
    super(message);
    this.name = "PlainError";
  }
}
