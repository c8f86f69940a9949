import { afterAll, beforeAll, beforeEach, describe, expect, it } from "vitest";
import { readEntries } from "./read-entries";
import { postMeasurements } from "./post-measurements";
import { previewMeasurements } from "./preview-measurements";
import { readCampaign } from "./read-campaign";
import { readStandings } from "./read-standings";
import { registerHypothesis } from "./register-hypothesis";
import { hypothesis, openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";

let house: TestDesk;
let lagoon: Lagoon;
let number = 0;
beforeAll(async () => {
  house = await openTestDesk();
});
afterAll(() => house.close());
beforeEach(async () => {
  number += 1;
  lagoon = await openLagoon(house, { key: `lagoon-${number}` });
  const { key, member, rival } = lagoon;
  await registerHypothesis(house.desk, member, { key, hypothesis: hypothesis("algae", 40) });
  await registerHypothesis(house.desk, rival, { key, hypothesis: hypothesis("minerals", 70) });
});

const drafts = (...rows: Record<string, unknown>[]) => ({ from: "drafts" as const, drafts: rows });
const csv = (...lines: string[]) => ({ from: "csv" as const, text: lines.join("\n") });
const post = (source: Parameters<typeof postMeasurements>[2]["source"], who = lagoon.member) =>
  postMeasurements(house.desk, who, { key: lagoon.key, source });
const preview = (
  source: Parameters<typeof previewMeasurements>[2]["source"],
  who = lagoon.member,
) => previewMeasurements(house.desk, who, { key: lagoon.key, source });
const size = async () => (await readCampaign(house.desk, null, { key: lagoon.key })).size;

describe("posting", () => {
  it("enters the measurements in one entry, under the poster's team", async () => {
    const before = await size();
    const posted = await post(drafts(reading("n1", 41), reading("n2", 43)));
    expect(posted.posted).toEqual(["n1", "n2"]);
    expect(posted.appended).toMatchObject({ from: before, to: before + 1 });
    const { document } = await readCampaign(house.desk, null, { key: lagoon.key });
    expect(document.measurements.map(({ id, team, unit }) => ({ id, team, unit }))).toEqual([
      { id: "n1", team: "algae", unit: "nW" },
      { id: "n2", team: "algae", unit: "nW" },
    ]);
  });

  it.each([
    ["U+0000", "read\u0000out"],
    ["half a surrogate pair", "read\ud800out"],
  ])("of a text that no entry can hold is refused at its field: %s", async (found, source) => {
    const before = await size();
    for (const id of ["n1", null]) {
      const rows = drafts(reading(id, 41, { source }));
      expect((await preview(rows)).rows).toMatchObject([
        { fate: "refused", problems: [{ column: "source", found }] },
      ]);
      await expect(post(rows)).rejects.toMatchObject({
        code: "invalid",
        problems: [{ pointer: "/source/drafts/0/source", found }],
      });
    }
    expect(await size()).toBe(before);
  });

  it("of more than an entry can hold is refused at its row", async () => {
    const extra = Object.fromEntries(
      Array.from({ length: 600 }, (_, i) => [`note-${i}`, "x".repeat(2000)]),
    );
    await expect(post(drafts(reading(null, 41, { extra })))).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/source/drafts/0", found: expect.stringMatching(/1048576/) }],
    });
  });

  it("twice changes nothing the second time", async () => {
    await post(drafts(reading("n1", 41)));
    const before = await size();
    const again = await post(drafts(reading("n1", 41)));
    expect(again).toMatchObject({ posted: [], alreadyThere: ["n1"], appended: null });
    expect(await size()).toBe(before);
  });

  it("a measurement without an id twice is there once", async () => {
    const first = await post(drafts(reading(null, 41)));
    expect(first.posted[0]).toMatch(/^pier:2026-02-03T22:00:00Z:[0-9a-f]{12}$/);
    expect(await post(drafts(reading(null, 41)))).toMatchObject({ alreadyThere: first.posted });
  });

  it("an id that is there with another content is a conflict that enters nothing", async () => {
    await post(drafts(reading("n1", 41)));
    const before = await size();
    await expect(post(drafts(reading("n2", 50), reading("n1", 42)))).rejects.toMatchObject({
      code: "conflict",
      problems: [{ found: "n1 with value 42", allowed: expect.stringContaining("value 41") }],
    });
    expect(await size()).toBe(before);
  });

  it("one refused row of a file enters nothing, and says its line and column", async () => {
    const before = await size();
    const file = csv(
      "id,measurand,facility,time,value,error",
      ...rows("ok-1,41", "bad,41x", "ok-2,40"),
    );
    await expect(post(file)).rejects.toMatchObject({
      code: "invalid",
      problems: [
        { pointer: "/source/text", found: expect.stringContaining("line 3, column value") },
      ],
    });
    expect(await size()).toBe(before);
  });

  it("a draft's fault points at its field", async () => {
    const bad = { ...reading("n2", 41), measurand: "half-moon" };
    await expect(post(drafts(reading("n1", 41), bad))).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/source/drafts/1/measurand" }],
    });
    await expect(post(drafts(reading("n1", 41, { sd: -1 })))).rejects.toMatchObject({
      problems: [{ pointer: "/source/drafts/0/sd" }],
    });
  });

  it("a reading with unequal uncertainties is entered, one with both kinds refused", async () => {
    const asymmetric = { ...reading("n1", 41), sd: undefined, plus: 2, minus: 1 };
    await expect(post(drafts({ ...asymmetric, sd: 2 }))).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: expect.stringContaining("/source/drafts/0") as string }],
    });
    expect((await post(drafts(asymmetric))).posted).toEqual(["n1"]);
  });

  it("a member doesn't post in another team's name; the coordinator may", async () => {
    const theirs = drafts(reading("n1", 41, { team: "algae" }));
    await expect(post(theirs, lagoon.rival)).rejects.toMatchObject({
      problems: [{ pointer: "/source/drafts/0/team" }],
    });
    expect((await post(theirs, lagoon.coordinator)).posted).toEqual(["n1"]);
  });

  it("2,500 measurements are a few entries of one transaction", async () => {
    const before = await size();
    const many = Array.from({ length: 2500 }, (_, i) => reading(`n${i}`, 40 + (i % 7)));
    const posted = await post(drafts(...many));
    expect(posted.posted).toHaveLength(2500);
    const { appended } = posted;
    expect(appended?.from).toBe(before);
    // 1,000 to an entry at most, and half a MiB.
    expect(appended!.to - before).toBeGreaterThanOrEqual(3);
    const { entries } = await readEntries(house.desk, null, { key: lagoon.key, from: before });
    expect(entries.reduce((sum, { about }) => sum + about.count, 0)).toBe(2500);
  });
});

/** Lines of the columns id and value, with the rest filled in. */
function rows(...pairs: string[]): string[] {
  return pairs.map((pair) => {
    const [id, value] = pair.split(",");
    return `${id},new-moon,pier,2026-02-03T22:00:00Z,${value},2`;
  });
}

describe("the preview", () => {
  const header = "id,measurand,facility,time,value,error";

  it("tells each row's fate: new, already there, in conflict, refused with its column", async () => {
    await post(csv(header, ...rows("a,41", "b,42")));
    const file = csv(header, ...rows("a,41", "b,43", "c,44", "d,x", "c,45"));
    const { rows: fates, counts, postable } = await preview(file);
    expect(fates.map(({ line, id, fate }) => ({ line, id, fate }))).toEqual([
      { line: 2, id: "a", fate: "alreadyThere" },
      { line: 3, id: "b", fate: "conflict" },
      { line: 4, id: "c", fate: "new" },
      { line: 5, id: null, fate: "refused" },
      { line: 6, id: "c", fate: "refused" },
    ]);
    expect(fates[1]?.conflict).toMatchObject({ field: "value", there: 42, posted: 43 });
    expect(fates[3]?.problems[0]?.column).toBe("value");
    expect(fates[4]?.problems[0]).toMatchObject({
      column: "id",
      found: "c, which line 4 has already",
    });
    expect(counts).toEqual({ new: 1, alreadyThere: 1, conflict: 1, refused: 2 });
    expect(postable).toBe(false);
  });

  it("says which verdicts would turn and which ranks move, and enters nothing", async () => {
    const before = await readEntries(house.desk, null, { key: lagoon.key });
    const seen = await preview(drafts(reading("n1", 70), reading("n2", 71)));
    expect(seen.postable).toBe(true);
    expect(seen.changes?.verdicts).toContainEqual({
      hypothesis: "minerals",
      measurand: "new-moon",
      before: "awaiting",
      after: "pass",
    });
    expect(seen.changes?.ranks).toContainEqual({ hypothesis: "minerals", before: 2, after: 1 });
    expect(await readEntries(house.desk, null, { key: lagoon.key })).toEqual(before);
  });

  it("foretells the standings that posting then gives", async () => {
    const source = drafts(reading("n1", 63), reading("n2", 66), reading("n3", 60));
    const { changes } = await preview(source);
    await post(source);
    const { standings } = await readStandings(house.desk, null, {
      key: lagoon.key,
      size: await size(),
    });
    expect({ ...standings, asOf: null }).toEqual(changes?.after);
  });

  it("a rule of the campaign that a row breaks is told at its column's own name", async () => {
    const { rows: fates } = await preview(csv(header, "a,new-moon,pier,2099-01-01T00:00:00Z,41,2"));
    expect(fates[0]).toMatchObject({ fate: "refused", problems: [{ column: "time" }] });
  });

  it.each([csv(header), drafts()])("nothing to post is refused as a whole: %j", async (source) => {
    expect((await preview(source)).problems).toMatchObject([{ found: "no row" }]);
    await expect(post(source)).rejects.toMatchObject({ code: "invalid" });
  });

  it("a text that is no table is refused as a whole", async () => {
    const seen = await preview(csv(""));
    expect(seen).toMatchObject({ rows: [], postable: false });
    expect(seen.problems).toHaveLength(1);
  });

  it.each(["unit left out, then given", "unit given, then left out"])(
    "and posting agree on a row that is there with its %s",
    async (which) => {
      const given = reading("n1", 41, { unit: "nW" });
      const left = reading("n1", 41);
      const [first, second] = which.startsWith("unit left") ? [left, given] : [given, left];
      await post(drafts(first));
      const { rows: fates } = await preview(drafts(second));
      const outcome = await post(drafts(second)).then(
        (posted) => (posted.alreadyThere.length > 0 ? "alreadyThere" : "new"),
        (error: { code: string }) => error.code,
      );
      expect(fates[0]?.fate).toBe(outcome);
    },
  );
});

it("a key that can't be one is not found, whatever the database would make of it", async () => {
  await expect(readCampaign(house.desk, null, { key: "a\u0000" })).rejects.toMatchObject({
    code: "not-found",
  });
});
