import { expect, test } from "vitest";
import { readForm } from "./form";
import { standingsSchema } from "./standings";
import type { Standings } from "./standings";

const standings: Standings = {
  format: "weighhouse-standings/1",
  engine: "0.1.0",
  campaign: "singing-dune",
  asOf: { size: 12, treeHead: "a note" },
  measurements: { counted: 3, setAside: 1 },
  noModel: { lnEvidence: -9.1 },
  hypotheses: [
    {
      key: "slip-layer",
      rank: 1,
      compared: 3,
      silent: 0,
      chiSquare: 2.84,
      degreesOfFreedom: 3,
      pValue: 0.417,
      lnEvidence: -4.21,
      lnEvidenceError: 0,
      log10BayesFactor: 0,
      posterior: 0.93,
      failedDecisive: [],
      verdicts: {
        pass: 2,
        fail: 0,
        undecided: 1,
        awaiting: 1,
        notMeasured: 0,
        withheld: 0,
        void: 0,
      },
      parameters: [{ key: "f0", mean: 80, sd: 1, quantiles: [78, 80, 82] }],
    },
  ],
  pairs: [
    {
      a: "slip-layer",
      b: "noneOfThese",
      log10BayesFactor: null,
      commonGround: { measurements: 0, log10BayesFactor: null },
    },
  ],
  verdicts: [
    {
      hypothesis: "slip-layer",
      measurand: "pitch-crest",
      verdict: "pass",
      conformance: 0.98,
      tension: 0.4,
      value: 80,
      sd: 1,
      lower: null,
      upper: 90,
      inflated: false,
      provisional: false,
      order: "before-observation",
    },
  ],
  measurands: [
    {
      key: "pitch-crest",
      measurements: 3,
      combined: { value: 80, sd: 1, chiSquare: 1.2, degreesOfFreedom: 2, birgeRatio: 0.77 },
      thresholds: [{ key: "audible", probabilityAbove: 0.0003 }],
    },
    { key: "ripple", measurements: 0, combined: null, thresholds: [] },
  ],
  warnings: [{ code: "unknown-unit", at: "/measurands/0", text: "A unit that nobody knows." }],
};

test("a standings document is read as it is, byte by byte", () => {
  const { value, problems } = readForm(standingsSchema, standings, "");
  expect(problems).toEqual([]);
  expect(JSON.stringify(value)).toBe(JSON.stringify(standings));
});

test("what isn't known is null, and nothing may be missing or unknown", () => {
  const { pValue: _, ...hypothesis } = standings.hypotheses[0]!;
  const bad = {
    ...standings,
    hypotheses: [{ ...hypothesis, chiSquare: Number.NaN, medal: "gold" }],
    warnings: [{ code: "odd", at: "", text: "" }],
  };
  expect(
    readForm(standingsSchema, bad, "").problems.map(({ pointer, code }) => [pointer, code]),
  ).toEqual([
    ["/hypotheses/0/chiSquare", "wrong-type"],
    ["/hypotheses/0/pValue", "missing"],
    ["/hypotheses/0", "unknown-property"],
    ["/warnings/0/code", "bad-choice"],
  ]);
});
