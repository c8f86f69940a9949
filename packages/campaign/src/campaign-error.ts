export type CampaignErrorCode = "unknown-part" | "not-a-payload";

/** A ledger that breaks its own rules: never a user's doing, so an exception and no answer. */
export class CampaignError extends Error {
  override name = "CampaignError";
  constructor(
    readonly code: CampaignErrorCode,
    message: string,
    options?: { cause?: unknown },
  ) {
    super(message, options);
  }
}
