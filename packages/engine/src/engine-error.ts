import type { Problem } from "@weighhouse/campaign/problem";

/** What keeps a document from being scored though it could be read. */
export class EngineError extends Error {
  readonly code = "refused";

  constructor(readonly problems: Problem[]) {
    super(problems.map(({ pointer, found }) => `${pointer}: ${found}`).join("; "));
    this.name = "EngineError";
  }
}
