import * as z from "zod";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { proveConsistency } from "./ledger-proofs";
import { parseInput } from "./parse-input";

export const readConsistencyInput = z.strictObject({
  key: z.string(),
  /** The size of a head that was kept. */
  from: z.int().min(1),
  /** The size of a later one; the newest where it is absent. */
  to: z.int().min(1).optional(),
});

export type Consistency = { from: number; to: number; proof: string[] };

/** The proof that the ledger of one size is the beginning of the ledger of another. */
export async function readConsistency(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readConsistencyInput>,
): Promise<Consistency> {
  const { key, from, to: wanted } = parseInput(readConsistencyInput, input);
  const { campaign } = await enter(desk, actor, key, "read-campaign");
  const to = wanted ?? campaign.size;
  if (from > to || to > campaign.size) {
    const found = `from ${from} to ${to}`;
    throw new DeskError("not-found", `found ${found}; allowed are 1 to ${campaign.size}, in order`);
  }
  return { from, to, proof: await proveConsistency(desk, key, { from, to }) };
}
