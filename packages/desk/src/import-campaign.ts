import * as z from "zod";
import { visibilities } from "@weighhouse/campaign/entries";
import { defaulted, optional } from "@weighhouse/campaign/fields";
import { openCampaign } from "@weighhouse/store/open-campaign";
import { requireAccount } from "./access";
import { appended } from "./appended";
import type { Appended } from "./appended";
import type { Actor, Desk } from "./desk";
import { invalid } from "./desk-error";
import { parseInput } from "./parse-input";
import { planImport } from "./plan-import";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

/** Some 200,000 measurements with all that they may hold. */
const MAX_DOCUMENT_CHARACTERS = 128 * 1024 * 1024;

export const importCampaignInput = z.strictObject({
  /** The campaign document's text, as it is in the file. */
  text: z.string().max(MAX_DOCUMENT_CHARACTERS),
  /** The key it gets here; the document's own where it is absent. */
  key: optional(z.string()),
  visibility: defaulted(z.enum(visibilities), "public" as const),
});

/**
 * Opens a campaign with all that a campaign document holds, the actor its coordinator, in one
 * transaction. The ledger's dates are now; the document's own are kept as claimed.
 */
export async function importCampaign(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof importCampaignInput>,
): Promise<Appended> {
  const { text, key, visibility } = parseInput(importCampaignInput, input);
  const { userId } = requireAccount(actor, "import-campaign");
  const planned = planImport({ text, key, now: timeAt(desk) });
  if (!planned.ok) throw invalid(planned.problems);
  const { opening, entries } = planned.plan;
  const opened = await onStore(() =>
    openCampaign(desk.store, {
      coordinator: userId,
      campaign: { ...opening, visibility },
      entries,
      clock: desk.clock,
    }),
  );
  return appended(opening.key, opened);
}
