import type { Entry } from "@weighhouse/ledger/entry";
import { appendEntries } from "@weighhouse/store/append";
import type { Appended as Stored } from "@weighhouse/store/append";
import { readDocument } from "@weighhouse/store/read-document";
import type { DocumentAsOf } from "@weighhouse/store/read-document";
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

/** Entries to append, and which part of the document each field of the input becomes. */
export type Decision = { entries: NewEntry[]; fields: Field[] };

/**
 * Appends what `decide` makes of the campaign as it is now, once the campaign document that results
 * is one that reads and scores. The append holds only at the size that was decided on: when
 * somebody else was quicker, it is decided again.
 *
 * @throws {DeskError} `invalid`, with problems that point at the input's fields; `busy`
 */
export async function recordEntries(
  desk: Desk,
  access: Access,
  decide: (now: DocumentAsOf) => Decision,
): Promise<Stored> {
  const key = access.campaign.key;
  for (let attempt = 0; attempt < ATTEMPTS; attempt++) {
    const now = await onStore(() => readDocument(desk.store, key));
    const { entries, fields } = decide(now);
    checkAfter(now.document, entries, { by: authorOf(access), at: timeAt(desk), fields });
    try {
      return await appendEntries(desk.store, {
        campaign: key,
        by: authorOf(access),
        entries,
        clock: desk.clock,
        expectedSize: now.size,
      });
    } catch (error) {
      if (!(error instanceof StoreError && error.code === "moved-on")) {
        return onStore(() => Promise.reject(error));
      }
    }
  }
  throw new DeskError("busy", "others kept appending to this campaign; try again");
}

/** Who stands in the entry. Only members write: the table gives readers no action that appends. */
export function authorOf(access: Access): Entry["by"] {
  if (access.member === null) throw new DeskError("not-allowed", "found no membership");
  return { member: access.member, team: access.team };
}
