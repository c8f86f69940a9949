import type { Entry } from "@weighhouse/ledger/entry";
import { appendEntries } from "@weighhouse/store/append";
import type { Alongside, Appended as Stored } from "@weighhouse/store/append";
import { holding, releasing } from "@weighhouse/store/held-seals";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { documentFromParts } from "@weighhouse/campaign/fold";
import type { Part } from "@weighhouse/campaign/parts";
import { readEverything } from "@weighhouse/store/read-document";
import { StoreError } from "@weighhouse/store/store-error";
import type { Access } from "./access";
import type { Desk } from "./desk";
import { DeskError } from "./desk-error";
import { checkAfter } from "./check-after";
import type { Field } from "./check-after";
import type { NewEntry } from "./document-after";
import { onStore } from "./store-refusals";
import { timeAt } from "./time";

/** How often a decision is made anew when others append meanwhile. */
const ATTEMPTS = 8;

/** The campaign as it is: its document, and what stands beside that. */
export type Now = { document: CampaignDocument; parts: Part[]; size: number; at: string };

/**
 * Entries to append, and which part of the document each field of the input becomes. `pointer` is
 * the field that the payload is, where that isn't the first of `fields`.
 */
export type Decision = {
  entries: NewEntry[];
  fields: Field[];
  pointer?: string;
  /** What of a seal is held from now on, and the digest of what is held no longer. */
  holds?: { digest: string; nonce: string; content: Record<string, unknown> } | null;
  releases?: string;
};

/**
 * Appends what `decide` makes of the campaign as it is now, once the campaign document that results
 * is one that reads and scores. The append holds only at the size that was decided on: when
 * somebody else was quicker, it is decided again.
 *
 * @throws {DeskError} `invalid`, with problems that point at the input's fields, where a rule is
 *   broken too; `busy`
 */
export async function recordEntries(
  desk: Desk,
  access: Access,
  decide: (now: Now) => Decision | Promise<Decision>,
): Promise<Stored> {
  return appendDecided(desk, { campaign: access.campaign.key, by: authorOf(access) }, decide);
}

/** The same for any author: the system, where dates make entries. */
export async function appendDecided(
  desk: Desk,
  { campaign, by }: { campaign: string; by: Entry["by"] },
  decide: (now: Now) => Decision | Promise<Decision>,
): Promise<Stored> {
  for (let attempt = 0; attempt < ATTEMPTS; attempt++) {
    const now = await readNow(desk, campaign);
    const { parts, size } = now;
    const { entries, fields, pointer, ...secret } = await decide(now);
    checkAfter(parts, entries, { by, at: timeAt(desk), size, fields, pointer });
    try {
      return await appendEntries(desk.store, {
        campaign,
        by,
        entries,
        clock: desk.clock,
        expectedSize: size,
        alongside: alongsideOf(desk, campaign, secret),
      });
    } catch (error) {
      if (!(error instanceof StoreError && error.code === "moved-on")) {
        return onStore(() => Promise.reject(error));
      }
    }
  }
  throw new DeskError("busy", "others kept appending to this campaign; try again");
}

function alongsideOf(
  { store }: Desk,
  campaign: string,
  { holds = null, releases }: Pick<Decision, "holds" | "releases">,
): Alongside | undefined {
  if (releases !== undefined) return releasing(releases);
  if (holds === null) return undefined;
  const { digest, ...held } = holds;
  return holding(store, { campaign, digest, held });
}

/** The campaign as the newest entry left it. */
export async function readNow(desk: Desk, campaign: string): Promise<Now> {
  const { parts, size, at } = await onStore(() => readEverything(desk.store, campaign));
  return { document: documentFromParts(parts), parts, size, at };
}

/** Who stands in the entry. Only members write: the table gives readers no action that appends. */
export function authorOf(access: Access): Entry["by"] {
  if (access.member === null) throw new DeskError("not-allowed", "found no membership");
  return { member: access.member, team: access.team };
}
