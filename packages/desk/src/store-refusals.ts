import { StoreError } from "@weighhouse/store/store-error";
import type { StoreErrorCode } from "@weighhouse/store/store-error";
import { DeskError } from "./desk-error";
import type { DeskErrorCode } from "./desk-error";

/** What each refusal of the store means at the desk. Null: a fault of ours or of the machine. */
const meanings: Record<StoreErrorCode, DeskErrorCode | null> = {
  "campaign-exists": "conflict",
  "no-such-campaign": "not-found",
  "no-such-size": "not-found",
  "no-such-entry": "not-found",
  "no-such-upload": "not-found",
  "no-such-webhook": "not-found",
  "moved-on": "busy",
  "invalid-payload": "invalid",
  "payload-too-large": "invalid",
  "rule-broken": "conflict",
  "clock-not-simulated": null,
  "no-signer": null,
  "no-seal-key": "closed",
  "strange-key": null,
  "bad-keys": null,
  "bad-settings": null,
  "owner-runs": null,
  "not-migrated": null,
  "ledger-broken": null,
  restored: null,
  "no-such-member": "not-found",
  "embedded-failed": null,
};

/** Runs a call of the store and turns what it refuses into the desk's own words. */
export async function onStore<T>(call: () => Promise<T>): Promise<T> {
  try {
    return await call();
  } catch (error) {
    if (!(error instanceof StoreError)) throw error;
    const code = meanings[error.code];
    if (code === null) throw error;
    throw new DeskError(code, error.message, { problems: error.problems, cause: error });
  }
}
