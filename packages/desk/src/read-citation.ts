import * as z from "zod";
import { CODE_PATTERN } from "@weighhouse/campaign/entries";
import type { Payload } from "@weighhouse/campaign/entries";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { findCitation } from "@weighhouse/store/citations";
import { readDocument } from "@weighhouse/store/read-document";
import { readEntry } from "@weighhouse/store/read-ledger";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { authorName, memberNames } from "./read-entries";
import { onStore } from "./store-refusals";

export const readCitationInput = z.strictObject({ code: z.string() });

export type Citation = {
  code: string;
  key: string;
  /** The entry that cites; the standings are as of all entries before it. */
  seq: number;
  at: string;
  by: "hand" | "clock";
  name: string | null;
  note: string | null;
  clock: "real" | "simulated";
  standings: Standings;
  /** The campaign document that these are the standings of. */
  document: CampaignDocument;
};

/** Standings as they were cited, found by their code among all campaigns that the actor may read. */
export async function readCitation(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readCitationInput>,
): Promise<Citation> {
  const { code } = parseInput(readCitationInput, input);
  const found = CODE_PATTERN.test(code) ? await findCitation(desk.store, code) : null;
  if (found === null) throw noSuchCitation(code);
  const { campaign, seq } = found;
  const access = await enter(desk, actor, campaign, "read-campaign").catch((error: unknown) => {
    // That there is one is the campaign's members' business.
    throw error instanceof DeskError && error.code === "not-found" ? noSuchCitation(code) : error;
  });
  const [{ entry, payload }, { document }, names] = await Promise.all([
    onStore(() => readEntry(desk.store, { campaign, seq })),
    onStore(() => readDocument(desk.store, campaign, seq)),
    memberNames(desk, campaign),
  ]);
  const { by, note, standings } = JSON.parse(payload) as Payload<"standings.cited">;
  return {
    code,
    key: campaign,
    seq,
    at: entry.at,
    by,
    name: authorName(entry.by, names),
    note,
    clock: access.campaign.clock,
    standings: standings as Standings,
    document,
  };
}

function noSuchCitation(code: string): DeskError {
  const allowed = "allowed is the code of a citation, 8 digits and small letters";
  return new DeskError("not-found", `found no cited standings ${JSON.stringify(code)}; ${allowed}`);
}
