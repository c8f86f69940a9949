import { afterAll, beforeAll, expect, it } from "vitest";
import { readCampaignText } from "@weighhouse/campaign/read";
import { scoreCampaign } from "@weighhouse/engine/score";
import { importCampaign } from "./import-campaign";
import { listCampaigns } from "./list-campaigns";
import type { Actor } from "./desk";
import { previewImport } from "./preview-import";
import { readCampaign } from "./read-campaign";
import { readEntries } from "./read-entries";
import { readEntry } from "./read-entry";
import { readStandings } from "./read-standings";
import { eclipseExpected, eclipseText } from "./testing/eclipse";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

let house: TestDesk;
let actor: NonNullable<Actor>;
beforeAll(async () => {
  house = await openTestDesk();
  actor = await house.person("Ina Importer");
});
afterAll(() => house.close());

const preview = (document: object | string, key?: string) =>
  previewImport(house.desk, actor, { text: asText(document), key });
const importIt = (document: object | string, key?: string) =>
  importCampaign(house.desk, actor, { text: asText(document), key });
const asText = (document: object | string) =>
  typeof document === "string" ? document : JSON.stringify(document);

// An invented campaign with dates of its own: why a spring tastes of iron.
const spring = {
  format: "weighhouse-campaign/1",
  campaign: {
    key: "iron-spring",
    title: "Why the spring tastes of iron",
    registrationCloses: "2021-03-01T00:00:00Z",
  },
  observables: [{ key: "iron", title: "Iron", unit: "mg/L", scale: "linear" }],
  measurands: [
    { key: "dry", observable: "iron", reference: { family: "uniform", lower: 0, upper: 20 } },
    { key: "wet", observable: "iron", reference: { family: "uniform", lower: 0, upper: 20 } },
  ],
  teams: [{ key: "rocks" }],
  facilities: [{ key: "well-house" }],
  hypotheses: [
    {
      key: "red-clay",
      title: "Red clay",
      team: "rocks",
      registeredAt: "2021-02-01T00:00:00Z",
      predictions: [
        { measurand: "dry", expected: 6, tolerance: { family: "normal", sd: 1 } },
        {
          measurand: "wet",
          expected: 3,
          tolerance: { family: "normal", sd: 1 },
          registeredAt: "2021-05-01T00:00:00Z",
        },
      ],
    },
    {
      key: "old-pipes",
      title: "Old pipes",
      registeredAt: "2021-06-01T00:00:00Z",
      predictions: [{ measurand: "dry", expected: 9, tolerance: { family: "normal", sd: 1 } }],
    },
  ],
  measurements: [
    reading("dry-1", "dry", 6.5),
    { ...reading("dry-2", "dry", 30), setAside: { reason: "bottle was rusty" } },
    reading("wet-1", "wet", 3.2),
  ],
  correlations: [],
};

function reading(id: string, measurand: string, value: number) {
  const observedAt = "2021-04-01T08:00:00Z";
  const postedAt = "2021-04-02T08:00:00Z";
  return { id, measurand, facility: "well-house", observedAt, postedAt, value, sd: 0.5 };
}

it("the published campaign imports, and scores as in its file", async () => {
  const imported = await importIt(eclipseText);
  const { standings } = await readStandings(house.desk, null, {
    key: "eclipse-1919",
    size: imported.to,
  });
  for (const [name, expected] of Object.entries(eclipseExpected.hypotheses)) {
    const found = standings.hypotheses.find(({ key }) => key === name)!;
    // The same closed forms on the same numbers: 1e-9 relative is the design's accuracy for them.
    expect(Math.abs(found.lnEvidence! / expected.lnEvidence - 1)).toBeLessThan(1e-9);
  }
  const list = await listCampaigns(house.desk, actor);
  expect(list.find(({ key }) => key === "eclipse-1919")).toMatchObject({ role: "coordinator" });
});

it("an import is one transaction: declarations, hypotheses, registration's close, measurements", async () => {
  const imported = await importIt(spring);
  const { entries } = await readEntries(house.desk, null, { key: "iron-spring" });
  expect(entries.map(({ entry }) => entry.kind)).toEqual([
    "campaign.opened",
    "observable.declared",
    "measurand.declared",
    "measurand.declared",
    "facility.declared",
    "team.joined",
    "hypothesis.registered",
    "hypothesis.registered",
    "registration.closed",
    "measurements.posted",
  ]);
  expect(imported).toMatchObject({ from: 0, to: entries.length });
  const { head } = await readEntry(house.desk, null, { key: "iron-spring", seq: 0 });
  expect(head.size).toBe(entries.length);
});

it("the document's own dates are kept as claimed and count for nothing", async () => {
  const { document } = await readCampaign(house.desk, null, { key: "iron-spring" });
  const times = [
    document.campaign.registrationCloses,
    ...document.hypotheses.map(({ registeredAt }) => registeredAt),
    ...document.measurements.map(({ postedAt }) => postedAt),
  ];
  expect(times.every((time) => time !== null && time > "2025")).toBe(true);
  const claimedIn = async (seq: number) =>
    JSON.parse((await readEntry(house.desk, null, { key: "iron-spring", seq })).payload);
  expect((await claimedIn(6)).claimed).toEqual({
    registeredAt: "2021-02-01T00:00:00Z",
    predictions: { wet: "2021-05-01T00:00:00Z" },
  });
  expect((await claimedIn(9)).measurements[0].claimed).toEqual({
    postedAt: "2021-04-02T08:00:00Z",
  });
});

it("nothing but dates is lost: the imported document holds what the file holds", async () => {
  const { document } = await readCampaign(house.desk, null, { key: "iron-spring" });
  const read = readCampaignText(asText(spring));
  if (!read.ok) throw new Error("the test's own document doesn't read");
  expect(withoutDates(document)).toEqual(withoutDates(read.value));
});

it("the preview lists each prediction whose order changes, and enters nothing", async () => {
  const { plan, problems } = await preview(spring, "iron-spring-2");
  expect(problems).toEqual([]);
  expect(plan).toMatchObject({
    key: "iron-spring-2",
    taken: false,
    registrationClosed: "2021-03-01T00:00:00Z",
    counts: { entries: 10, hypotheses: 2, predictions: 3, measurements: 3 },
  });
  const here = "before-posting";
  expect(plan?.orders).toEqual([
    { hypothesis: "red-clay", measurand: "dry", claimed: "before-observation", here },
    { hypothesis: "red-clay", measurand: "wet", claimed: "after", here },
    { hypothesis: "old-pipes", measurand: "dry", claimed: "after", here },
  ]);
  await expect(readCampaign(house.desk, actor, { key: "iron-spring-2" })).rejects.toMatchObject({
    code: "not-found",
  });
});

it("the preview foretells the standings that the import then gives", async () => {
  const { plan } = await preview(spring, "iron-spring-3");
  const { to } = await importIt(spring, "iron-spring-3");
  const { standings } = await readStandings(house.desk, null, { key: "iron-spring-3", size: to });
  expect({ ...standings, asOf: null }).toEqual(plan?.standings.here);
  const claimed = readCampaignText(
    asText({ ...spring, campaign: { ...spring.campaign, key: "iron-spring-3" } }),
  );
  const scored = claimed.ok ? scoreCampaign(claimed.value) : claimed;
  expect(scored).toEqual({ ok: true, value: plan?.standings.claimed });
});

it("a key that is taken is said in the preview, and a conflict when imported", async () => {
  expect((await preview(spring)).plan).toMatchObject({ key: "iron-spring", taken: true });
  await expect(importIt(spring)).rejects.toMatchObject({ code: "conflict" });
});

it("every fault of a document is told by its pointer, and nothing is made of it", async () => {
  const broken = {
    ...spring,
    campaign: { ...spring.campaign, key: "broken-spring" },
    measurands: [{ ...spring.measurands[0], observable: "lead" }, spring.measurands[1]],
    measurements: [{ ...reading("dry-1", "dry", 6.5), sd: -1 }],
  };
  const { problems, plan } = await preview(broken);
  expect(plan).toBeNull();
  const pointers = problems.map(({ pointer }) => pointer);
  expect(pointers).toContain("/measurands/0/observable");
  expect(pointers).toContain("/measurements/0/sd");
  await expect(importIt(broken)).rejects.toMatchObject({ code: "invalid", problems });
  expect((await preview("{ not JSON")).problems[0]).toMatchObject({ code: "syntax" });
});

it("a text that no entry can hold is told by its pointer", async () => {
  const campaign = { ...spring.campaign, key: "nul-spring", title: "Iron\u0000" };
  expect((await preview({ ...spring, campaign })).problems).toMatchObject([
    { pointer: "/campaign/title", found: "U+0000" },
  ]);
  await expect(importIt({ ...spring, campaign })).rejects.toMatchObject({ code: "invalid" });
});

it("what the engine can't score is refused by name", async () => {
  const measurands = spring.measurands.map((one) => ({ ...one, scatter: 1e200 }));
  const { problems } = await preview({ ...spring, measurands }, "boundless-spring");
  expect(problems).toContainEqual(
    expect.objectContaining({ pointer: "/measurands/0/scatter", code: "out-of-range" }),
  );
});

function withoutDates(document: unknown): unknown {
  const dates = ["registeredAt", "postedAt", "firstPostedAt", "registrationCloses"];
  return JSON.parse(
    JSON.stringify(document, (name, value: unknown) => (dates.includes(name) ? null : value)),
  );
}
