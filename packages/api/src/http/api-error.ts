/** Every way in which HTTP itself refuses, before a use-case is asked. */
export type ApiErrorCode =
  | "bad-request"
  | "bad-key"
  | "insufficient-scope"
  | "other-origin"
  | "method-not-allowed"
  | "not-acceptable"
  | "in-flight"
  | "too-large"
  | "unsupported-type"
  | "other-body"
  | "too-many-requests";

/** A refusal of a request, with the header fields that its status asks for. */
export class ApiError extends Error {
  override readonly name = "ApiError";
  readonly code: ApiErrorCode;
  readonly headers: Record<string, string>;

  constructor(code: ApiErrorCode, message: string, headers: Record<string, string> = {}) {
    super(message);
    this.code = code;
    this.headers = headers;
  }
}

/** Total, as the desk's: titles are the status phrases of RFC 9110 and RFC 6585. */
export const apiAnswers: Record<ApiErrorCode, { status: number; title: string }> = {
  "bad-request": { status: 400, title: "Bad Request" },
  "bad-key": { status: 401, title: "Unauthorized" },
  "insufficient-scope": { status: 403, title: "Forbidden" },
  "other-origin": { status: 403, title: "Forbidden" },
  "method-not-allowed": { status: 405, title: "Method Not Allowed" },
  "not-acceptable": { status: 406, title: "Not Acceptable" },
  "in-flight": { status: 409, title: "Conflict" },
  "too-large": { status: 413, title: "Content Too Large" },
  "unsupported-type": { status: 415, title: "Unsupported Media Type" },
  "other-body": { status: 422, title: "Unprocessable Content" },
  "too-many-requests": { status: 429, title: "Too Many Requests" },
};
