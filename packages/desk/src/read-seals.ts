import * as z from "zod";
import type { Keeping } from "@weighhouse/campaign/seals";
import type { Part } from "@weighhouse/campaign/parts";
import { readHeld } from "@weighhouse/store/held-seals";
import type { HeldContent } from "@weighhouse/store/held-seals";
import { readPartsOf } from "@weighhouse/store/read-document";
import { readEntry } from "@weighhouse/store/read-ledger";
import { enter } from "./access";
import type { Access } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";
import { onStore } from "./store-refusals";
import { isPast, timeAt } from "./time";

export const readSealsInput = z.strictObject({
  key: z.string(),
  /** As of this many entries; the newest where it is absent. */
  size: z.int().min(1).optional(),
});

/** `never`: its time has passed and nobody opened it. */
export type SealState = "sealed" | "revealed" | "never";

export type Seal = {
  digest: string;
  of: "prediction" | "measurement";
  hypothesis: string | null;
  measurand: string;
  team: string | null;
  keeping: Keeping;
  until: string;
  /** The entry that sealed it, and its time: a prediction counts from then. */
  seq: number;
  at: string;
  revealed: { seq: number; at: string } | null;
  state: SealState;
  /** What the server holds, shown to those who sealed it alone; null to all others. */
  held: HeldContent | null;
};

export type SealCounts = { hypothesis: string } & Record<SealState, number>;

export type Seals = { seals: Seal[]; counts: SealCounts[] };

/** The seals of a campaign, and how many of each hypothesis's predictions are sealed and revealed. */
export async function readSeals(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readSealsInput>,
): Promise<Seals> {
  const { key, size } = parseInput(readSealsInput, input);
  const access = await enter(desk, actor, key, "read-campaign");
  const parts = await onStore(() => readPartsOf(desk.store, { campaign: key, part: "seal", size }));
  const at =
    size === undefined
      ? timeAt(desk)
      : (await onStore(() => readEntry(desk.store, { campaign: key, seq: size - 1 }))).entry.at;
  const seals = await Promise.all(parts.map((part) => sealOf(desk, access, { part, at })));
  return { seals, counts: countsOf(seals) };
}

type StoredSeal = Omit<Seal, "state" | "held"> & { member: string };

async function sealOf(
  desk: Desk,
  access: Access,
  { part, at }: { part: Part; at: string },
): Promise<Seal> {
  const { member, ...seal } = part.content as StoredSeal;
  const own = seal.team === null ? member === access.member : seal.team === access.team;
  const isHeld = seal.keeping === "held" && seal.revealed === null;
  const place = { campaign: access.campaign.key, digest: seal.digest };
  return {
    ...seal,
    state: stateOf(seal, at),
    held: own && isHeld && desk.store.sealKey !== null ? await readHeld(desk.store, place) : null,
  };
}

/** A held seal past its time is about to be opened by the server. */
function stateOf({ revealed, keeping, until }: Omit<StoredSeal, "member">, at: string): SealState {
  if (revealed !== null) return "revealed";
  return keeping === "kept" && isPast(until, at) ? "never" : "sealed";
}

function countsOf(seals: Seal[]): SealCounts[] {
  const counts = new Map<string, SealCounts>();
  for (const { hypothesis, state } of seals) {
    if (hypothesis === null) continue;
    const row = counts.get(hypothesis) ?? { hypothesis, sealed: 0, revealed: 0, never: 0 };
    row[state] += 1;
    counts.set(hypothesis, row);
  }
  return [...counts.values()];
}
