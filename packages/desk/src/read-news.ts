import * as z from "zod";
import type { Entry } from "@weighhouse/ledger/entry";
import { readPartsOf } from "@weighhouse/store/read-document";
import { readEntries as readStored } from "@weighhouse/store/read-ledger";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { entryInWords } from "./entry-in-words";
import type { EntryInWords } from "./entry-in-words";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const NEWS_PER_PAGE = 50;

export const readNewsInput = z.strictObject({
  key: z.string(),
  /** Entries before this one; the newest unless given. */
  to: z.int().min(1).optional(),
});

export type News = {
  /** The campaign's title. */
  title: string;
  /** The ledger's id. */
  ledger: string;
  size: number;
  /** Entries [from, to), at most 50, are told. */
  from: number;
  to: number;
  entries: (EntryInWords & { seq: number; at: string; kind: string; team: string | null })[];
};

/** A stretch of the ledger in words, the newest entry first. Nobody is named: teams are. */
export async function readNews(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readNewsInput>,
): Promise<News> {
  const { key, to: wanted } = parseInput(readNewsInput, input);
  const { campaign } = await enter(desk, actor, key, "read-campaign");
  const { size, ledger } = campaign;
  const to = Math.min(wanted ?? size, size);
  const from = Math.max(0, to - NEWS_PER_PAGE);
  const [stored, main] = await Promise.all([
    onStore(() => readStored(desk.store, { campaign: key, from, to })),
    onStore(() => readPartsOf(desk.store, { campaign: key, part: "campaign", size })),
  ]);
  return {
    title: String(main[0]?.content["title"] ?? key),
    ledger,
    size,
    from,
    to,
    entries: stored.toReversed().map(({ entry, payload }) => ({
      seq: entry.seq,
      at: entry.at,
      kind: entry.kind,
      team: teamOf(entry.by),
      ...entryInWords(entry.kind, JSON.parse(payload)),
    })),
  };
}

function teamOf(by: Entry["by"]): string | null {
  return "system" in by ? null : by.team;
}
