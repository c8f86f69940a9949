import { randomUUID } from "node:crypto";
import { keepHead, writeEntries } from "./append";
import type { Appended, Clock, NewEntry } from "./append";
import { lockTip } from "./lock-tip";
import type { Store } from "./open-store";
import { preparePayload } from "./prepare-payload";
import { StoreError } from "./store-error";

export type OpenCampaignInput = {
  /** User id of the campaign's first coordinator; null: opened by the system. */
  coordinator: string | null;
  /** Payload of `campaign.opened` without `ledger` and `clock`, which the store sets. */
  campaign: Record<string, unknown> & { key: string };
  /** Further entries of the same transaction (an import's declarations). */
  entries?: NewEntry[];
  clock?: Clock | undefined;
};

export type OpenedCampaign = Appended & {
  campaignId: number;
  ledger: string;
  /** Opaque id of the coordinator, as in entries. */
  member: string | null;
};

/**
 * Makes a campaign with entry 0, its random ledger id, and its first coordinator.
 *
 * @throws {StoreError} `campaign-exists`: keys are unique and never change
 */
export async function openCampaign(
  store: Store,
  input: OpenCampaignInput,
): Promise<OpenedCampaign> {
  const { clock, coordinator } = input;
  const ledger = randomUUID();
  const member = coordinator === null ? null : randomUUID();
  const opening = preparePayload({
    kind: "campaign.opened",
    payload: { ...input.campaign, ledger, clock: clock === undefined ? "real" : "simulated" },
  });
  const payloads = [opening, ...(input.entries ?? []).map(preparePayload)];
  const { key, visibility } = opening.value as { key: string; visibility: string };
  const opened = (await store.sql.begin(async (tx) => {
    const [row] = await tx<{ id: number }[]>`
      insert into campaigns (key, ledger, clock, visibility, opened_at)
      values (${key}, ${ledger}, ${clock === undefined ? "real" : "simulated"}, ${visibility},
        clock_timestamp())
      on conflict (key) do nothing returning id`;
    if (row === undefined) {
      throw new StoreError(
        "campaign-exists",
        `found a campaign ${JSON.stringify(key)} already; allowed is a key that no campaign has`,
      );
    }
    await tx`
      insert into tips (campaign_id, size, edge, last_at) values (${row.id}, 0, '', 'epoch')`;
    if (member !== null) {
      await tx`
        insert into memberships (campaign_id, member, user_id, role)
        values (${row.id}, ${member}, ${coordinator}, 'coordinator')`;
    }
    const by = member === null ? ({ system: true } as const) : { member, team: null };
    const tip = await lockTip(tx, key);
    const appended = await writeEntries(store, tx, { tip, by, payloads, clock });
    return { ...appended, campaignId: row.id, ledger, member };
  })) as OpenedCampaign;
  await keepHead(store, opened.note);
  return opened;
}
