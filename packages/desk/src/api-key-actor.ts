import { KEY_PATTERN } from "@weighhouse/campaign/fields";
import { findApiKey, noteUse } from "@weighhouse/store/api-keys";
import { apiKeyHash, isApiKeyText } from "./api-key-text";
import type { Actor, Desk } from "./desk";
import { scopes } from "./scopes";

export type ApiKeyAnswer = { actor: NonNullable<Actor> } | { refused: string };

/**
 * For whom a key's text acts in a campaign. Why one is refused is said to who holds it; what is no
 * key there is in the same words whether or not there is such a campaign.
 */
export async function actorOfApiKey(
  desk: Desk,
  { campaign, text }: { campaign: string; text: string },
): Promise<ApiKeyAnswer> {
  if (!isApiKeyText(text)) return { refused: "found a key that is cut short or mistyped" };
  const found = KEY_PATTERN.test(campaign)
    ? await findApiKey(desk.store, { campaign, hash: apiKeyHash(text) })
    : null;
  if (found === null) return { refused: "found a key that is none of this campaign's" };
  const { id, userId, name, state } = found;
  if (state !== "holds") {
    return { refused: state === "expired" ? "found an expired key" : "found a revoked key" };
  }
  await noteUse(desk.store, { campaign, id });
  // What a later version took away opens nothing.
  const held = scopes.filter((scope) => found.scopes.includes(scope));
  return { actor: { userId, name, through: { campaign, id, scopes: held } } };
}
