export type LedgerErrorCode =
  | "not-json"
  | "not-canonical"
  | "payload-too-large"
  | "not-an-entry"
  | "not-a-tree-head"
  | "not-a-key"
  | "not-in-tree";

/** What this package throws when it is handed something that it can't work with. */
export class LedgerError extends Error {
  readonly code: LedgerErrorCode;

  constructor(code: LedgerErrorCode, message: string, options?: ErrorOptions) {
    super(message, options);
    this.name = "LedgerError";
    this.code = code;
  }
}
