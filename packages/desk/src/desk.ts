import type { Clock } from "@weighhouse/store/append";
import type { Store } from "@weighhouse/store/open-store";
import type { Scope } from "./scopes";
import type { WebhookSettings } from "./webhook-settings";

/**
 * What every use-case works with. `clock` is passed by tests and by the demo's seeding alone: with
 * none, entries carry the database's own time. `webhooks` is where deliveries may go.
 */
export type Desk = { store: Store; clock?: Clock; webhooks?: WebhookSettings };

/** Who asks. Null: a reader without an account. */
export type Actor = {
  userId: string;
  name: string;
  /** The key that the request came with: it opens no more than its scopes, in its campaign. */
  through?: ApiKeyUse;
} | null;

export type ApiKeyUse = { campaign: string; id: string; scopes: readonly Scope[] };
