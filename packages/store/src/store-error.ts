import type { Problem } from "@weighhouse/campaign/problem";

export type StoreErrorCode =
  | "campaign-exists"
  | "no-such-campaign"
  | "no-such-size"
  | "no-such-entry"
  | "no-such-upload"
  | "no-such-webhook"
  | "moved-on"
  | "invalid-payload"
  | "payload-too-large"
  | "rule-broken"
  | "clock-not-simulated"
  | "no-signer"
  | "no-seal-key"
  | "strange-key"
  | "bad-keys"
  | "bad-settings"
  | "owner-runs"
  | "not-migrated"
  | "ledger-broken"
  | "restored"
  | "no-such-member"
  | "embedded-failed";

/** What the store refuses: a closed list of codes, so that every caller's table of them is total. */
export class StoreError extends Error {
  override readonly name = "StoreError";
  readonly code: StoreErrorCode;
  /** For `invalid-payload` and `rule-broken`: each fault with its pointer into the payload. */
  readonly problems: Problem[];

  constructor(
    code: StoreErrorCode,
    message: string,
    options: { cause?: unknown; problems?: Problem[] } = {},
  ) {
    super(message, { cause: options.cause });
    this.code = code;
    this.problems = options.problems ?? [];
  }
}
