import type { CampaignDocument } from "@weighhouse/campaign/document";
import { sensitivitySchema, type Sensitivity } from "@weighhouse/campaign/sensitivity";
import { describe, expect, test } from "vitest";
import { documentFrom, standingsFrom } from "../testing/documents";
import { sensitivityOf } from "./sensitivity";

/** Two hypotheses; one plate, read twice, decides between them. */
const parts = {
  observables: [{ key: "level", title: "Level", unit: "m", scale: "linear" }],
  measurands: [
    { key: "may", observable: "level", reference: { family: "uniform", lower: -10, upper: 10 } },
    { key: "june", observable: "level", reference: { family: "normal", mean: 0, sd: 4 } },
  ],
  facilities: [{ key: "pier" }, { key: "raft" }],
  teams: [{ key: "north" }],
  sharedErrors: [{ key: "zero", sd: 0.3 }],
  hypotheses: [
    {
      key: "high",
      title: "High water",
      team: "north",
      weight: 3,
      predictions: [
        { measurand: "may", expected: 2, tolerance: { family: "normal", sd: 0.2 } },
        { measurand: "june", expected: 1 },
      ],
    },
    {
      key: "low",
      title: "Low water",
      predictions: [
        { measurand: "may", expected: 1, tolerance: { family: "normal", sd: 0.2 } },
        { measurand: "june", expected: 1.2 },
      ],
    },
  ],
  measurements: [
    { id: "a", measurand: "may", facility: "pier", value: 1.9, sd: 0.2, sameData: "plate-7" },
    { id: "b", measurand: "june", facility: "raft", team: "north", value: 1.3, sd: 0.3 },
    { id: "c", measurand: "june", facility: "raft", value: 1.1, sd: 0.3, status: "provisional" },
    {
      id: "d",
      measurand: "june",
      value: 1.2,
      sd: 0.2,
      shared: [{ error: "zero" }],
    },
    {
      id: "again",
      measurand: "may",
      facility: "pier",
      value: 1.1,
      sd: 0.2,
      sameData: "plate-7",
      setAside: { reason: "read twice" },
    },
  ],
};

type Parts = typeof parts;

function found(document: CampaignDocument): Sensitivity {
  const sensitivity = sensitivityOf(document);
  if (!sensitivity.ok) throw new Error(JSON.stringify(sensitivity.problems));
  return sensitivitySchema.parse(sensitivity.value);
}

const sensitivity = found(documentFrom(parts));

function rowOf(kind: string, key: string | null) {
  const row = sensitivity.changes.find((one) => one.kind === kind && one.key === key);
  if (row === undefined) throw new Error(`no row ${kind} ${key}`);
  return row;
}

/** Standings of the parts as somebody would change them in the file. */
function changed(change: (copy: Parts) => void) {
  const copy = structuredClone(parts);
  change(copy);
  const { hypotheses } = standingsFrom(documentFrom(copy));
  return hypotheses.map(({ key, rank, log10BayesFactor, posterior, chiSquare }) => ({
    key,
    rank,
    log10BayesFactor,
    posterior,
    chiSquare,
  }));
}

describe("each row is the campaign scored with that change made in its file", () => {
  const measurementsWithout = (goes: (one: Parts["measurements"][number]) => boolean) =>
    changed((copy) => {
      copy.measurements = copy.measurements.filter((one) => !goes(one));
    });
  test.each([
    ["without-facility", "pier", measurementsWithout(({ facility }) => facility === "pier")],
    ["without-measurand", "june", measurementsWithout(({ measurand }) => measurand === "june")],
    ["without-team", "north", measurementsWithout(({ team }) => team === "north")],
    ["without-measurement", "d", measurementsWithout(({ id }) => id === "d")],
    ["without-provisional", null, measurementsWithout(({ status }) => status === "provisional")],
    [
      "same-data-swapped",
      "again",
      changed(({ measurements }) => {
        measurements[0]!.setAside = measurements[4]!.setAside!;
        delete measurements[4]!.setAside;
      }),
    ],
    ["shared-error-doubled", "zero", changed((copy) => (copy.sharedErrors[0]!.sd = 0.6))],
    ["shared-error-absent", "zero", changed((copy) => (copy.measurements[3]!.shared = []))],
    [
      "tolerances-halved",
      null,
      changed(({ hypotheses }) => {
        for (const { predictions } of hypotheses) {
          for (const { tolerance } of predictions) if (tolerance !== undefined) tolerance.sd = 0.1;
        }
      }),
    ],
    [
      "references-doubled",
      null,
      changed(({ measurands }) => {
        Object.assign(measurands[0]!.reference, { lower: -20, upper: 20 });
        Object.assign(measurands[1]!.reference, { sd: 8 });
      }),
    ],
    ["equal-weights", null, changed(({ hypotheses }) => delete hypotheses[0]!.weight)],
  ])("%s %s", (kind, key, hypotheses) => {
    expect(rowOf(kind, key).hypotheses).toEqual(hypotheses);
  });
});

test("the finding names what would give the lead to another, and whom", () => {
  const turning = sensitivity.changes.filter(({ leaderChanges }) => leaderChanges);
  expect(sensitivity.leader).toBe("high");
  expect(turning.map(({ kind, key, leader }) => [kind, key, leader])).toContainEqual([
    "same-data-swapped",
    "again",
    "low",
  ]);
  expect(sensitivity.finding).toContain(
    "with again in place of its counted alternative (then Low water)",
  );
});

test("weights of evidence add up to the whole where quantities share nothing", () => {
  const weights = sensitivity.weightOfEvidence.map(({ log10BayesFactor }) => log10BayesFactor!);
  const whole = -sensitivity.hypotheses[1]!.log10BayesFactor!;
  expect(weights).toHaveLength(2);
  expect(Math.abs(weights[0]! + weights[1]! - whole)).toBeLessThan(1e-9);
});

test("the references' width at which the leader changes is where both are even", () => {
  // One predicts and one is silent: the wider the reference, the cheaper the prediction.
  const silent = {
    ...parts,
    hypotheses: [
      { key: "bold", title: "Bold", predictions: [{ measurand: "may", expected: 2.35 }] },
      { key: "silent", title: "Silent", predictions: [] },
    ],
    measurements: [{ id: "a", measurand: "may", value: 1.9, sd: 0.2 }],
  };
  const { referenceWidthFactor, leader } = found(documentFrom(silent));
  // phi(2.25) / 0.2 = 1 / width: width 0.2 sqrt(2 pi) e^(2.25^2 / 2), of 20.
  const even = (0.2 * Math.sqrt(2 * Math.PI) * Math.exp(2.25 ** 2 / 2)) / 20;
  expect(leader).toBe("bold");
  expect(referenceWidthFactor!.leader).toBe("silent");
  expect(Math.abs(referenceWidthFactor!.factor / even - 1)).toBeLessThan(1e-6);
});

test("of many measurements those are tried that tell most, and the number is said", () => {
  const measurements = Array.from({ length: 450 }, (_, i) => ({
    id: `m${i}`,
    measurand: i % 2 === 0 ? "may" : "june",
    value: 1.5 + (i % 7) / 10,
    sd: i === 222 ? 0.01 : 2,
  }));
  const many = found(documentFrom({ ...parts, measurements }));
  expect(many.measurementsTried).toBe(400);
  const single = many.changes.filter(({ kind }) => kind === "without-measurement");
  expect(single).toHaveLength(50);
  expect(single[0]!.key).toBe("m222");
});
