import { describe, expect, test } from "vitest";
import { previewPrediction, type PredictionDraft } from "./prediction-preview";
import { documentFrom, standingsFrom } from "./testing/documents";

const document = documentFrom({
  observables: [
    { key: "o", title: "O", unit: "m", scale: "linear" },
    { key: "l", title: "L", unit: "m", scale: "log10" },
  ],
  measurands: [
    { key: "x", observable: "o", reference: { family: "uniform", lower: 0, upper: 10 } },
    { key: "g", observable: "o", reference: { family: "normal", mean: 0, sd: 2 } },
    { key: "z", observable: "l", reference: { family: "uniform", lower: 1, upper: 100 } },
  ],
});

const normal = (sd: number): PredictionDraft["tolerance"] => ({
  family: "normal",
  sd,
  relative: false,
  sharing: "common",
  in: null,
  length: null,
});

function previewOf(draft: PredictionDraft, sd: number) {
  const preview = previewPrediction(document, draft, { sd });
  if (!preview.ok) throw new Error(JSON.stringify(preview.problems));
  return preview.value;
}

/** What the standings make of one such measurement. */
function scoredAt(draft: PredictionDraft, value: number, sd: number) {
  const prediction = { ...draft, tolerance: draft.tolerance ?? undefined };
  const { verdicts, hypotheses, noModel } = standingsFrom(
    documentFrom({
      observables: document.observables.map(({ key, title, unit, scale }) => ({
        key,
        title,
        unit,
        scale,
      })),
      measurands: document.measurands,
      hypotheses: [{ key: "h", title: "H", predictions: [prediction] }],
      measurements: [{ id: "a", measurand: draft.measurand, value, sdDex: null, sd }],
    }),
  );
  return {
    word: verdicts[0]!.verdict,
    log10B: (hypotheses[0]!.lnEvidence! - noModel.lnEvidence!) / Math.LN10,
  };
}

describe("the preview of a prediction", () => {
  test("gives its interval, the reference's range, and what it covers", () => {
    const preview = previewOf({ measurand: "x", expected: 4, tolerance: normal(0.5) }, 0.1);
    expect(preview).toMatchObject({
      expected: 4,
      interval: { lower: 3, upper: 5 },
      reference: { lower: 0, upper: 10 },
      outsideReference: false,
    });
    expect(preview.shareOfReference).toBeCloseTo(0.2, 12);
    const beyond = previewOf({ measurand: "g", expected: 9, tolerance: null }, 0.1);
    expect(beyond.reference).toEqual({ lower: -8, upper: 8 });
    expect(beyond).toMatchObject({ outsideReference: true, shareOfReference: 0 });
  });

  test.each([
    ["with a tolerance", { measurand: "x", expected: 4, tolerance: normal(0.5) }],
    ["exact", { measurand: "x", expected: 4, tolerance: null }],
    ["exact, under a normal reference", { measurand: "g", expected: 1, tolerance: null }],
    ["from an expression", { measurand: "g", expected: "1 / 2", tolerance: normal(0.2) }],
  ])("has the edges at which the standings' verdict turns: %s", (_name, draft) => {
    const sd = 0.1;
    const { passes, fails, hit, miss } = previewOf(draft, sd);
    const step = 1e-6;
    expect(scoredAt(draft, passes!.upper! - step, sd).word).toBe("pass");
    expect(scoredAt(draft, passes!.upper! + step, sd).word).toBe("undecided");
    expect(scoredAt(draft, passes!.lower! + step, sd).word).toBe("pass");
    expect(scoredAt(draft, passes!.lower! - step, sd).word).toBe("undecided");
    expect(scoredAt(draft, fails.above! + step, sd).word).toBe("fail");
    expect(scoredAt(draft, fails.above! - step, sd).word).toBe("undecided");
    expect(scoredAt(draft, fails.below! - step, sd).word).toBe("fail");
    expect(scoredAt(draft, fails.below! + step, sd).word).toBe("undecided");
    const expected = typeof draft.expected === "string" ? 0.5 : draft.expected!;
    expect(hit.log10BayesFactor).toBeCloseTo(scoredAt(draft, expected, sd).log10B, 10);
    expect(miss!.log10BayesFactor).toBeCloseTo(scoredAt(draft, miss!.value, sd).log10B, 10);
    expect(miss!.log10BayesFactor).toBeLessThan(0);
  });

  test("says where a measurement so coarse can't pass", () => {
    const coarse = previewOf({ measurand: "x", expected: 4, tolerance: normal(0.1) }, 1);
    expect(coarse.passes).toBeNull();
    expect(coarse.fails.above).toBeGreaterThan(4);
  });

  test("takes the sd in dex on a log10 scale, and gives natural values", () => {
    const { passes, interval } = previewOf(
      { measurand: "z", expected: 10, tolerance: normal(0.1) },
      0.02,
    );
    expect(interval.lower).toBeCloseTo(10 / 10 ** 0.2, 9);
    // One-sided 95 % is 1.644854 u (normal table).
    expect(Math.log10(passes!.upper!)).toBeCloseTo(1.2 - 1.644854 * 0.02, 6);
  });

  test("refuses what can't be previewed, with pointers into the draft", () => {
    const refused = (draft: PredictionDraft, sd: number) => {
      const preview = previewPrediction(document, draft, { sd });
      return preview.ok ? [] : preview.problems.map(({ pointer, code }) => `${pointer} ${code}`);
    };
    expect(refused({ measurand: "x", expected: 4, tolerance: null }, 0)).toEqual([
      "/sd out-of-range",
    ]);
    expect(refused({ measurand: "nowhere", expected: 4, tolerance: null }, 1)).toEqual([
      "/measurand out-of-range",
    ]);
    expect(refused({ measurand: "x", expected: "q", tolerance: null }, 1)).toEqual([
      "/expected bad-expression",
    ]);
    expect(refused({ measurand: "z", expected: -4, tolerance: null }, 1)).toEqual([
      "/expected out-of-range",
    ]);
  });
});

describe("the preview of other forms", () => {
  const more = documentFrom({
    observables: [
      {
        key: "o",
        title: "O",
        unit: "m",
        scale: "linear",
        conditions: [{ key: "depth", unit: "m" }],
      },
      { key: "angle", title: "A", unit: "deg", scale: "cyclic", period: 360 },
      { key: "seen", title: "E", scale: "event" },
      { key: "clicks", title: "C", unit: "1", scale: "count" },
    ],
    measurands: [
      { key: "x", observable: "o", reference: { family: "uniform", lower: 0, upper: 10 } },
      {
        key: "curve",
        observable: "o",
        shape: "curve",
        where: { depth: [0, 10] },
        reference: { family: "polynomial", in: "depth", degree: 1, centre: 5, sd: 3 },
      },
      { key: "bearing", observable: "angle" },
      { key: "event", observable: "seen" },
      { key: "rate", observable: "clicks", reference: { family: "gamma", mean: 20, sd: 20 } },
    ],
  });
  const of = (draft: PredictionDraft, sd = 0.1) => {
    const made = previewPrediction(more, draft, { sd });
    if (!made.ok) throw new Error(JSON.stringify(made.problems));
    return made.value;
  };

  test("hard bounds pass 1.6449 u inside them and fail 2.3263 u beyond (normal table)", () => {
    const tolerance = { family: "interval", lower: 2, upper: 4, sharing: "common" } as const;
    const { expected, passes, fails, interval } = of({ measurand: "x", expected: null, tolerance });
    expect(expected).toBe(3);
    expect(interval).toEqual({ lower: 2, upper: 4 });
    expect(passes!.lower).toBeCloseTo(2.16449, 5);
    expect(passes!.upper).toBeCloseTo(3.83551, 5);
    expect(fails.below).toBeCloseTo(2 - 0.23263, 5);
    expect(fails.above).toBeCloseTo(4 + 0.23263, 5);
  });

  test("a bound on one side lets everything on the other pass", () => {
    const tolerance = { family: "atMost", bound: 3, sharing: "common" } as const;
    const { passes, fails, interval } = of({ measurand: "x", expected: null, tolerance });
    expect(interval).toEqual({ lower: null, upper: 3 });
    expect(passes!.lower).toBeNull();
    expect(passes!.upper).toBeCloseTo(2.83551, 5);
    expect(fails.below).toBeNull();
    expect(fails.above).toBeCloseTo(3.23263, 5);
  });

  test("two half-normals are wider on the side where they are said to be", () => {
    const tolerance = { family: "splitNormal", plus: 2, minus: 0.5, sharing: "common" } as const;
    const { passes, interval } = of({ measurand: "x", expected: 4, tolerance });
    expect(interval.upper! - 4).toBeGreaterThan(3 * (4 - interval.lower!));
    expect(passes!.upper! - 4).toBeGreaterThan(3 * (4 - passes!.lower!));
  });

  test("a bearing's interval runs through the circle's end", () => {
    const draft = { measurand: "bearing", expected: 359, tolerance: normal(2) };
    const { interval, passes } = of(draft, 0.5);
    expect(interval).toEqual({ lower: 355, upper: 3 });
    expect(passes!.lower).toBeLessThan(359);
  });

  test("a rate passes on counts, which are whole", () => {
    const tolerance = { family: "gamma", mean: 30, sd: 10, sharing: "common" } as const;
    const { passes, fails } = of({ measurand: "rate", expected: null, tolerance });
    expect(Number.isInteger(passes!.lower)).toBe(true);
    expect(Number.isInteger(fails.above)).toBe(true);
    expect(passes!.lower).toBeLessThan(passes!.upper!);
    expect(fails.above).toBeGreaterThan(passes!.upper!);
  });

  test("a called event earns log10 of p against 1/2", () => {
    const draft = { measurand: "event", expected: null, tolerance: null, probability: 0.9 };
    const { passes, fails, hit, miss } = of(draft);
    expect(passes).toEqual({ lower: 1, upper: 1 });
    expect(fails).toEqual({ below: 0, above: null });
    expect(hit.log10BayesFactor).toBeCloseTo(Math.log10(1.8), 12);
    expect(miss!.log10BayesFactor).toBeCloseTo(Math.log10(0.2), 12);
  });

  test("what hangs on a parameter is looked at over its prior", () => {
    const parameters = [
      { key: "q", title: "q", unit: null, prior: { family: "normal", mean: 5, sd: 0.3 } as const },
    ];
    const draft = { measurand: "x", expected: "q", tolerance: normal(0.4) };
    const { interval } = of({ ...draft, hypothesis: { parameters, tables: [], ensemble: null } });
    expect(interval.lower).toBeCloseTo(4, 12);
    expect(interval.upper).toBeCloseTo(6, 12);
  });

  test("on a curve one measurement in the middle of its range is supposed", () => {
    const draft = { measurand: "curve", expected: "5 + 0 * depth", tolerance: normal(0.2) };
    const { hit, miss } = of(draft);
    expect(hit.log10BayesFactor).toBeGreaterThan(0);
    expect(miss!.log10BayesFactor).toBeLessThan(0);
  });
});
