import * as z from "zod";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import { ENTRIES_PER_PAGE, readEntries } from "@weighhouse/store/read-ledger";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";

export const readLedgerLinesInput = z.strictObject({
  key: z.string(),
  /** Entries [from, to), at most 1,000 of them at a time; from the first where it is absent. */
  from: z.int().min(0).optional(),
  to: z.int().min(0).optional(),
});

export type LedgerLines = { text: string; from: number; to: number; size: number };

/**
 * A stretch of the ledger as a program reads it: a line of JSON for each entry, `entry` canonical
 * and `payload` the text that its digest is of.
 */
export async function readLedgerLines(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readLedgerLinesInput>,
): Promise<LedgerLines> {
  const { key, from = 0, to } = parseInput(readLedgerLinesInput, input);
  const { campaign } = await enter(desk, actor, key, "read-campaign");
  const end = Math.min(to ?? campaign.size, campaign.size, from + ENTRIES_PER_PAGE);
  const stored = await readEntries(desk.store, { campaign: key, from, to: end });
  const text = stored.map((one) => `${canonicalJson(one)}\n`).join("");
  return { text, from, to: from + stored.length, size: campaign.size };
}
