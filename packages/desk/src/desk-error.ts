import { problemLine } from "@weighhouse/campaign/problem";
import type { Problem } from "@weighhouse/campaign/problem";

/** Every way in which the desk refuses. A new code must be given its HTTP status to compile. */
export type DeskErrorCode =
  | "not-signed-in"
  | "not-allowed"
  | "insufficient-scope"
  | "not-found"
  | "invalid"
  | "conflict"
  | "closed"
  | "busy";

/** A refusal: what was found and what is allowed, with the fields at fault where there are any. */
export class DeskError extends Error {
  override readonly name = "DeskError";
  readonly code: DeskErrorCode;
  readonly problems: Problem[];

  constructor(
    code: DeskErrorCode,
    message: string,
    options: { problems?: Problem[]; cause?: unknown } = {},
  ) {
    super(message, { cause: options.cause });
    this.code = code;
    this.problems = options.problems ?? [];
  }
}

/** A refusal of input, one line for each thing that is wrong with it. */
export function invalid(problems: Problem[]): DeskError {
  return new DeskError("invalid", problems.map(problemLine).join("\n"), { problems });
}
