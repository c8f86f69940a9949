import * as z from "zod";
import { readLatestHead } from "@weighhouse/store/read-ledger";
import type { StoredHead } from "@weighhouse/store/read-ledger";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";

export const readTreeHeadInput = z.strictObject({ key: z.string() });

/** The newest signed head of a campaign's ledger. */
export async function readTreeHead(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof readTreeHeadInput>,
): Promise<StoredHead> {
  const { key } = parseInput(readTreeHeadInput, input);
  await enter(desk, actor, key, "read-campaign");
  return readLatestHead(desk.store, key);
}
