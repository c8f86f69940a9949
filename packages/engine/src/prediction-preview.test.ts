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
    const interval = { family: "interval", lower: 1, upper: 2, sharing: "common" } as const;
    expect(refused({ measurand: "x", expected: null, tolerance: interval }, 1)).toEqual([
      "/tolerance/family not-yet-supported",
    ]);
  });
});
