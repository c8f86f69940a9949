import { afterAll, beforeAll, describe, expect, it } from "vitest";
import type { Standings } from "@weighhouse/campaign/standings";
import { appendEntries } from "./append";
import { findCampaign, listCampaigns } from "./campaigns";
import { addMember, findMembership, listMembers } from "./members";
import { openCampaign } from "./open-campaign";
import type { Store } from "./open-store";
import { postMeasurements } from "./post-measurements";
import { user } from "./schema/tables";
import { saveStandings } from "./standings";
import { declarations, hum, opening, openTestStore, system } from "./testing/sample-campaign";
import { createTestDatabase } from "./testing/test-database";
import type { TestDatabase } from "./testing/test-database";

const engine = "9.9.9";
let database: TestDatabase;
let store: Store;

beforeAll(async () => {
  database = await createTestDatabase();
  store = await openTestStore(database.url);
  await store.db.insert(user).values([
    { id: "user-1", name: "Ilse Brandt", email: "ilse@example.org" },
    { id: "user-2", name: "Tomas Reyl", email: "tomas@example.org" },
  ]);
  await openCampaign(store, {
    coordinator: "user-1",
    campaign: opening("hum"),
    entries: declarations,
  });
  await openCampaign(store, {
    coordinator: "user-1",
    campaign: { ...opening("quiet"), title: "Why the other doesn't", visibility: "members" },
  });
});
afterAll(async () => {
  await store.close();
  await database.drop();
});

const keysFor = async (userId: string | null) =>
  (await listCampaigns(store, { userId, engine })).map(({ key }) => key).sort();

describe("the list of campaigns", () => {
  it("holds public ones, and a closed one for its members alone", async () => {
    expect(await keysFor(null)).toEqual(["hum"]);
    expect(await keysFor("user-2")).toEqual(["hum"]);
    expect(await keysFor("user-1")).toEqual(["hum", "quiet"]);
  });

  it("follows an amendment of who may read", async () => {
    const amend = (visibility: string) =>
      appendEntries(store, {
        campaign: "quiet",
        by: system,
        entries: [{ kind: "campaign.amended", payload: { ...opening("quiet"), visibility } }],
      });
    await amend("public");
    expect(await keysFor(null)).toEqual(["hum", "quiet"]);
    await amend("members");
    expect(await keysFor(null)).toEqual(["hum"]);
  });

  it("tells counts, the last measurement, and who leads by how much", async () => {
    const before = await listCampaigns(store, { userId: null, engine });
    expect(before[0]).toMatchObject({
      title: "Why the dune hums",
      teams: 1,
      hypotheses: 1,
      measurements: 0,
      registrationCloses: "2044-05-01T00:00:00Z",
      lastMeasurementAt: null,
      leader: null,
    });
    const { appended } = await postMeasurements(store, {
      campaign: "hum",
      by: system,
      measurements: [hum("a", 96)],
    });
    const size = appended?.to ?? 0;
    const ranked = (key: string, log10BayesFactor: number, posterior: number) =>
      ({ key, log10BayesFactor, posterior }) as Standings["hypotheses"][number];
    const standings = {
      measurements: { counted: 1, setAside: 0 },
      hypotheses: [ranked("resonant-layer", 0, 0.9), ranked("noneOfThese", -0.95, 0.1)],
    } as Standings;
    await saveStandings(store, { campaign: "hum", size, engine, standings });
    const [after] = await listCampaigns(store, { userId: null, engine });
    expect(after).toMatchObject({
      measurements: 1,
      lastMeasurementAt: appended?.at[0],
      leader: {
        hypothesis: "resonant-layer",
        title: "A dry layer resonates",
        posterior: 0.9,
        log10Lead: 0.95,
        runnerUp: "noneOfThese",
        size,
      },
    });
  });

  it("knows no campaign that isn't there", async () => {
    await expect(findCampaign(store, "nowhere")).rejects.toMatchObject({
      code: "no-such-campaign",
    });
  });
});

describe("members", () => {
  it("are added by e-mail and keep their opaque id when their role changes", async () => {
    const input = { campaign: "hum", email: " Tomas@Example.org ", team: "grain-size" };
    const added = await addMember(store, { ...input, role: "member" });
    expect(added).toMatchObject({ name: "Tomas Reyl", role: "member", team: "grain-size" });
    expect(added.member).not.toContain("user-2");
    const changed = await addMember(store, { ...input, role: "reader", team: null });
    expect(changed).toMatchObject({ member: added.member, role: "reader", team: null });
    const members = await listMembers(store, "hum");
    expect(members.map(({ name, role }) => `${name} ${role}`)).toEqual([
      "Ilse Brandt coordinator",
      "Tomas Reyl reader",
    ]);
    expect(await findMembership(store, { campaign: "quiet", userId: "user-2" })).toBeNull();
  });

  it("must have an account", async () => {
    const nobody = { campaign: "hum", email: "nobody@example.org", role: "member", team: null };
    await expect(addMember(store, { ...nobody, role: "member" })).rejects.toMatchObject({
      code: "no-such-member",
    });
  });

  it("can be forgotten without touching the ledger", async () => {
    await store.sql`delete from "user" where id = 'user-2'`;
    const members = await listMembers(store, "hum");
    expect(members[1]).toMatchObject({ userId: null, email: null, name: "(no longer known)" });
  });
});
