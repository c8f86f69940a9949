import { randomBytes } from "node:crypto";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { sealDigest } from "@weighhouse/ledger/seal";
import { connect } from "@weighhouse/store/open-store";
import { rebuildProjections } from "@weighhouse/store/rebuild";
import { sealKeyOf } from "@weighhouse/store/seal-key";
import { amendHypothesis } from "./amend-hypothesis";
import type { Desk } from "./desk";
import { keepDates } from "./keep-dates";
import { openCampaign } from "./open-campaign";
import { openSeal } from "./open-seal";
import { postMeasurements } from "./post-measurements";
import { readCampaign } from "./read-campaign";
import { readEntries } from "./read-entries";
import { readSeals } from "./read-seals";
import { readStandings } from "./read-standings";
import { registerHypothesis } from "./register-hypothesis";
import { sealMeasurement } from "./seal-measurement";
import { sealPrediction } from "./seal-prediction";
import { hypothesis, openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

let house: TestDesk;
let now = "2040-01-01T00:00:00.000000Z";
/** A desk whose campaigns have a simulated clock. */
let desk: Desk;
beforeAll(async () => {
  house = await openTestDesk();
  desk = { ...house.desk, clock: () => now };
});
afterAll(async () => {
  await house.close();
});

let number = 0;
async function lagoon(): Promise<Lagoon> {
  now = "2040-01-01T00:00:00.000000Z";
  const opened = await openLagoon({ ...house, desk }, { key: `lagoon-${(number += 1)}` });
  const { key, member, rival } = opened;
  await registerHypothesis(desk, member, { key, hypothesis: hypothesis("algae", 40) });
  await registerHypothesis(desk, rival, { key, hypothesis: hypothesis("minerals", 60) });
  return opened;
}

const until = "2040-03-01T00:00:00Z";
/** Numbers that stand nowhere else, so that they can be looked for. */
const prediction = {
  measurand: "full-moon",
  expected: 73.12894561,
  tolerance: { family: "normal" as const, sd: 3.59128734 },
};
const held = { keeping: "held" as const, prediction };

async function hypothesisOf({ key }: Lagoon, name: string, size?: number) {
  const { document } = await readCampaign(desk, null, { key, size });
  return document.hypotheses.find((one) => one.key === name)!;
}

async function standings({ key }: Lagoon) {
  const { size } = await readCampaign(desk, null, { key });
  return (await readStandings(desk, null, { key, size })).standings;
}

describe("a held prediction", () => {
  it("is nowhere in the database for who reads all of it", async () => {
    const { key, member } = await lagoon();
    await sealPrediction(desk, member, { key, hypothesis: "algae", until, seal: held });
    const sql = connect(house.adminUrl, 1);
    const tables = await sql<{ schema: string; name: string }[]>`
      select schemaname as schema, tablename as name from pg_tables
      where schemaname not in ('pg_catalog', 'information_schema')`;
    expect(tables.length).toBeGreaterThan(15);
    const secrets = ["73.12894561", "3.59128734"];
    const everywhere = [...secrets, ...secrets.map((text) => Buffer.from(text).toString("hex"))];
    let rows = 0;
    for (const { schema, name } of tables) {
      const [counted] = await sql<{ all: number; found: number }[]>`
        select count(*)::int as all,
          count(*) filter (where t::text ilike any(${everywhere.map((text) => `%${text}%`)}::text[]))::int
            as found
        from ${sql(`${schema}.${name}`)} t`;
      expect(counted!.found, name).toBe(0);
      rows += counted!.all;
    }
    expect(rows).toBeGreaterThan(50);
    // The same search finds what is no secret, also where it is bytes.
    const [open] = await sql<{ parts: number; seals: number }[]>`
      select (select count(*)::int from parts t where t::text like '%full-moon%') as parts,
        (select count(*)::int from held_seals) as seals`;
    expect(open!.parts).toBeGreaterThan(0);
    expect(open!.seals).toBe(1);
    await sql.end();
  });

  it("is shown to its team alone, its measurand to everyone", async () => {
    const opened = await lagoon();
    const { key, member, rival, coordinator } = opened;
    const { digest } = await sealPrediction(desk, member, {
      key,
      hypothesis: "algae",
      until,
      seal: held,
    });
    const [own] = (await readSeals(desk, member, { key })).seals;
    expect(own).toMatchObject({
      digest,
      state: "sealed",
      held: { content: { expected: 73.12894561 } },
    });
    for (const other of [rival, coordinator, null]) {
      const { seals } = await readSeals(desk, other, { key });
      expect(seals).toMatchObject([{ digest, measurand: "full-moon", held: null }]);
    }
    expect(await hypothesisOf(opened, "algae")).toMatchObject({ withheld: ["full-moon"] });
  });

  it("is withheld and silent while it is sealed, and opens by the clock as of its sealing", async () => {
    const opened = await lagoon();
    const { key, member, rival } = opened;
    now = "2040-01-02T00:00:00.000000Z";
    await sealPrediction(desk, member, { key, hypothesis: "algae", until, seal: held });
    now = "2040-02-01T00:00:00.000000Z";
    const seen = reading("bright-1", 71, {
      measurand: "full-moon",
      observedAt: "2040-01-20T00:00:00Z",
    });
    await postMeasurements(desk, rival, { key, source: { from: "drafts", drafts: [seen] } });
    const silent = (await standings(opened)).hypotheses.find((one) => one.key === "algae");
    expect(silent).toMatchObject({ compared: 0, silent: 1, verdicts: { withheld: 1, pass: 0 } });
    expect(await keepDates(desk, key)).toEqual([]);
    expect((await readSeals(desk, null, { key })).counts).toEqual([
      { hypothesis: "algae", sealed: 1, revealed: 0, never: 0 },
    ]);

    // The server was down for a fortnight.
    now = "2040-03-15T00:00:00.000000Z";
    expect(await keepDates(desk, key)).toEqual([]);
    const { predictions, withheld } = await hypothesisOf(opened, "algae");
    expect(withheld).toEqual([]);
    expect(predictions.at(-1)).toMatchObject({
      ...prediction,
      registeredAt: "2040-01-02T00:00:00.000000Z",
    });
    const after = await standings(opened);
    expect(after.hypotheses[0]).toMatchObject({ key: "algae", compared: 1, silent: 0 });
    expect(
      after.verdicts.find((row) => row.hypothesis === "algae" && row.measurand === "full-moon"),
    ).toMatchObject({
      verdict: "pass",
      order: "before-observation",
    });
    expect((await readSeals(desk, member, { key })).seals).toMatchObject([
      { state: "revealed", held: null },
    ]);
    const { entries } = await readEntries(desk, null, { key });
    expect(entries.at(-1)!.entry).toMatchObject({
      kind: "prediction.revealed",
      by: { system: true },
    });
    const [left] = await house.desk.store.sql<{ count: number }[]>`
      select count(*)::int as count from held_seals h join campaigns c on c.id = h.campaign_id
      where c.key = ${key}`;
    expect(left!.count).toBe(0);
    expect(await rebuildProjections(house.desk.store, key)).toMatchObject({ same: true });
    expect(await keepDates(desk, key)).toEqual([]);
  });

  it("that can't be opened as it is stays sealed, and says why", async () => {
    const opened = await lagoon();
    const { key, member } = opened;
    const content = hypothesis("algae", 40);
    const parameters = [{ key: "g0", prior: { family: "normal" as const, mean: 40, sd: 5 } }];
    await amendHypothesis(desk, member, { key, hypothesis: { ...content, parameters } });
    const seal = { ...held, prediction: { ...prediction, expected: "g0 * 2" } };
    await sealPrediction(desk, member, { key, hypothesis: "algae", until, seal });
    await amendHypothesis(desk, member, { key, hypothesis: content });
    now = "2040-03-02T00:00:00.000000Z";
    const undone = await keepDates(desk, key);
    expect(undone).toMatchObject([{ why: expect.stringContaining("g0") as string }]);
    await amendHypothesis(desk, member, { key, hypothesis: { ...content, parameters } });
    expect(await keepDates(desk, key)).toEqual([]);
    const { predictions } = await hypothesisOf(opened, "algae");
    // It counts from when the prior that it hangs on came back.
    expect(predictions.at(-1)!.registeredAt).toBe("2040-03-02T00:00:00.000000Z");
  });

  it("is refused at its field where it could not be opened", async () => {
    const { key, member } = await lagoon();
    const seal = (more: object, of = "algae") =>
      sealPrediction(desk, member, {
        key,
        hypothesis: of,
        until,
        seal: { ...held, prediction: { ...prediction, ...more } },
      });
    await expect(seal({ expected: "nobody" })).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/seal/prediction/expected", code: "bad-expression" }],
    });
    await expect(seal({ measurand: "new-moon" })).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/measurand", code: "contradiction" }],
    });
    await expect(seal({}, "minerals")).rejects.toMatchObject({ code: "not-allowed" });
    await expect(
      sealPrediction(desk, member, {
        key,
        hypothesis: "algae",
        until: "2039-01-01T00:00:00Z",
        seal: held,
      }),
    ).rejects.toMatchObject({ code: "invalid", problems: [{ pointer: "/until" }] });
  });

  it("needs the installation's key: without one only kept seals are made, with another none opens", async () => {
    const { key, member } = await lagoon();
    const without = { ...desk, store: { ...desk.store, sealKey: null } };
    const input = { key, hypothesis: "algae", until, seal: held };
    await expect(sealPrediction(without, member, input)).rejects.toMatchObject({
      code: "closed",
      message: expect.stringContaining("seals.key") as string,
    });
    await sealPrediction(desk, member, input);
    now = "2040-03-02T00:00:00.000000Z";
    const other = { ...desk, store: { ...desk.store, sealKey: sealKeyOf(randomBytes(32)) } };
    expect(await keepDates(other, key)).toMatchObject([
      { why: expect.stringContaining("doesn't open") },
    ]);
    expect(await keepDates(desk, key)).toEqual([]);
  });
});

describe("a kept prediction", () => {
  const nonce = randomBytes(32).toString("hex");

  async function keptBy(opened: Lagoon, team = "algae") {
    const { ledger } = await readCampaign(desk, null, { key: opened.key });
    const bound = { ledger, team, hypothesis: "algae", measurand: "full-moon" };
    const digest = sealDigest(nodeHasher, { ...bound, nonce, content: prediction });
    const seal = { keeping: "kept" as const, digest, measurand: "full-moon" };
    const input = { key: opened.key, hypothesis: "algae", until, seal };
    await sealPrediction(desk, opened.member, input);
    return { key: opened.key, digest, nonce, content: prediction };
  }

  it("is opened by its team with its file, and counts from its sealing", async () => {
    const opened = await lagoon();
    const file = await keptBy(opened);
    now = "2040-02-20T00:00:00.000000Z";
    await expect(openSeal(desk, opened.rival, file)).rejects.toMatchObject({
      code: "invalid",
      problems: [{ found: "an opening by team minerals" }],
    });
    const other = { ...file, content: { ...prediction, expected: 74 } };
    await expect(openSeal(desk, opened.member, other)).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/content", code: "contradiction" }],
    });
    await openSeal(desk, opened.member, file);
    expect((await hypothesisOf(opened, "algae")).predictions.at(-1)).toMatchObject({
      expected: 73.12894561,
      registeredAt: (await readSeals(desk, null, { key: file.key })).seals[0]!.at,
    });
    await expect(openSeal(desk, opened.member, file)).rejects.toMatchObject({ code: "invalid" });
  });

  it("that nobody opens in time is never revealed, withheld and silent for ever", async () => {
    const opened = await lagoon();
    const file = await keptBy(opened);
    now = "2040-03-01T00:00:01.000000Z";
    await expect(openSeal(desk, opened.member, file)).rejects.toMatchObject({
      code: "invalid",
      problems: [{ allowed: expect.stringContaining("until 2040-03-01") as string }],
    });
    expect(await keepDates(desk, opened.key)).toEqual([]);
    const { seals, counts } = await readSeals(desk, null, { key: opened.key });
    expect(seals).toMatchObject([{ state: "never" }]);
    expect(counts).toEqual([{ hypothesis: "algae", sealed: 0, revealed: 0, never: 1 }]);
    expect((await hypothesisOf(opened, "algae")).withheld).toEqual(["full-moon"]);
  });
});

describe("a sealed measurement", () => {
  const measurement = { ...reading("dark-1", 61.77123, { measurand: "full-moon" }), id: "dark-1" };

  it("is in no standings until the clock opens it", async () => {
    const opened = await lagoon();
    const { key, rival } = opened;
    await sealMeasurement(desk, rival, { key, until, seal: { keeping: "held", measurement } });
    expect((await standings(opened)).measurements.counted).toBe(0);
    now = "2040-03-01T00:00:00.000000Z";
    expect(await keepDates(desk, key)).toEqual([]);
    const { document } = await readCampaign(desk, null, { key });
    expect(document.measurements).toMatchObject([
      { id: "dark-1", team: "minerals", value: 61.77123 },
    ]);
    expect((await standings(opened)).measurements.counted).toBe(1);
  });

  it("keeps those who know it from predicting it meanwhile", async () => {
    const { key, rival } = await lagoon();
    await sealMeasurement(desk, rival, { key, until, seal: { keeping: "held", measurement } });
    const { predictions, ...rest } = hypothesis("minerals", 60);
    const knowing = { ...rest, predictions: [...predictions, prediction] };
    await expect(amendHypothesis(desk, rival, { key, hypothesis: knowing })).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/hypothesis/predictions/1" }],
    });
  });
});

describe("dates", () => {
  it("close registration and cite the standings by themselves, once", async () => {
    now = "2040-01-01T00:00:00.000000Z";
    const ann = await house.person("Ann Dates");
    await openCampaign(desk, ann, {
      campaign: {
        key: "dated",
        title: "Dated",
        registrationCloses: "2040-02-01T00:00:00Z",
        dataCloses: "2040-04-01T00:00:00Z",
      },
    });
    await keepDates(desk, "dated");
    expect((await readEntries(desk, null, { key: "dated" })).size).toBe(1);
    now = "2040-05-01T00:00:00.000000Z";
    expect(await keepDates(desk, "dated")).toEqual([]);
    expect(await keepDates(desk, "dated")).toEqual([]);
    const { entries } = await readEntries(desk, null, { key: "dated" });
    expect(entries.slice(1).map(({ entry }) => [entry.kind, entry.by])).toEqual([
      ["registration.closed", { system: true }],
      ["standings.cited", { system: true }],
    ]);
    const { document } = await readCampaign(desk, null, { key: "dated" });
    expect(document.campaign.registrationCloses).toBe("2040-02-01T00:00:00Z");
  });

  it("that had passed before the campaign was here cite nothing", async () => {
    const ann = await house.person("Ann Late");
    await openCampaign(desk, ann, {
      campaign: { key: "past", title: "Past", dataCloses: "2030-04-01T00:00:00Z" },
    });
    expect(await keepDates(desk, "past")).toEqual([]);
    expect((await readEntries(desk, null, { key: "past" })).size).toBe(1);
  });
});
