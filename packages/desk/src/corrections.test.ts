import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { rebuildProjections } from "@weighhouse/store/rebuild";
import { addMember } from "./add-member";
import { correctMeasurements, previewCorrections } from "./correct-measurements";
import type { Actor } from "./desk";
import { postMeasurements } from "./post-measurements";
import { readCampaign } from "./read-campaign";
import { readEntries } from "./read-entries";
import { readStandings } from "./read-standings";
import { registerHypothesis } from "./register-hypothesis";
import { setAsideMeasurement } from "./set-aside-measurement";
import { hypothesis, openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";
import { previewWithdrawal, withdrawMeasurements } from "./withdraw-measurements";

let house: TestDesk;
beforeAll(async () => {
  house = await openTestDesk();
});
afterAll(() => house.close());

const reason = "reduced anew";
const corrected = (id: string, value: number, more: Record<string, unknown> = {}) => ({
  measurement: { ...reading(id, value, more), id },
  reason,
});

async function measuredLagoon(key: string, by: (lagoon: Lagoon) => Actor): Promise<Lagoon> {
  const lagoon = await openLagoon(house, { key });
  await registerHypothesis(house.desk, lagoon.member, { key, hypothesis: hypothesis("algae", 40) });
  const drafts = [reading("a", 41), reading("b", 44), reading("c", 39)];
  await postMeasurements(house.desk, by(lagoon), { key, source: { from: "drafts", drafts } });
  return lagoon;
}

async function values({ key, reader }: Lagoon) {
  const { document } = await readCampaign(house.desk, reader, { key });
  return document.measurements.map(({ id, value }) => [id, value]);
}

async function chiSquare({ key, reader }: Lagoon) {
  const { size } = await readCampaign(house.desk, reader, { key });
  const { standings } = await readStandings(house.desk, reader, { key, size });
  return standings.hypotheses[0]!.chiSquare;
}

describe("corrections", () => {
  it("are entered all at once, and what is so already makes no entry", async () => {
    const lagoon = await measuredLagoon("all-at-once", ({ member }) => member);
    const { key, member } = lagoon;
    const corrections = [corrected("a", 43), corrected("b", 44), corrected("c", 38)];
    const before = await chiSquare(lagoon);
    const preview = await previewCorrections(house.desk, member, { key, corrections });
    expect(preview.corrections).toEqual([
      { id: "a", fields: [{ field: "value", before: 41, after: 43 }] },
      { id: "b", fields: [] },
      { id: "c", fields: [{ field: "value", before: 39, after: 38 }] },
    ]);
    expect(await chiSquare(lagoon)).toBe(before);
    const done = await correctMeasurements(house.desk, member, { key, corrections });
    expect(done).toMatchObject({ corrected: ["a", "c"], unchanged: ["b"] });
    expect(done.appended!.to - done.appended!.from).toBe(2);
    expect(await values(lagoon)).toEqual([
      ["a", 43],
      ["b", 44],
      ["c", 38],
    ]);
    expect(preview.changes!.after.hypotheses[0]!.chiSquare).toBeCloseTo(
      (await chiSquare(lagoon))!,
      12,
    );
    const again = await correctMeasurements(house.desk, member, { key, corrections });
    expect(again).toMatchObject({ corrected: [], unchanged: ["a", "b", "c"], appended: null });
    expect(await rebuildProjections(house.desk.store, key)).toMatchObject({ same: true });
  });

  it("are refused as one where one can't be, each fault at its place", async () => {
    const lagoon = await measuredLagoon("as-one", ({ member }) => member);
    const { key, member, rival } = lagoon;
    const correct = (who: Actor, corrections: ReturnType<typeof corrected>[]) =>
      correctMeasurements(house.desk, who, { key, corrections });
    const before = await values(lagoon);
    await expect(
      correct(member, [corrected("a", 43), corrected("d", 1), corrected("a", 42)]),
    ).rejects.toMatchObject({
      code: "invalid",
      problems: [
        { pointer: "/corrections/1/measurement/id", code: "unknown-key", found: "d" },
        { pointer: "/corrections/2/measurement/id", code: "duplicate" },
      ],
    });
    await expect(
      correct(member, [corrected("a", 43), corrected("b", 44, { unit: "kg" })]),
    ).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/corrections/1/measurement/unit", code: "wrong-dimension" }],
    });
    await expect(correct(rival, [corrected("a", 43)])).rejects.toMatchObject({
      code: "not-allowed",
    });
    expect(await values(lagoon)).toEqual(before);
  });

  it("keep what they leave out, where that is asked for, but nothing of the old result", async () => {
    const lagoon = await measuredLagoon("kept", ({ member }) => member);
    const { key, member } = lagoon;
    const correct = (measurement: Record<string, unknown>, leftOut?: "kept") =>
      correctMeasurements(house.desk, member, {
        key,
        leftOut,
        corrections: [{ measurement: { id: "a", ...measurement }, reason }],
      });
    await correct({ batch: "night-4", extra: { filter: "B" } }, "kept");
    await correct({ value: 43, plus: 2, minus: 1 }, "kept");
    const read = async () => {
      const { document } = await readCampaign(house.desk, member, { key });
      return document.measurements[0]!;
    };
    expect(await read()).toMatchObject({
      ...reading("a", 43, { sd: null, plus: 2, minus: 1 }),
      batch: "night-4",
      extra: { filter: "B" },
    });
    await correct(reading("a", 43));
    expect(await read()).toMatchObject({ batch: null, extra: {}, sd: 2, plus: null });
    await expect(correct({ value: 43 })).rejects.toMatchObject({
      problems: [{ pointer: "/corrections/0/measurement/measurand", code: "missing" }],
    });
  });

  it("see that a unit was wrong, also where the right one is the observable's own", async () => {
    const lagoon = await measuredLagoon("units", ({ member }) => member);
    const { key, member } = lagoon;
    const wrong = [corrected("a", 41, { unit: "pW" })];
    const inOther = await correctMeasurements(house.desk, member, { key, corrections: wrong });
    expect(inOther.corrected).toEqual(["a"]);
    const right = [corrected("a", 41, { unit: undefined })];
    const done = await correctMeasurements(house.desk, member, { key, corrections: right });
    expect(done.corrected).toEqual(["a"]);
  });
});

it("the ledger's list names what each entry is about", async () => {
  const lagoon = await measuredLagoon("named", ({ member }) => member);
  const { key, member } = lagoon;
  await correctMeasurements(house.desk, member, { key, corrections: [corrected("a", 43)] });
  const selection = { by: "ids" as const, ids: ["b", "c"] };
  await withdrawMeasurements(house.desk, member, { key, selection, reason });
  const { entries } = await readEntries(house.desk, lagoon.reader, { key });
  const about = new Map(entries.map((one) => [one.entry.kind, one.about]));
  expect(about.get("measurements.posted")).toEqual({ keys: ["a", "b", "c"], count: 3 });
  expect(about.get("measurement.corrected")).toEqual({ keys: ["a"], count: 1 });
  expect(about.get("measurements.withdrawn")).toEqual({ keys: ["b", "c"], count: 2 });
});

it("a table that names the observable's own unit is the same as one that names none", async () => {
  const lagoon = await measuredLagoon("own-unit", ({ member }) => member);
  const { key, member } = lagoon;
  const drafts = [reading("a", 41, { unit: "nW" }), reading("new", 40, { unit: "nW" })];
  const source = { from: "drafts" as const, drafts };
  const posted = await postMeasurements(house.desk, member, { key, source });
  expect(posted).toMatchObject({ posted: ["new"], alreadyThere: ["a"] });
});

describe("an observer, a member of no team", () => {
  it("corrects, sets aside and withdraws what they posted, and nothing of others", async () => {
    const key = "observed";
    const lagoon = await openLagoon(house, { key });
    const [observer, other] = await Promise.all(
      ["observer", "other"].map(async (name) => {
        const person = await house.person(name);
        const { email } = person;
        await addMember(house.desk, lagoon.coordinator, { key, email, role: "member", team: null });
        return person;
      }),
    );
    const post = (who: Actor, id: string) =>
      postMeasurements(house.desk, who, {
        key,
        source: { from: "drafts", drafts: [reading(id, 40, { team: undefined })] },
      });
    await post(observer!, "a");
    await post(observer!, "b");
    await post(observer!, "c");
    await post(lagoon.member, "d");
    const withdraw = (who: Actor, ids: string[]) =>
      withdrawMeasurements(house.desk, who, { key, selection: { by: "ids", ids }, reason });
    const correct = (who: Actor, id: string) =>
      correctMeasurements(house.desk, who, { key, corrections: [corrected(id, 42)] });
    const setAside = (who: Actor, id: string) =>
      setAsideMeasurement(house.desk, who, { key, id, reason });
    for (const who of [other!, lagoon.member]) {
      await expect(correct(who, "a")).rejects.toMatchObject({ code: "not-allowed" });
      await expect(setAside(who, "b")).rejects.toMatchObject({ code: "not-allowed" });
      await expect(withdraw(who, ["c"])).rejects.toMatchObject({ code: "not-allowed" });
    }
    await expect(withdraw(observer!, ["c", "d"])).rejects.toMatchObject({ code: "not-allowed" });
    await correct(observer!, "a");
    // A correction doesn't hand it on to another: it is still the observer's.
    await correctMeasurements(house.desk, lagoon.coordinator, {
      key,
      corrections: [corrected("a", 41)],
    });
    await correct(observer!, "a");
    await setAside(observer!, "b");
    await withdraw(observer!, ["c"]);
    const { document } = await readCampaign(house.desk, lagoon.reader, { key });
    expect(document.measurements.map(({ id }) => id)).toEqual(["a", "b", "d"]);
  });
});

describe("a withdrawal of a range", () => {
  it("takes what was observed in it, of whatever facility, its ends included", async () => {
    const lagoon = await openLagoon(house, { key: "ranges" });
    const { key, member } = lagoon;
    const drafts = [1, 2, 3, 4].map((day) =>
      reading(`day-${day}`, 40, { observedAt: `2026-05-0${day}T00:00:00Z` }),
    );
    await postMeasurements(house.desk, member, { key, source: { from: "drafts", drafts } });
    const range = {
      by: "range" as const,
      from: "2026-05-02T00:00:00Z",
      to: "2026-05-03T00:00:00Z",
    };
    const preview = await previewWithdrawal(house.desk, member, { key, selection: range });
    expect(preview.ids).toEqual(["day-2", "day-3"]);
    await withdrawMeasurements(house.desk, member, { key, selection: range, reason });
    const { document } = await readCampaign(house.desk, lagoon.reader, { key });
    expect(document.measurements.map(({ id }) => id)).toEqual(["day-1", "day-4"]);
    await expect(
      previewWithdrawal(house.desk, member, { key, selection: range }),
    ).rejects.toMatchObject({ problems: [{ pointer: "/selection", found: "no measurement" }] });
  });
});
