import * as fc from "fast-check";
import { describe, expect, test } from "vitest";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { standingsSchema } from "@weighhouse/campaign/standings";
import { evidencesOf } from "./evidences";
import { scoreCampaign } from "./score";
import { addMeasurements, createState, restoreState, serialiseState, standingsOf } from "./state";
import { documentFrom, standingsFrom } from "./testing/documents";
import { campaigns } from "./testing/random-campaigns";
import { expectSame } from "./testing/same-numbers";

const spread = { level: 2_460_000, unit: 1e-4, flats: 1, measurements: { least: 2, most: 12 } };

function stateOf(document: CampaignDocument) {
  const state = createState(document);
  if (!state.ok) throw new Error(JSON.stringify(state.problems));
  return state.value;
}

function grownIn(document: CampaignDocument, order: readonly number[], cut: number) {
  let state = stateOf({ ...document, measurements: [] });
  const ordered = order.map((i) => document.measurements[i]!);
  for (const batch of [
    ordered.slice(0, cut),
    ordered.slice(cut, cut + 1),
    ordered.slice(cut + 1),
  ]) {
    const added = addMeasurements(state, batch);
    if (!added.ok) throw new Error(JSON.stringify(added.problems));
    // Through its text and back, as a scorer does between entries.
    state = restoreState(serialiseState(added.value))!;
  }
  return state;
}

describe("a state", () => {
  test("that measurements were added to in any order scores as the whole does, to 1e-9", () => {
    const shuffled = campaigns(spread).chain((document) => {
      const indices = document.measurements.map((_, i) => i);
      return fc.record({
        document: fc.constant(document),
        order: fc.shuffledSubarray(indices, { minLength: indices.length }),
        cut: fc.nat({ max: indices.length }),
      });
    });
    fc.assert(
      fc.property(shuffled, ({ document, order, cut }) => {
        const { warnings: _whole, ...whole } = standingsFrom(document);
        const { warnings: _grown, ...grown } = standingsOf(grownIn(document, order, cut));
        expectSame(grown, whole);
      }),
      { numRuns: 150, seed: 20310305 },
    );
  });

  test("in the document's own order scores to the same bytes", () => {
    fc.assert(
      fc.property(campaigns(spread), (document) => {
        const order = document.measurements.map((_, i) => i);
        const grown = standingsOf(grownIn(document, order, 1));
        expect(JSON.stringify(grown)).toBe(JSON.stringify(standingsFrom(document)));
      }),
      { numRuns: 50, seed: 20310306 },
    );
  });

  test("gives a point of the timeline for every hypothesis, and silence", () => {
    const document = documentFrom({
      campaign: { key: "k", title: "K", noneOfThese: { weight: 1 } },
      observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
      measurands: [
        { key: "x", observable: "o", reference: { family: "uniform", lower: 0, upper: 10 } },
      ],
      hypotheses: ["b", "a"].map((key, i) => ({
        key,
        title: key,
        predictions: [{ measurand: "x", expected: 3 + i }],
      })),
      measurements: [{ id: "m", measurand: "x", value: 4, sd: 0.5 }],
    });
    const points = evidencesOf(stateOf(document));
    const standings = standingsFrom(document);
    expect(points.map(({ hypothesis }) => hypothesis)).toEqual([
      "b",
      "a",
      "noneOfThese",
      "noModel",
    ]);
    for (const { hypothesis, lnEvidence } of points.slice(0, 3)) {
      const standing = standings.hypotheses.find(({ key }) => key === hypothesis);
      expect(lnEvidence).toBe(standing!.lnEvidence);
    }
    expect(points[3]!.lnEvidence).toBe(standings.noModel.lnEvidence);
  });

  test("refuses a measurement whole, and stays good", () => {
    const document = documentFrom({
      observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
      measurands: [
        { key: "x", observable: "o", reference: { family: "uniform", lower: 0, upper: 10 } },
      ],
      sharedErrors: [{ key: "zero", sd: 1, per: "batch" }],
      measurements: [{ id: "m", measurand: "x", value: 4, sd: 0.5 }],
    });
    const state = stateOf(document);
    const before = serialiseState(state);
    const [good] = document.measurements;
    const refused = addMeasurements(state, [
      { ...good!, id: "n" },
      { ...good!, id: "p", limit: "upper", confidence: 0.9, sd: null, value: 3 },
      { ...good!, id: "q", measurand: "z" },
      { ...good!, id: "r", unit: "kg" },
      { ...good!, id: "s", sd: null },
      { ...good!, id: "t", shared: [{ error: "nowhere", coefficient: 1 }] },
      { ...good!, id: "u", sd: 1e-200 },
      { ...good!, id: "v", value: 1e200 },
      { ...good!, id: "w", shared: [{ error: "zero", coefficient: 1 }] },
    ]);
    const problems = refused.ok ? [] : refused.problems;
    expect(problems.map(({ pointer, code }) => `${pointer} ${code}`)).toEqual([
      "/measurements/3/measurand unknown-key",
      "/measurements/4/unit wrong-dimension",
      "/measurements/5/sd missing",
      "/measurements/6/shared unknown-key",
      "/measurements/7/sd out-of-range",
      "/measurements/8/sd out-of-range",
      "/measurements/9/batch missing",
    ]);
    expect(serialiseState(state)).toBe(before);
  });

  test("of another version isn't read", () => {
    const document = documentFrom({});
    const text = serialiseState(stateOf(document));
    expect(restoreState(text)).not.toBeNull();
    expect(restoreState(text.replace('"engine":"', '"engine":"9'))).toBeNull();
    expect(restoreState(text.replace('"state":', '"state":9'))).toBeNull();
  });
});

test("the same document gives the same bytes, with keys in the schema's order", () => {
  fc.assert(
    fc.property(campaigns(spread), (document) => {
      const first = scoreCampaign(document);
      const second = scoreCampaign(structuredClone(document));
      if (!first.ok || !second.ok) throw new Error("both are right");
      expect(JSON.stringify(first.value)).toBe(JSON.stringify(second.value));
      // Parsing rebuilds each object with its keys in the schema's order.
      const rebuilt = standingsSchema.parse(first.value);
      expect(JSON.stringify(first.value)).toBe(JSON.stringify(rebuilt));
    }),
    { numRuns: 50, seed: 20310307 },
  );
});
