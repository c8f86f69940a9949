import { randomBytes } from "node:crypto";
import * as z from "zod";
import { line, optional, time } from "@weighhouse/campaign/fields";
import { addApiKey, listApiKeys } from "@weighhouse/store/api-keys";
import { enter } from "./access";
import { apiKeyBegins, apiKeyHash, makeApiKeyText } from "./api-key-text";
import type { Actor, Desk } from "./desk";
import { DeskError, invalid } from "./desk-error";
import { parseInput } from "./parse-input";
import { authorOf } from "./record-entries";
import { scopes } from "./scopes";
import type { Scope } from "./scopes";
import { isPast, timeAt } from "./time";

export const makeApiKeyInput = z.strictObject({
  key: z.string(),
  /** What it is for, to tell it apart later. */
  title: line,
  scopes: z.array(z.enum(scopes)).min(1),
  /** Null or absent: it holds until it is revoked. */
  expiresAt: optional(time),
});

export type MadeApiKey = {
  id: string;
  /** The key itself. It is shown this once: what is stored can't give it again. */
  text: string;
  scopes: Scope[];
  expiresAt: string | null;
};

/** More than anybody looks after. */
const MOST_PER_MEMBER = 50;

/**
 * Makes a key by which a program acts for this member in this campaign, within its scopes.
 *
 * @throws {DeskError} `invalid`; `conflict` where the member has too many that hold
 */
export async function makeApiKey(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof makeApiKeyInput>,
): Promise<MadeApiKey> {
  const { key: campaign, title, scopes, expiresAt } = parseInput(makeApiKeyInput, input);
  const access = await enter(desk, actor, campaign, "make-api-key");
  const by = authorOf(access);
  if (!("member" in by)) throw new DeskError("not-allowed", "found no membership");
  if (isPast(expiresAt, timeAt({ store: desk.store }))) {
    const allowed = "a time to come, or none";
    throw invalid([
      { pointer: "/expiresAt", code: "out-of-range", found: `${expiresAt}`, allowed },
    ]);
  }
  const theirs = await listApiKeys(desk.store, { campaign, member: by.member });
  if (theirs.filter(({ state }) => state === "holds").length >= MOST_PER_MEMBER) {
    const words = `found ${MOST_PER_MEMBER} keys of yours that hold; allowed one more once you revoke one`;
    throw new DeskError("conflict", words);
  }
  const text = makeApiKeyText();
  const made = { id: randomBytes(8).toString("hex"), scopes: [...new Set(scopes)], expiresAt };
  const stored = { hash: apiKeyHash(text), begins: apiKeyBegins(text) };
  await addApiKey(desk.store, campaign, { ...made, ...stored, member: by.member, title });
  return { ...made, text };
}
