import type { Problem } from "./problem";

export type CampaignErrorCode = "unknown-part" | "not-a-payload" | "rule-broken";

/** A ledger that breaks its own rules: never a user's doing, so an exception and no answer. */
export class CampaignError extends Error {
  override name = "CampaignError";
  /** For `rule-broken`: the fault, with its pointer into the payload. */
  readonly problem: Problem | null;

  constructor(
    readonly code: CampaignErrorCode,
    message: string,
    options: { cause?: unknown; problem?: Problem } = {},
  ) {
    super(message, { cause: options.cause });
    this.problem = options.problem ?? null;
  }
}
