import * as z from "zod";
import { hex } from "@weighhouse/ledger/bytes";
import { leafHash } from "@weighhouse/ledger/entry";
import type { Entry } from "@weighhouse/ledger/entry";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { listMembers } from "@weighhouse/store/members";
import { readEntries as readStored } from "@weighhouse/store/read-ledger";
import type { StoredEntry } from "@weighhouse/store/read-ledger";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";

export const MAX_ENTRIES_PER_PAGE = 200;

export const readEntriesInput = z.strictObject({
  key: z.string(),
  /** Entries [from, to), at most 200 of them; the newest 200 where neither is given. */
  from: z.int().min(0).optional(),
  to: z.int().min(0).optional(),
});

export type ListedEntry = {
  entry: Entry;
  /** Who appended it, by name; null for the system and for a person who was forgotten. */
  name: string | null;
  /** SHA-256 of the leaf, hexadecimal. */
  leafHash: string;
  payloadBytes: number;
  /** What it concerns: the keys of what is declared or registered, or measurements' ids. */
  about: { keys: string[]; count: number };
};

export type ListedEntries = { size: number; from: number; to: number; entries: ListedEntry[] };

/** A stretch of the ledger, oldest first. */
export async function readEntries(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readEntriesInput>,
): Promise<ListedEntries> {
  const { key, ...wanted } = parseInput(readEntriesInput, input);
  const { campaign } = await enter(desk, actor, key, "read-campaign");
  const { from, to } = stretchOf(campaign.size, wanted);
  const [stored, names] = await Promise.all([
    onStore(() => readStored(desk.store, { campaign: key, from, to })),
    memberNames(desk, key),
  ]);
  return {
    size: campaign.size,
    from,
    to,
    entries: stored.map((one) => listed(one, names)),
  };
}

/** Names by the opaque id that stands in entries. */
export async function memberNames(desk: Desk, key: string): Promise<Map<string, string>> {
  const members = await listMembers(desk.store, key);
  return new Map(members.map(({ member, name }) => [member, name]));
}

export function authorName(by: Entry["by"], names: Map<string, string>): string | null {
  return "system" in by ? null : (names.get(by.member) ?? null);
}

function stretchOf(size: number, wanted: { from?: number | undefined; to?: number | undefined }) {
  const fromWanted = wanted.from;
  const to = Math.min(
    wanted.to ?? (fromWanted === undefined ? size : fromWanted + MAX_ENTRIES_PER_PAGE),
    size,
  );
  const from = Math.min(Math.max(fromWanted ?? 0, to - MAX_ENTRIES_PER_PAGE), to);
  return { from, to };
}

function listed({ entry, payload }: StoredEntry, names: Map<string, string>): ListedEntry {
  return {
    entry,
    name: authorName(entry.by, names),
    leafHash: hex(leafHash(nodeHasher, entry)),
    payloadBytes: Buffer.byteLength(payload),
    about: concerned(JSON.parse(payload)),
  };
}

const KEYS_SHOWN = 5;

/** What a payload of any kind may name. */
type Naming = {
  key?: string;
  id?: string;
  code?: string;
  hypothesis?: string;
  measurand?: string | { key: string };
  measurement?: { id: string };
  measurements?: { id: string }[];
  selection?: { ids?: string[]; facility?: string };
  content?: { id?: string; measurand?: string };
};

function concerned(payload: Naming): ListedEntry["about"] {
  const { measurand, measurement, measurements, selection, content } = payload;
  const one = [
    payload.key,
    payload.id,
    payload.code,
    payload.hypothesis,
    typeof measurand === "object" ? measurand.key : measurand,
    measurement?.id,
    selection?.facility,
    content?.id ?? content?.measurand,
  ].filter((name) => name !== undefined);
  const keys = measurements?.map(({ id }) => id) ?? selection?.ids ?? one;
  return { keys: keys.slice(0, KEYS_SHOWN), count: keys.length };
}
