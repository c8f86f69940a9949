import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { rebuildProjections } from "@weighhouse/store/rebuild";
import { amendHypothesis } from "./amend-hypothesis";
import { closeMeasurand } from "./close-measurand";
import { correctMeasurement } from "./correct-measurement";
import { amendMeasurand, declareDerived, declareMeasurand } from "./declare";
import { makeRemark } from "./make-remark";
import { objectToReference } from "./object-to-reference";
import { postMeasurements } from "./post-measurements";
import { proposeMeasurand } from "./propose-measurand";
import { readCampaign } from "./read-campaign";
import { readMeasurementHistory } from "./read-measurement-history";
import { readRemarks } from "./read-remarks";
import { readStandings } from "./read-standings";
import { registerHypothesis } from "./register-hypothesis";
import { retireHypothesis } from "./retire-hypothesis";
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
afterAll(async () => {
  await house.close();
});

let number = 0;
/** A lagoon with the algae's hypothesis and two of their readings. */
async function measuredLagoon(): Promise<Lagoon> {
  const lagoon = await openLagoon(house, { key: `lagoon-${(number += 1)}` });
  const { key, member } = lagoon;
  await registerHypothesis(house.desk, member, { key, hypothesis: hypothesis("algae", 40) });
  const drafts = [reading("night-1", 41), reading("night-2", 47, { observedAt: undefined })];
  await postMeasurements(house.desk, member, { key, source: { from: "drafts", drafts } });
  return lagoon;
}

async function document(lagoon: Lagoon, size?: number) {
  return (await readCampaign(house.desk, lagoon.reader, { key: lagoon.key, size })).document;
}

async function standings(lagoon: Lagoon) {
  const { size } = await readCampaign(house.desk, lagoon.reader, { key: lagoon.key });
  return (await readStandings(house.desk, lagoon.reader, { key: lagoon.key, size })).standings;
}

const measurand = (key: string, upper: number) => ({
  key,
  observable: "glow",
  window: { from: "2020-01-01T00:00:00Z", to: "2059-01-01T00:00:00Z" },
  reference: { family: "uniform" as const, lower: 0, upper },
});

describe("a correction", () => {
  it("moves the standings, and keeps what was there before", async () => {
    const lagoon = await measuredLagoon();
    const { key, member } = lagoon;
    const before = await standings(lagoon);
    await correctMeasurement(house.desk, member, {
      key,
      measurement: { ...reading("night-1", 44), id: "night-1" },
      reason: "the dark frame was not subtracted",
    });
    await setAsideMeasurement(house.desk, lagoon.coordinator, {
      key,
      id: "night-1",
      reason: "moonrise",
    });
    expect((await document(lagoon)).measurements[0]).toMatchObject({ value: 44, team: "algae" });
    expect(await standings(lagoon)).not.toEqual(before);
    // The table as it was posted, and the table put right, are both there already.
    for (const value of [41, 44]) {
      const source = { from: "drafts" as const, drafts: [reading("night-1", value)] };
      const posted = await postMeasurements(house.desk, member, { key, source });
      expect(posted).toMatchObject({ alreadyThere: ["night-1"], appended: null });
    }
    const history = await readMeasurementHistory(house.desk, null, { key, id: "night-1" });
    const values = history.map(({ kind, measurement }) => [kind, measurement.value]);
    expect(values).toEqual([
      ["measurements.posted", 41],
      ["measurement.corrected", 44],
      ["measurement.set-aside", 44],
    ]);
    expect(history.map(({ reason }) => reason)).toEqual([
      null,
      "the dark frame was not subtracted",
      "moonrise",
    ]);
    expect(history[1]).toMatchObject({ name: member.name, team: "algae", withdrawn: false });
    expect(await rebuildProjections(house.desk.store, key)).toMatchObject({ same: true });
  });

  it("is the own team's or the coordinator's, of what is there, and says something else", async () => {
    const lagoon = await measuredLagoon();
    const { key, member, rival, coordinator } = lagoon;
    const correct = (who: typeof member, measurement: Record<string, unknown>) =>
      correctMeasurement(house.desk, who, {
        key,
        measurement: measurement as ReturnType<typeof reading> & { id: string },
        reason: "r",
      });
    await expect(correct(rival, reading("night-1", 3))).rejects.toMatchObject({
      code: "not-allowed",
    });
    await expect(correct(member, reading("night-9", 3))).rejects.toMatchObject({
      code: "not-found",
    });
    await expect(correct(member, reading("night-1", 41))).rejects.toMatchObject({
      code: "conflict",
    });
    const bad = reading("night-1", 42, { unit: "kg" });
    await expect(correct(coordinator, bad)).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/measurement/unit", code: "wrong-dimension" }],
    });
    await correct(coordinator, reading("night-1", 42));
    expect((await document(lagoon)).measurements[0]!.value).toBe(42);
  });
});

describe("a withdrawal", () => {
  it("says beforehand what it takes and what it changes, and enters nothing by that", async () => {
    const lagoon = await measuredLagoon();
    const { key, member } = lagoon;
    const selection = { by: "facility", facility: "pier", from: "2026-01-01T00:00:00Z" } as const;
    const preview = await previewWithdrawal(house.desk, member, { key, selection });
    expect(preview.ids).toEqual(["night-1"]);
    expect(preview.changes!.after.measurements).toEqual({ counted: 1, setAside: 0 });
    expect((await document(lagoon)).measurements).toHaveLength(2);
    await withdrawMeasurements(house.desk, member, { key, selection, reason: "a torch" });
    expect((await document(lagoon)).measurements.map(({ id }) => id)).toEqual(["night-2"]);
  });

  it("leaves the standings as if nothing had been posted, and the ledger as it is", async () => {
    const lagoon = await measuredLagoon();
    const { key, member } = lagoon;
    const size = (await readCampaign(house.desk, null, { key })).size;
    const selection = { by: "ids" as const, ids: ["night-1", "night-2"] };
    await withdrawMeasurements(house.desk, member, { key, selection, reason: "another lagoon" });
    const { measurements, hypotheses } = await standings(lagoon);
    expect(measurements).toEqual({ counted: 0, setAside: 0 });
    expect(hypotheses[0]).toMatchObject({ compared: 0, chiSquare: null });
    expect((await document(lagoon, size)).measurements).toHaveLength(2);
    const history = await readMeasurementHistory(house.desk, null, { key, id: "night-1" });
    expect(history.at(-1)).toMatchObject({ withdrawn: true, reason: "another lagoon" });
    const again = { from: "drafts" as const, drafts: [reading("night-1", 41)] };
    const posted = await postMeasurements(house.desk, member, { key, source: again });
    expect(posted).toMatchObject({ posted: [], alreadyThere: ["night-1"] });
    expect(await rebuildProjections(house.desk.store, key)).toMatchObject({ same: true });
  });

  it("takes the own team's alone, and names each id that isn't there", async () => {
    const { key, member, rival } = await measuredLagoon();
    const withdraw = (who: typeof member, ids: string[]) =>
      withdrawMeasurements(house.desk, who, {
        key,
        selection: { by: "ids", ids },
        reason: "r",
      });
    await expect(withdraw(rival, ["night-1"])).rejects.toMatchObject({ code: "not-allowed" });
    await expect(withdraw(member, ["night-1", "night-8", "night-9"])).rejects.toMatchObject({
      code: "invalid",
      problems: [
        { pointer: "/selection/ids/1", found: "night-8" },
        { pointer: "/selection/ids/2", found: "night-9" },
      ],
    });
    await withdraw(member, ["night-1"]);
    await expect(withdraw(member, ["night-1"])).rejects.toMatchObject({ code: "invalid" });
  });
});

describe("a measurand", () => {
  it("is put right before its first measurement, and not after", async () => {
    const lagoon = await measuredLagoon();
    const { key, coordinator } = lagoon;
    const amend = (name: string, upper: number) =>
      amendMeasurand(house.desk, coordinator, { key, measurand: measurand(name, upper) });
    await amend("full-moon", 50);
    expect((await document(lagoon)).measurands[1]!.reference).toMatchObject({ upper: 50 });
    await expect(amend("new-moon", 50)).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/measurand/reference", code: "contradiction" }],
    });
    await expect(amend("no-moon", 50)).rejects.toMatchObject({ code: "not-found" });
  });

  it("that is closed keeps its measurements on record, not counted", async () => {
    const lagoon = await measuredLagoon();
    const { key, coordinator } = lagoon;
    await closeMeasurand(house.desk, coordinator, {
      key,
      measurand: "new-moon",
      reason: "two moons",
      replacedBy: "full-moon",
    });
    expect((await standings(lagoon)).measurements.counted).toBe(0);
    expect((await document(lagoon)).measurements).toHaveLength(2);
    await expect(
      closeMeasurand(house.desk, coordinator, { key, measurand: "new-moon", reason: "again" }),
    ).rejects.toMatchObject({ code: "invalid", problems: [{ code: "contradiction" }] });
  });

  it("of a derived value is computed from others", async () => {
    const lagoon = await measuredLagoon();
    await declareDerived(house.desk, lagoon.coordinator, {
      key: lagoon.key,
      derived: {
        key: "contrast",
        observable: "glow",
        expression: "a - b",
        from: { a: "new-moon", b: "full-moon" },
        reference: { family: "uniform", lower: -100, upper: 100 },
      },
    });
    expect((await document(lagoon)).derived).toMatchObject([{ key: "contrast", scored: false }]);
  });
});

describe("proposals, objections and remarks", () => {
  it("a team's proposal is declared or answered by the coordinator", async () => {
    const lagoon = await measuredLagoon();
    const { key, member, rival, coordinator } = lagoon;
    const propose = (name: string) =>
      proposeMeasurand(house.desk, member, {
        key,
        measurand: measurand(name, 90),
        reason: "it glows then too",
      });
    const first = await propose("dusk");
    const second = await propose("dawn");
    await expect(
      makeRemark(house.desk, rival, { key, on: second.from, kind: "answer", text: "No." }),
    ).rejects.toMatchObject({ code: "not-allowed" });
    await makeRemark(house.desk, coordinator, {
      key,
      on: second.from,
      kind: "answer",
      text: "Nobody is up then.",
    });
    await declareMeasurand(house.desk, coordinator, { key, measurand: measurand("dusk", 90) });
    const { proposals } = await readRemarks(house.desk, null, { key });
    expect(proposals).toMatchObject([
      { seq: first.from, team: "algae", state: "declared", answer: null },
      { seq: second.from, state: "answered", answer: { text: "Nobody is up then." } },
    ]);
    await expect(
      proposeMeasurand(house.desk, member, {
        key,
        measurand: { ...measurand("noon", 90), observable: "smell" },
        reason: "r",
      }),
    ).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/measurand/observable", code: "unknown-key" }],
    });
    await expect(
      proposeMeasurand(house.desk, coordinator, {
        key,
        measurand: measurand("noon", 90),
        reason: "r",
      }),
    ).rejects.toMatchObject({ code: "not-allowed" });
  });

  it("an objection to a reference stays open until it is answered", async () => {
    const lagoon = await measuredLagoon();
    const { key, rival, coordinator } = lagoon;
    const objection = { key, measurand: "full-moon", reason: "100 is far too much" };
    const { from } = await objectToReference(house.desk, rival, objection);
    const open = await readRemarks(house.desk, null, { key });
    expect(open.objections).toMatchObject([{ team: "minerals", answer: null }]);
    await makeRemark(house.desk, coordinator, {
      key,
      on: from,
      kind: "answer",
      text: "Put right.",
    });
    const answered = await readRemarks(house.desk, null, { key });
    expect(answered.objections[0]!.answer).toMatchObject({ text: "Put right." });
    const then = await readRemarks(house.desk, null, { key, size: from + 1 });
    expect(then.objections[0]!.answer).toBeNull();
  });

  it("a remark is on an entry that is there", async () => {
    const { key, rival } = await measuredLagoon();
    const { size } = await readCampaign(house.desk, rival, { key });
    const remark = (on: number) =>
      makeRemark(house.desk, rival, { key, on, kind: "question", text: "Which pier?" });
    await expect(remark(size)).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/on", code: "out-of-range" }],
    });
    await remark(size - 1);
    expect((await readRemarks(house.desk, rival, { key })).remarks).toMatchObject([
      { on: size - 1, kind: "question", team: "minerals" },
    ]);
  });
});

describe("a retired hypothesis", () => {
  it("stays with its standing, and says nothing new", async () => {
    const lagoon = await measuredLagoon();
    const { key, member, rival } = lagoon;
    const before = await standings(lagoon);
    const retire = (who: typeof member) =>
      retireHypothesis(house.desk, who, { key, hypothesis: "algae", reason: "too dim" });
    await expect(retire(rival)).rejects.toMatchObject({ code: "not-allowed" });
    await retire(member);
    const { asOf: _, ...after } = await standings(lagoon);
    expect(after).toEqual({ ...after, ...before, asOf: undefined });
    await expect(
      amendHypothesis(house.desk, member, { key, hypothesis: hypothesis("algae", 44) }),
    ).rejects.toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/hypothesis/key", found: "algae, which is retired" }],
    });
  });
});
