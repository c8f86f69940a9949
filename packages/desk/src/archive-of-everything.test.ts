import { afterAll, beforeAll, expect, it } from "vitest";
import { verifyArchive } from "@weighhouse/audit/verify";
import { scoreCampaign } from "@weighhouse/engine/score";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { amendHypothesis } from "./amend-hypothesis";
import { citeStandings } from "./cite-standings";
import { correctMeasurement } from "./correct-measurement";
import type { Desk } from "./desk";
import { exportAuditTrail } from "./export-audit-trail";
import { keepDates } from "./keep-dates";
import { makeRemark } from "./make-remark";
import { objectToReference } from "./object-to-reference";
import { postMeasurements } from "./post-measurements";
import { readCitation } from "./read-citation";
import { readCitations } from "./read-citations";
import { registerHypothesis } from "./register-hypothesis";
import { retireHypothesis } from "./retire-hypothesis";
import { sealMeasurement } from "./seal-measurement";
import { sealPrediction } from "./seal-prediction";
import { hypothesis, openLagoon, reading } from "./testing/lagoon";
import type { Lagoon } from "./testing/lagoon";
import { openTestDesk } from "./testing/test-desk";
import type { TestDesk } from "./testing/test-desk";
import { withdrawMeasurements } from "./withdraw-measurements";

let house: TestDesk;
let now = "2040-01-01T00:00:00.000000Z";
let desk: Desk;
let lagoon: Lagoon;
let code = "";

const until = "2040-02-01T00:00:00Z";
const prediction = (measurand: string, expected: number) => ({
  measurand,
  expected,
  tolerance: { family: "normal" as const, sd: 4 },
});

// A campaign in which everything that can be done to a record is done.
beforeAll(async () => {
  house = await openTestDesk();
  desk = { ...house.desk, clock: () => now };
  lagoon = await openLagoon({ ...house, desk });
  const { key, member, rival, coordinator } = lagoon;
  await registerHypothesis(desk, member, { key, hypothesis: hypothesis("algae", 40) });
  await registerHypothesis(desk, rival, { key, hypothesis: hypothesis("minerals", 60) });
  const full = prediction("full-moon", 70);
  await objectToReference(desk, rival, { key, measurand: "full-moon", reason: "too wide" });
  const seal = { keeping: "held" as const, prediction: full };
  await sealPrediction(desk, member, { key, hypothesis: "algae", until, seal });
  now = "2040-01-10T00:00:00.000000Z";
  const drafts = [reading("n1", 41), reading("n2", 44), reading("n3", 71)];
  await postMeasurements(desk, rival, { key, source: { from: "drafts", drafts } });
  // Filed when the third reading was on record, though as one of the new moon.
  now = "2040-01-12T00:00:00.000000Z";
  const late = { ...hypothesis("minerals", 60), predictions: [prediction("full-moon", 71)] };
  await amendHypothesis(desk, rival, { key, hypothesis: late });
  const dark = { ...reading("n4", 69, { measurand: "full-moon" }), id: "n4" };
  await sealMeasurement(desk, rival, { key, until, seal: { keeping: "held", measurement: dark } });
  const moved = { ...reading("n3", 71, { measurand: "full-moon" }), id: "n3" };
  await correctMeasurement(desk, rival, { key, measurement: moved, reason: "it was full moon" });
  code = (await citeStandings(desk, coordinator, { key, note: "a letter" })).code;
  const selection = { by: "ids" as const, ids: ["n2"] };
  await withdrawMeasurements(desk, rival, { key, selection, reason: "a torch" });
  await makeRemark(desk, member, { key, on: 12, kind: "question", text: "Which torch?" });
  now = "2040-02-02T00:00:00.000000Z";
  expect(await keepDates(desk, key)).toEqual([]);
  await retireHypothesis(desk, rival, { key, hypothesis: "minerals", reason: "too bright" });
});
afterAll(async () => {
  await house.close();
});

it("the archive of a ledger with seals, corrections and withdrawals verifies on every line", async () => {
  const { bytes } = await exportAuditTrail(desk, null, { key: lagoon.key });
  const report = verifyArchive(bytes, { hasher: nodeHasher, score: scoreCampaign });
  const failed = report.lines.filter(({ outcome }) => outcome === "failed");
  expect(failed).toEqual([]);
  const lineOf = (check: string) => report.lines.find((line) => line.check === check);
  expect(lineOf("seals")).toMatchObject({ outcome: "ok" });
  expect(lineOf("before and after data")).toMatchObject({ outcome: "ok" });
});

it("standings are found by their code as they were cited, whatever came after", async () => {
  const cited = await readCitation(desk, null, { code });
  expect(cited).toMatchObject({
    key: lagoon.key,
    note: "a letter",
    by: "hand",
    clock: "simulated",
  });
  expect(cited.standings.asOf!.size).toBe(cited.seq);
  expect(cited.standings.measurements.counted).toBe(3);
  expect(cited.document.measurements.map(({ id }) => id)).toEqual(["n1", "n2", "n3"]);
  expect(await readCitations(desk, null, { key: lagoon.key })).toMatchObject([
    { code, by: "hand" },
  ]);
  for (const other of ["00000000", "ILOU", `${code}0`]) {
    await expect(readCitation(desk, null, { code: other })).rejects.toMatchObject({
      code: "not-found",
    });
  }
});

it("the citation of a campaign for members is theirs alone", async () => {
  const shut = await openLagoon({ ...house, desk }, { key: "shut", visibility: "members" });
  const { code: hidden } = await citeStandings(desk, shut.coordinator, { key: "shut" });
  expect((await readCitation(desk, shut.reader, { code: hidden })).key).toBe("shut");
  await expect(readCitation(desk, null, { code: hidden })).rejects.toMatchObject({
    code: "not-found",
    message: expect.stringContaining("found no cited standings") as string,
  });
});
