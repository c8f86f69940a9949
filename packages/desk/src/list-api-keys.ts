import * as z from "zod";
import { listApiKeys as listStored } from "@weighhouse/store/api-keys";
import type { ApiKeyRow } from "@weighhouse/store/api-keys";
import { enter } from "./access";
import type { Actor, Desk } from "./desk";
import { parseInput } from "./parse-input";

export const listApiKeysInput = z.strictObject({ key: z.string() });

export type ListedApiKey = ApiKeyRow & {
  /** Whether the one who asks made it. */
  own: boolean;
};

/** A member's own keys; all of the campaign's for coordinators, who answer for it. */
export async function listApiKeys(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof listApiKeysInput>,
): Promise<ListedApiKey[]> {
  const { key } = parseInput(listApiKeysInput, input);
  const { role, member } = await enter(desk, actor, key, "list-api-keys");
  const whose = role === "coordinator" ? null : member;
  const rows = await listStored(desk.store, { campaign: key, member: whose });
  return rows.map((row) => ({ ...row, own: row.member === member }));
}
