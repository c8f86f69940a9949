import { createHash } from "node:crypto";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { actorOfApiKey } from "./api-key-actor";
import { isApiKeyText, makeApiKeyText } from "./api-key-text";
import { declareFacility } from "./declare";
import type { Actor } from "./desk";
import { connect } from "@weighhouse/store/open-store";
import { addMember } from "./add-member";
import { listApiKeys } from "./list-api-keys";
import { makeApiKey } from "./make-api-key";
import { openCampaign } from "./open-campaign";
import { postMeasurements } from "./post-measurements";
import { readCampaign } from "./read-campaign";
import { revokeApiKey } from "./revoke-api-key";
import { actions } from "./roles";
import { scopeActions, scopes, scopesFor } from "./scopes";
import type { Scope } from "./scopes";
import { openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

let house: TestDesk;
let lagoon: Lagoon;
let other: Lagoon;
beforeAll(async () => {
  house = await openTestDesk();
  lagoon = await openLagoon(house);
  other = await openLagoon(house, { key: "other-lagoon", visibility: "members" });
});
afterAll(() => house.close());

const { key } = { key: "lagoon-glow" };

async function made(maker: Actor, ...scopes: Scope[]) {
  return makeApiKey(house.desk, maker, { key, title: "night pipeline", scopes });
}

async function through(text: string, campaign = key): Promise<NonNullable<Actor>> {
  const answer = await actorOfApiKey(house.desk, { campaign, text });
  if ("refused" in answer) throw new Error(answer.refused);
  return answer.actor;
}

const drafts = (id: string) => ({ from: "drafts" as const, drafts: [reading(id, 40)] });

describe("a key's text", () => {
  it("is a prefix, 160 random bits and 40 bits of a SHA-256 over both, in base32 (RFC 4648)", () => {
    const text = makeApiKeyText();
    expect(text).toMatch(/^weighhouse_[a-z2-7]{40}$/);
    // By hand, from the letters' table of RFC 4648, 6: five bits each.
    const letters = "abcdefghijklmnopqrstuvwxyz234567";
    let bits = 0n;
    for (const letter of text.slice(11)) bits = bits * 32n + BigInt(letters.indexOf(letter));
    const bytes = Buffer.from(bits.toString(16).padStart(50, "0"), "hex");
    const digest = createHash("sha256").update("weighhouse_").update(bytes.subarray(0, 20));
    expect(bytes.subarray(20)).toEqual(digest.digest().subarray(0, 5));
  });

  it("is never made twice, and is known for one by every letter of it", () => {
    const texts = Array.from({ length: 500 }, makeApiKeyText);
    expect(new Set(texts).size).toBe(500);
    const [text = ""] = texts;
    expect(isApiKeyText(text)).toBe(true);
    for (let at = 0; at < text.length; at++) {
      const letter = text[at] === "a" ? "b" : "a";
      expect(isApiKeyText(text.slice(0, at) + letter + text.slice(at + 1))).toBe(false);
    }
    expect(isApiKeyText(text.slice(0, -1))).toBe(false);
    expect(isApiKeyText(`${text}a`)).toBe(false);
  });
});

describe("the scopes", () => {
  it("open no action that concerns keys, people or what is declared", () => {
    const open = new Set(scopes.flatMap((scope) => scopeActions[scope]));
    const personal = actions.filter((action) => !open.has(action));
    expect(personal).toEqual(
      expect.arrayContaining([
        "make-api-key",
        "list-api-keys",
        "revoke-api-key",
        "add-member",
        "list-members",
        "open-campaign",
        "declare",
        "amend-campaign",
      ]),
    );
    for (const action of personal) expect(scopesFor(action)).toEqual([]);
  });
});

describe("a key", () => {
  it("acts as its maker, and what it posts stands under the maker's name and team", async () => {
    const { text } = await made(lagoon.member, "read", "measurements:post");
    const actor = await through(text);
    expect(actor).toMatchObject({ userId: lagoon.member.userId, name: lagoon.member.name });
    const posted = await postMeasurements(house.desk, actor, { key, source: drafts("by-key") });
    expect(posted.posted).toEqual(["by-key"]);
    const { document } = await readCampaign(house.desk, actor, { key });
    expect(document.measurements.find(({ id }) => id === "by-key")?.team).toBe("algae");
  });

  it("does nothing beyond its scopes", async () => {
    const { text } = await made(lagoon.coordinator, "read");
    const actor = await through(text);
    await expect(
      postMeasurements(house.desk, actor, { key, source: drafts("never") }),
    ).rejects.toMatchObject({
      code: "insufficient-scope",
      message: expect.stringContaining("allowed with the scope measurements:post") as string,
    });
    await expect(
      declareFacility(house.desk, actor, { key, facility: { key: "buoy" } }),
    ).rejects.toMatchObject({
      code: "insufficient-scope",
      message: expect.stringContaining("allowed signed in, without a key") as string,
    });
    await expect(listApiKeys(house.desk, actor, { key })).rejects.toMatchObject({
      code: "insufficient-scope",
    });
    await expect(
      makeApiKey(house.desk, actor, { key, title: "more", scopes: [...scopes] }),
    ).rejects.toMatchObject({ code: "insufficient-scope" });
    await expect(
      openCampaign(house.desk, actor, { campaign: { key: "mine", title: "Mine" } }),
    ).rejects.toMatchObject({ code: "insufficient-scope" });
  });

  it("of one campaign is none in another, even where its maker has a place there", async () => {
    const { text } = await made(lagoon.coordinator, ...scopes);
    await addMember(house.desk, other.coordinator, {
      key: other.key,
      email: lagoon.coordinator.email,
      role: "member",
    });
    await expect(through(text, other.key)).rejects.toThrow("none of this campaign's");
    const actor = await through(text);
    await expect(readCampaign(house.desk, actor, { key: other.key })).rejects.toMatchObject({
      code: "insufficient-scope",
    });
  });

  it("is refused in the same words in a campaign that isn't there", async () => {
    const text = makeApiKeyText();
    const said = await actorOfApiKey(house.desk, { campaign: other.key, text });
    expect(await actorOfApiKey(house.desk, { campaign: "no-lagoon", text })).toEqual(said);
    expect(await actorOfApiKey(house.desk, { campaign: "\0", text })).toEqual(said);
  });

  it("does no more than its maker's role allows, from the moment on that the role changes", async () => {
    const { text } = await made(lagoon.rival, ...scopes);
    const { email } = lagoon.rival;
    await addMember(house.desk, lagoon.coordinator, { key, email, role: "reader" });
    await expect(
      postMeasurements(house.desk, await through(text), { key, source: drafts("never") }),
    ).rejects.toMatchObject({ code: "not-allowed" });
    await addMember(house.desk, lagoon.coordinator, {
      key,
      email,
      role: "member",
      team: "minerals",
    });
  });

  it("is none any more once its maker has no place in the campaign, or is forgotten", async () => {
    const { text } = await made(lagoon.rival, "read");
    const { sql } = house.desk.store;
    const { userId } = lagoon.rival;
    await sql`update memberships set user_id = null where user_id = ${userId}`;
    await expect(through(text)).rejects.toThrow("none of this campaign's");
  });

  it("ends when it is revoked, at once and once: by its maker or a coordinator, by nobody else", async () => {
    const { text, id } = await made(lagoon.member, "read");
    const revoke = (actor: Actor) => revokeApiKey(house.desk, actor, { key, id });
    await expect(revoke(lagoon.reader)).rejects.toMatchObject({ code: "not-allowed" });
    const coordinators = await made(lagoon.coordinator, "read");
    await expect(
      revokeApiKey(house.desk, lagoon.member, { key, id: coordinators.id }),
    ).rejects.toMatchObject({ code: "not-found" });
    await through(text);
    await revoke(lagoon.coordinator);
    await expect(through(text)).rejects.toThrow("found a revoked key");
    const at = async () =>
      (await listApiKeys(house.desk, lagoon.member, { key })).find((one) => one.id === id);
    const first = await at();
    await revoke(lagoon.member);
    expect(await at()).toEqual(first);
    expect(first).toMatchObject({ state: "revoked", own: true });
  });

  it("ends at its expiry; one that is past is refused", async () => {
    const expiresAt = new Date(Date.now() + 1200).toISOString();
    const input = { key, title: "short", scopes: ["read" as const], expiresAt };
    const { text, id } = await makeApiKey(house.desk, lagoon.member, input);
    await through(text);
    await new Promise((resolve) => setTimeout(resolve, 1300));
    await expect(through(text)).rejects.toThrow("found an expired key");
    const listed = await listApiKeys(house.desk, lagoon.member, { key });
    expect(listed.find((one) => one.id === id)?.state).toBe("expired");
    await expect(makeApiKey(house.desk, lagoon.member, input)).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/expiresAt" }],
    });
  });

  it("is asked for by name and for something", async () => {
    const input = { key, title: "", scopes: [] as Scope[] };
    await expect(makeApiKey(house.desk, lagoon.member, input)).rejects.toMatchObject({
      problems: [{ pointer: "/title" }, { pointer: "/scopes" }],
    });
  });

  it("shows when it was last used, to the hour", async () => {
    const { text, id } = await made(lagoon.member, "read");
    const last = async () =>
      (await listApiKeys(house.desk, lagoon.member, { key })).find((one) => one.id === id)
        ?.lastUsedAt;
    expect(await last()).toBeNull();
    await through(text);
    expect(await last()).toMatch(/^\d{4}-\d\d-\d\dT\d\d:00:00\.000000Z$/);
  });
});

describe("the list of keys", () => {
  it("shows members their own, coordinators all, nobody any key", async () => {
    const { text } = await made(lagoon.member, "read", "seals");
    const own = await listApiKeys(house.desk, lagoon.member, { key });
    expect(own.every((one) => one.own && one.name === lagoon.member.name)).toBe(true);
    const all = await listApiKeys(house.desk, lagoon.coordinator, { key });
    expect(all.length).toBeGreaterThan(own.length);
    expect(own[0]).toMatchObject({ scopes: ["read", "seals"], begins: text.slice(0, 15) });
    expect(JSON.stringify([own, all])).not.toContain(text.slice(0, 20));
  });
});

it("who reads the whole database finds no key in it, and nothing that is one", async () => {
  const { text } = await made(lagoon.member, ...scopes);
  const admin = connect(house.adminUrl, 1);
  const tables = await admin<{ name: string }[]>`
    select quote_ident(schemaname) || '.' || quote_ident(tablename) as name from pg_tables
    where schemaname not in ('pg_catalog', 'information_schema')`;
  let rows = 0;
  const random = text.slice(15);
  for (const { name } of tables) {
    const dump = await admin.unsafe(`select t::text as line from ${name} t`);
    for (const { line } of dump as unknown as { line: string }[]) {
      rows++;
      expect(line).not.toContain(random);
      expect(line).not.toContain(Buffer.from(text).toString("hex"));
      expect(line).not.toContain(Buffer.from(text).toString("base64"));
      // Whatever stands in a cell: sent as a key it opens nothing.
      for (const word of line.match(/weighhouse_[a-z2-7]{40}/g) ?? []) {
        expect(isApiKeyText(word)).toBe(false);
      }
    }
  }
  expect(rows).toBeGreaterThan(10);
  const [{ hash }] = (await admin`
    select hash from api_keys order by made_at desc limit 1`) as unknown as [{ hash: Buffer }];
  expect(hash).toEqual(createHash("sha256").update(text).digest());
  await expect(through(`weighhouse_${hash.toString("hex").slice(0, 40)}`)).rejects.toThrow();
  await admin.end();
});
