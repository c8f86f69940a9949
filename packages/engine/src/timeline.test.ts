import { expect, test } from "vitest";
import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { PayloadInput } from "@weighhouse/campaign/entries";
import { foldRecords } from "@weighhouse/campaign/fold";
import { Ledger, measurandOf, openedDune, reading } from "@weighhouse/campaign/testing/ledger";
import { evidencesOf } from "./evidences";
import { createState } from "./state";
import { expectSame } from "./testing/same-numbers";
import { timelineOf } from "./timeline";

function posted(...measurements: Record<string, unknown>[]) {
  return { measurements } as PayloadInput<"measurements.posted">;
}

/** A dune whose measurements come, change and go; each entry a transaction of its own. */
function course(): Ledger {
  return openedDune()
    .bySystem()
    .add("facility.declared", { key: "mast", title: "Mast" })
    .add("measurements.posted", posted(reading("a"), reading("b", { value: 84, sd: 3 })))
    .add("measurements.posted", posted(reading("c", { measurand: "foot", value: 120 })))
    .add("remark.made", { on: 9, kind: "question", text: "Was it a quiet night?" })
    .add("measurements.posted", posted(reading("d", { value: 9e6, sd: 5 })))
    .add("measurement.corrected", {
      measurement: reading("b", { value: 83 }),
      reason: "read off again",
    })
    .add("measurement.set-aside", { id: "a", reason: "a lorry passed" })
    .add("measurements.withdrawn", { selection: { by: "ids", ids: ["d"] }, reason: "off" })
    .by("wind")
    .add("hypothesis.retired", { key: "flutter", reason: "given up" })
    .bySystem()
    .add("measurand.declared", measurandOf("flank"))
    .add("measurements.posted", posted(reading("e", { measurand: "flank", value: 70 })));
}

test("the timeline's points are what the documents of their sizes score, each with what moved it", () => {
  const { records } = course();
  const steps = timelineOf(records.map((record) => [record]));
  expect(steps.map(({ movedBy }) => `${movedBy.kind} ${movedBy.measurements}`)).toEqual([
    "hypothesis.registered 0",
    "hypothesis.registered 0",
    "measurements.posted 2",
    "measurements.posted 1",
    "measurements.posted 1",
    "measurement.corrected 1",
    "measurement.set-aside 1",
    "measurements.withdrawn 1",
    "hypothesis.retired 0",
    "measurements.posted 1",
  ]);
  for (const { size, points } of steps) expectSame(points, pointsAt(records, size));
  // Each of the measurements' transactions moved the one hypothesis that predicts.
  const slip = steps.map(({ points }) => points![0]!.lnEvidence);
  expect(new Set(slip.slice(1, 8)).size).toBe(7);
  expect(steps[2]!.movedBy.facilities).toEqual(["mast"]);
});

function pointsAt(records: readonly LedgerRecord[], size: number) {
  const state = createState(foldRecords(records.slice(0, size)));
  return state.ok ? evidencesOf(state.value) : null;
}

test("transactions of several entries have one point each", () => {
  const { records } = course();
  const steps = timelineOf([records.slice(0, 12), records.slice(12)]);
  expect(steps.map(({ size }) => size)).toEqual([12, records.length]);
  for (const { size, points } of steps) expectSame(points, pointsAt(records, size));
});
