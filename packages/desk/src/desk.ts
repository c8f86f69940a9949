import type { Clock } from "@weighhouse/store/append";
import type { Store } from "@weighhouse/store/open-store";

/**
 * What every use-case works with. `clock` is passed by tests and by the demo's seeding alone: with
 * none, entries carry the database's own time.
 */
export type Desk = { store: Store; clock?: Clock };

/** Who asks. Null: a reader without an account. */
export type Actor = { userId: string; name: string } | null;
