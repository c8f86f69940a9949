import { describe, expect, test } from "vitest";
import { documentFrom, standingsFrom } from "./testing/documents";

type Part = Record<string, unknown>;

const observables = [
  { key: "o", title: "O", unit: "m", scale: "linear" },
  { key: "l", title: "L", unit: "m", scale: "log10" },
];
const uniform = { family: "uniform", lower: 0, upper: 10 };
const x = { key: "x", observable: "o", reference: uniform };
const y = { key: "y", observable: "o", reference: uniform };

function standingsOf(parts: Part, options: Parameters<typeof standingsFrom>[1] = {}) {
  return standingsFrom(documentFrom({ observables, measurands: [x, y], ...parts }), options);
}

function hypothesis(key: string, predictions: Part[], more: Part = {}) {
  return { key, title: key, predictions, ...more };
}

const onX = (expected: number, more: Part = {}) => ({ measurand: "x", expected, ...more });
const onY = (expected: number, more: Part = {}) => ({ measurand: "y", expected, ...more });
const normal = (sd: number) => ({ tolerance: { family: "normal", sd } });

describe("silence", () => {
  const measurements = [
    { id: "a", measurand: "x", value: 3, sd: 0.1 },
    { id: "b", measurand: "y", value: 5, sd: 0.1 },
  ];

  test("costs what the reference costs, and is neither compared nor in chi-square", () => {
    const { hypotheses, noModel } = standingsOf({
      hypotheses: [hypothesis("both", [onX(3), onY(5)]), hypothesis("one", [onX(3)])],
      measurements,
    });
    const [both, one] = hypotheses;
    expect([both!.compared, both!.silent]).toEqual([2, 0]);
    expect([one!.compared, one!.silent]).toEqual([1, 1]);
    expect(one!.degreesOfFreedom).toBe(1);
    // Well inside the range of width 10 the reference's density is 1/10 against 1 / (sqrt(2 pi) sd).
    const gain = Math.log(10 / (Math.sqrt(2 * Math.PI) * 0.1));
    expect(both!.lnEvidence! - one!.lnEvidence!).toBeCloseTo(gain, 12);
    expect(one!.lnEvidence! - noModel.lnEvidence!).toBeCloseTo(gain, 12);
  });

  test("of everything is noModel, and noneOfThese where that is weighted", () => {
    const { hypotheses, noModel, pairs } = standingsOf({
      campaign: { key: "k", title: "K", noneOfThese: { weight: 2 } },
      hypotheses: [hypothesis("quiet", []), hypothesis("good", [onX(3)])],
      measurements,
    });
    expect(hypotheses.map(({ key }) => key)).toEqual(["good", "noneOfThese", "quiet"]);
    const [, none, quiet] = hypotheses;
    expect(none!.lnEvidence).toBe(noModel.lnEvidence);
    expect(quiet!.lnEvidence).toBe(noModel.lnEvidence);
    expect(none!.posterior / quiet!.posterior).toBeCloseTo(2, 12);
    expect([none!.chiSquare, none!.degreesOfFreedom, none!.pValue]).toEqual([null, 0, null]);
    expect(pairs).toHaveLength(3);
    expect(pairs[0]!.commonGround).toEqual({ measurements: 0, log10BayesFactor: null });
  });

  test("decides a pair where the common ground says otherwise, and that is a warning", () => {
    const { pairs, warnings } = standingsOf({
      hypotheses: [
        hypothesis("narrow", [onX(3.05)]),
        hypothesis("broad", [onX(3.02), onY(5.35, normal(0.5))]),
        hypothesis("bold", [onX(3), onY(5.5)]),
      ],
      measurements,
    });
    const pair = pairs.find(({ a, b }) => a === "narrow" && b === "bold")!;
    expect(pair.log10BayesFactor).toBeGreaterThan(0.5);
    expect(pair.commonGround.measurements).toBe(1);
    expect(pair.commonGround.log10BayesFactor).toBeLessThan(0);
    const at = `/pairs/${pairs.indexOf(pair)}`;
    expect(warnings).toContainEqual(
      expect.objectContaining({ code: "common-ground-disagrees", at }),
    );
    expect(warnings.filter(({ code }) => code === "common-ground-disagrees")).toHaveLength(1);
  });
});

test("members of a group divide one share between them", () => {
  const { hypotheses } = standingsOf({
    hypotheses: [
      hypothesis("alone", [onX(3)]),
      hypothesis("first", [onX(3)], { group: "variants" }),
      hypothesis("second", [onX(3)], { group: "variants", weight: 3 }),
    ],
    measurements: [{ id: "a", measurand: "x", value: 3, sd: 0.1 }],
  });
  const posterior = Object.fromEntries(hypotheses.map(({ key, posterior }) => [key, posterior]));
  expect(posterior["alone"]).toBeCloseTo(1 / 3, 12);
  expect(posterior["first"]).toBeCloseTo(1 / 6, 12);
  expect(posterior["second"]).toBeCloseTo(1 / 2, 12);
  // Ties in evidence are ranked by key.
  expect(hypotheses.map(({ key, rank }) => [key, rank])).toEqual([
    ["alone", 1],
    ["first", 2],
    ["second", 3],
  ]);
});

describe("what is listed and not counted", () => {
  const counted = { id: "a", measurand: "x", value: 3, sd: 0.1 };
  const hypotheses = [hypothesis("h", [onX(3), onY(5)])];

  test("a measurement set aside leaves the standings as if it weren't there", () => {
    const aside = { id: "b", measurand: "x", value: 900, setAside: { reason: "no uncertainty" } };
    const setAside = standingsOf({ hypotheses, measurements: [counted, aside] });
    const without = standingsOf({ hypotheses, measurements: [counted] });
    expect(setAside).toEqual({ ...without, measurements: { counted: 1, setAside: 1 } });
  });

  test("a closed measurand's measurements don't count, and its verdict is notMeasured", () => {
    const closed = { ...y, closed: { reason: "the site was lost" } };
    const { measurements, verdicts, measurands } = standingsOf({
      measurands: [x, closed],
      hypotheses,
      measurements: [counted, { id: "b", measurand: "y", value: 900, sd: 1 }],
    });
    expect(measurements).toEqual({ counted: 1, setAside: 0 });
    expect(measurands[1]).toEqual({ key: "y", measurements: 0, combined: null, thresholds: [] });
    expect(verdicts[1]).toMatchObject({ verdict: "notMeasured", value: null, lower: 5, upper: 5 });
  });

  test("a withheld prediction is silent and says so once there are data", () => {
    const withheld = [hypothesis("h", [onX(3)], { withheld: ["y"] })];
    const before = standingsOf({ hypotheses: withheld, measurements: [counted] });
    expect(before.verdicts[1]).toMatchObject({ measurand: "y", verdict: "awaiting" });
    const measurements = [counted, { id: "b", measurand: "y", value: 4, sd: 1 }];
    const after = standingsOf({ hypotheses: withheld, measurements });
    const row = after.verdicts[1]!;
    expect(row).toMatchObject({ verdict: "withheld", conformance: null, tension: null, value: 4 });
    expect([row.lower, row.upper]).toEqual([null, null]);
    expect(after.hypotheses[0]).toMatchObject({ compared: 1, silent: 1 });
    expect(after.hypotheses[0]!.verdicts).toMatchObject({ pass: 1, withheld: 1 });
  });

  test("a campaign without measurements has standings of nothing", () => {
    const standings = standingsOf({ hypotheses });
    expect(standings.noModel.lnEvidence).toBe(0);
    expect(standings.hypotheses[0]).toMatchObject({
      compared: 0,
      chiSquare: null,
      degreesOfFreedom: 0,
      pValue: null,
      lnEvidence: 0,
      posterior: 1,
    });
    expect(standings.verdicts.map(({ verdict }) => verdict)).toEqual(["awaiting", "awaiting"]);
    expect(standings.measurands[0]!.combined).toBeNull();
  });
});

test("a hypothesis whose likelihood is zero has no evidence, ranks last, and breaks nothing", () => {
  const { hypotheses, pairs, verdicts } = standingsOf({
    hypotheses: [hypothesis("absurd", [onX(1e200)]), hypothesis("good", [onX(3)])],
    measurements: [{ id: "a", measurand: "x", value: 3, sd: 0.1 }],
  });
  expect(hypotheses.map(({ key }) => key)).toEqual(["good", "absurd"]);
  expect(hypotheses[1]).toMatchObject({
    lnEvidence: null,
    lnEvidenceError: 0,
    log10BayesFactor: null,
    posterior: 0,
    chiSquare: null,
    pValue: 0,
  });
  expect(pairs[0]!.log10BayesFactor).toBeNull();
  expect(verdicts.map(({ verdict }) => verdict)).toEqual(["fail", "pass"]);
});

describe("scales and units", () => {
  test("on log10 values and bounds are natural, uncertainties in dex", () => {
    const logged = { key: "x", observable: "l", reference: { ...uniform, lower: 0.1 } };
    const { verdicts, measurands } = standingsOf({
      measurands: [
        {
          ...logged,
          thresholds: [{ key: "t", value: 2 }],
        },
      ],
      hypotheses: [hypothesis("h", [onX(2, normal(0.05))]), hypothesis("exact", [onX(0.3)])],
      measurements: [{ id: "a", measurand: "x", value: 2, sd: 0.02 * 2 * Math.LN10 }],
    });
    const combined = measurands[0]!.combined!;
    expect(combined.value).toBeCloseTo(2, 12);
    expect(combined.sd).toBeCloseTo(0.02, 14);
    expect(measurands[0]!.thresholds[0]!.probabilityAbove).toBeCloseTo(0.5, 9);
    const [row, exact] = verdicts;
    expect(row!.lower).toBeCloseTo(2 / 10 ** 0.1, 12);
    expect(row!.upper).toBeCloseTo(2 * 10 ** 0.1, 12);
    expect([exact!.lower, exact!.upper]).toEqual([0.3, 0.3]);
  });

  test("a measurement in another unit of the same dimension is converted with its uncertainty", () => {
    const inMetres = { id: "a", measurand: "x", value: 3, sd: 0.1 };
    const inMillimetres = { id: "a", measurand: "x", value: 3000, sd: 100, unit: "mm" };
    const hypotheses = [hypothesis("h", [onX(3.1)])];
    const [m, mm] = [inMetres, inMillimetres].map((one) =>
      standingsOf({ hypotheses, measurements: [one] }),
    );
    expect(mm!.hypotheses[0]!.lnEvidence).toBeCloseTo(m!.hypotheses[0]!.lnEvidence!, 12);
    expect(mm!.measurands[0]!.combined!.sd).toBeCloseTo(0.1, 14);
    expect(mm!.warnings).toEqual([]);
  });

  test("a unit that isn't known is taken as it stands, with a warning", () => {
    const measurement = { id: "a", measurand: "x", value: 3, sd: 0.1, unit: "spans" };
    const { warnings, measurands } = standingsOf({ measurements: [measurement] });
    expect(measurands[0]!.combined!.value).toBe(3);
    expect(warnings).toMatchObject([{ code: "unknown-unit", at: "/measurements/0/unit" }]);
  });

  test("a tolerance relative to a constant is a fraction of it; expressions of numbers are numbers", () => {
    const measurements = [{ id: "a", measurand: "x", value: 3, sd: 0.1 }];
    const relative = { tolerance: { family: "normal", sd: 0.1, relative: true } };
    const { hypotheses, verdicts } = standingsOf({
      hypotheses: [
        hypothesis("a", [{ measurand: "x", expected: "2 * 2", ...relative }]),
        hypothesis("b", [onX(4, normal(0.4))]),
      ],
      measurements,
    });
    expect(hypotheses[0]!.lnEvidence).toBe(hypotheses[1]!.lnEvidence);
    expect(verdicts[0]).toMatchObject({ lower: 3.2, upper: 4.8 });
  });
});
