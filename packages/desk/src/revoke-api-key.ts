import * as z from "zod";
import { endApiKey } from "@weighhouse/store/api-keys";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { DeskError } from "./desk-error";
import { parseInput } from "./parse-input";
import { authorOf } from "./record-entries";

export const revokeApiKeyInput = z.strictObject({ key: z.string(), id: z.string() });

/**
 * Ends a key, at once and for good: one's own, or for a coordinator anybody's.
 *
 * @throws {DeskError} `not-found` also for another member's key
 */
export async function revokeApiKey(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof revokeApiKeyInput>,
): Promise<{ id: string }> {
  const { key: campaign, id } = parseInput(revokeApiKeyInput, input);
  const access = await enter(desk, actor, campaign, "revoke-api-key");
  const by = authorOf(access);
  if (!("member" in by)) throw new DeskError("not-allowed", "found no membership");
  const member = access.role === "coordinator" ? null : by.member;
  const found = await endApiKey(desk.store, { campaign, id, member, by: by.member });
  if (found) return { id };
  throw new DeskError("not-found", `found no key ${JSON.stringify(id)}; allowed are your own`);
}
