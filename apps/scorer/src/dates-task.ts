import { keepDates } from "@weighhouse/desk/keep-dates";
import type { Store } from "@weighhouse/store/open-store";
import { StoreError } from "@weighhouse/store/store-error";

/**
 * Does what a campaign's dates ask for. What can't be done is logged, and asked for again when
 * overdue campaigns are next looked for: a later entry may have made it possible.
 */
export async function datesTask(store: Store, payload: unknown): Promise<void> {
  const { campaign } = payload as { campaign: string };
  try {
    for (const { what, why } of await keepDates({ store }, campaign)) {
      store.log.warn({ campaign, what, why }, "a date could not be kept");
    }
  } catch (error) {
    // A campaign that isn't there won't come: to try again would be for nothing.
    if (error instanceof StoreError && error.code === "no-such-campaign") return;
    throw error;
  }
}
