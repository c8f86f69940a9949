export type NumericsErrorCode = "empty-interval" | "out-of-domain";

/** A caller's mistake; a result that is an answer is a value, never this. */
export class NumericsError extends Error {
  readonly code: NumericsErrorCode;

  constructor(code: NumericsErrorCode, message: string) {
    super(message);
    this.name = "NumericsError";
    this.code = code;
  }
}
