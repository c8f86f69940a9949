import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { addMember } from "./add-member";
import { addTeam } from "./add-team";
import { amendCampaign } from "./amend-campaign";
import { closeRegistration } from "./close-registration";
import { declareMeasurand, declareObservable } from "./declare";
import { listCampaigns } from "./list-campaigns";
import { listMembers } from "./list-members";
import { openCampaign } from "./open-campaign";
import { postMeasurements } from "./post-measurements";
import { readCampaign } from "./read-campaign";
import { registerHypothesis } from "./register-hypothesis";
import { hypothesis, openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

let house: TestDesk;
let lagoon: Lagoon;
beforeAll(async () => {
  house = await openTestDesk();
  lagoon = await openLagoon(house);
});
afterAll(() => house.close());

const sizeOf = async (key: string) => (await readCampaign(house.desk, null, { key })).size;

describe("opening a campaign", () => {
  it("makes the actor its coordinator, and a ledger of one entry", async () => {
    const opened = await openCampaign(house.desk, lagoon.stranger, {
      campaign: { key: "tide-pool", title: "Why the tide pool foams" },
    });
    expect(opened).toMatchObject({ key: "tide-pool", from: 0, to: 1 });
    const read = await readCampaign(house.desk, lagoon.stranger, { key: "tide-pool" });
    expect(read).toMatchObject({ role: "coordinator", clock: "real", visibility: "public" });
  });

  it("of a key that is taken is a conflict", async () => {
    const campaign = { key: lagoon.key, title: "Another" };
    const opening = openCampaign(house.desk, lagoon.stranger, { campaign });
    await expect(opening).rejects.toMatchObject({ code: "conflict" });
  });

  it("with faults in several fields says all of them at once", async () => {
    const campaign = { key: "No Key", title: "", rule: { pass: 2 } };
    const opening = openCampaign(house.desk, lagoon.stranger, { campaign });
    await expect(opening).rejects.toMatchObject({
      code: "invalid",
      problems: [
        { pointer: "/campaign/key" },
        { pointer: "/campaign/title" },
        { pointer: "/campaign/rule/pass" },
      ],
    });
  });

  it("of members is seen by its members alone", async () => {
    const { key, member, stranger } = await openLagoon(house, {
      key: "hidden-lagoon",
      visibility: "members",
    });
    const keysSeenBy = async (actor: Parameters<typeof listCampaigns>[1]) =>
      (await listCampaigns(house.desk, actor)).map((one) => one.key);
    expect(await keysSeenBy(member)).toContain(key);
    expect(await keysSeenBy(stranger)).not.toContain(key);
    expect(await keysSeenBy(null)).not.toContain(key);
  });
});

describe("declaring", () => {
  const measurand = (key: string, more: object = {}) => ({
    key,
    observable: "glow",
    reference: { family: "uniform" as const, lower: 0, upper: 10 },
    ...more,
  });

  it("a key that is taken is refused at its field, and nothing is entered", async () => {
    const { key, coordinator } = lagoon;
    const before = await sizeOf(key);
    const declaring = declareMeasurand(house.desk, coordinator, {
      key,
      measurand: measurand("new-moon"),
    });
    await expect(declaring).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/measurand/key", code: "duplicate" }],
    });
    expect(await sizeOf(key)).toBe(before);
  });

  it("what doesn't fit the campaign is refused at the input's field", async () => {
    const { key, coordinator } = lagoon;
    const declaring = declareMeasurand(house.desk, coordinator, {
      key,
      measurand: measurand("dim", { observable: "hue" }),
    });
    await expect(declaring).rejects.toMatchObject({
      problems: [{ pointer: "/measurand/observable", code: "unknown-key" }],
    });
  });

  it("a measurand whose reference is empty is refused at the reference", async () => {
    const { key, coordinator } = lagoon;
    const declaring = declareMeasurand(house.desk, coordinator, {
      key,
      measurand: measurand("dim", { reference: { family: "uniform", lower: 3, upper: 3 } }),
    });
    await expect(declaring).rejects.toMatchObject({
      problems: [{ pointer: expect.stringMatching(/^\/measurand\/reference/) }],
    });
  });

  it("two people at once both get their entry, each decided on what was there then", async () => {
    const { key, coordinator } = lagoon;
    const names = Array.from({ length: 6 }, (_, i) => `band-${i}`);
    const before = await sizeOf(key);
    await Promise.all(
      names.map((name) =>
        declareObservable(house.desk, coordinator, {
          key,
          observable: { key: name, title: name, unit: "nW", scale: "linear" },
        }),
      ),
    );
    expect(await sizeOf(key)).toBe(before + names.length);
  });

  it("of two people who declare one key at once, one is refused", async () => {
    const { key, coordinator } = lagoon;
    const observable = { key: "raced", title: "Raced", unit: "nW", scale: "linear" as const };
    const outcomes = await Promise.allSettled([
      declareObservable(house.desk, coordinator, { key, observable }),
      declareObservable(house.desk, coordinator, { key, observable }),
    ]);
    expect(outcomes.map(({ status }) => status).sort()).toEqual(["fulfilled", "rejected"]);
  });
});

describe("people", () => {
  it("an e-mail that has no account is refused by name", async () => {
    const { key, coordinator } = lagoon;
    const adding = addMember(house.desk, coordinator, {
      key,
      email: "nobody@people.example",
      role: "reader",
    });
    await expect(adding).rejects.toMatchObject({
      code: "not-found",
      message: expect.stringContaining("nobody@people.example"),
    });
  });

  it("a team must be there; a reader is of none", async () => {
    const { key, coordinator, stranger } = lagoon;
    const add = (role: "member" | "reader", team: string | null) =>
      addMember(house.desk, coordinator, { key, email: stranger.email, role, team });
    for (const adding of [() => add("member", "ghosts"), () => add("reader", "algae")]) {
      await expect(adding()).rejects.toMatchObject({ problems: [{ pointer: "/team" }] });
    }
  });

  it("a member of no team is an observer: posts, but registers nothing", async () => {
    const { key, coordinator } = lagoon;
    const observer = await house.person("Obi Observer");
    await addMember(house.desk, coordinator, { key, email: observer.email, role: "member" });
    const source = { from: "drafts" as const, drafts: [reading("by-observer", 41)] };
    const posted = await postMeasurements(house.desk, observer, { key, source });
    expect(posted.posted).toEqual(["by-observer"]);
    await expect(
      registerHypothesis(house.desk, observer, { key, hypothesis: hypothesis("mine", 1) }),
    ).rejects.toMatchObject({
      code: "not-allowed",
      message: expect.stringContaining("members of a team"),
    });
  });

  it("adding somebody again changes the place, and keeps the id that stands in entries", async () => {
    const { key, coordinator, rival } = lagoon;
    const before = (await listMembers(house.desk, coordinator, { key })).find(
      ({ email }) => email === rival.email,
    );
    await addTeam(house.desk, coordinator, { key, team: { key: "currents" } });
    const place = { key, email: rival.email, role: "member" as const, team: "currents" };
    const after = await addMember(house.desk, coordinator, place);
    expect(after).toMatchObject({ member: before?.member, team: "currents" });
    await addMember(house.desk, coordinator, { ...place, team: "minerals" });
  });

  it("the last coordinator stays one", async () => {
    const { key, coordinator } = lagoon;
    const leaving = addMember(house.desk, coordinator, {
      key,
      email: coordinator.email.toUpperCase(),
      role: "reader",
    });
    await expect(leaving).rejects.toMatchObject({ problems: [{ pointer: "/role" }] });
  });

  it("addresses are told to the coordinator alone", async () => {
    const { key, coordinator, member } = lagoon;
    const seenByMember = await listMembers(house.desk, member, { key });
    expect(seenByMember.map(({ email }) => email)).toEqual(seenByMember.map(() => null));
    const seenByCoordinator = await listMembers(house.desk, coordinator, { key });
    expect(seenByCoordinator.every(({ email }) => email !== null)).toBe(true);
  });
});

describe("amending a campaign", () => {
  it("changes its own fields, but never its key", async () => {
    const { key, coordinator } = lagoon;
    const campaign = { key, title: "Why the lagoon glows at night", visibility: "public" as const };
    await amendCampaign(house.desk, coordinator, { key, campaign });
    const { document } = await readCampaign(house.desk, null, { key });
    expect(document.campaign.title).toBe(campaign.title);
    const renaming = amendCampaign(house.desk, coordinator, {
      key,
      campaign: { ...campaign, key: "renamed" },
    });
    await expect(renaming).rejects.toMatchObject({ problems: [{ pointer: "/campaign/key" }] });
  });

  it("leaves the rule as it is once a measurement is there", async () => {
    const { key, coordinator, member } = await openLagoon(house, { key: "ruled-lagoon" });
    const campaign = { key, title: "Ruled", visibility: "public" as const };
    const stricter = { ...campaign, rule: { pass: 0.99 } };
    await amendCampaign(house.desk, coordinator, { key, campaign: stricter });
    await postMeasurements(house.desk, member, {
      key,
      source: { from: "drafts", drafts: [reading("n1", 41)] },
    });
    const loosening = amendCampaign(house.desk, coordinator, { key, campaign });
    await expect(loosening).rejects.toMatchObject({ problems: [{ pointer: "/campaign/rule" }] });
  });

  it("doesn't open registration again", async () => {
    const { key, coordinator } = await openLagoon(house, { key: "shut-lagoon" });
    await closeRegistration(house.desk, coordinator, { key });
    const campaign = { key, title: "Shut", visibility: "public" as const };
    const opening = amendCampaign(house.desk, coordinator, { key, campaign });
    await expect(opening).rejects.toMatchObject({
      problems: [{ pointer: "/campaign/registrationCloses" }],
    });
    await expect(closeRegistration(house.desk, coordinator, { key })).rejects.toMatchObject({
      code: "closed",
    });
  });
});
