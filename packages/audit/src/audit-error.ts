export type AuditErrorCode = "unfit-input" | "not-an-archive" | "too-large";

/** What this package throws when it is handed something that it can't pack or unpack. */
export class AuditError extends Error {
  readonly code: AuditErrorCode;

  constructor(code: AuditErrorCode, message: string, options?: ErrorOptions) {
    super(message, options);
    this.name = "AuditError";
    this.code = code;
  }
}
