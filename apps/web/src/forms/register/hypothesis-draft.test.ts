import type { CampaignDocument, Hypothesis } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import {
  alignedPredictions,
  draftOfHypothesis,
  emptyHypothesisDraft,
  hypothesisContent,
  hypothesisField,
  openMeasurands,
} from "./hypothesis-draft";

const document = {
  measurands: [
    { key: "undated", closed: null, window: { from: null, to: null } },
    { key: "june", closed: null, window: { from: "2031-06-01T00:00:00Z", to: null } },
    { key: "may", closed: null, window: { from: "2031-05-01T00:00:00Z", to: null } },
    { key: "mistaken", closed: { reason: "wrong unit" }, window: { from: null, to: null } },
  ],
} as unknown as CampaignDocument;

function drafted() {
  const draft = emptyHypothesisDraft(document, "north");
  const june = draft.predictions[1];
  if (june === undefined) throw new Error("no June");
  Object.assign(june, { says: "number", expected: "1.5", sd: "0.2", decisive: true });
  return { ...draft, title: " Warm bed ", key: "warm-bed" };
}

test("quantities stand in the order of their windows, closed ones left out", () => {
  expect(openMeasurands(document).map(({ key }) => key)).toEqual(["may", "june", "undated"]);
});

test("only what is said becomes a prediction, numbers as numbers", () => {
  expect(hypothesisContent(drafted())).toEqual({
    key: "warm-bed",
    title: "Warm bed",
    statement: null,
    team: "north",
    group: null,
    weight: 1,
    predictions: [
      {
        measurand: "june",
        expected: 1.5,
        tolerance: { family: "normal", sd: 0.2, sharing: "common" },
        decisive: true,
      },
    ],
  });
});

test("no theory error is an exact prediction", () => {
  const draft = drafted();
  Object.assign(draft.predictions[1] ?? {}, { tolerance: "exact" });
  expect(hypothesisContent(draft)).toMatchObject({ predictions: [{ tolerance: null }] });
});

test("what is wrong in a prediction stands at its quantity's field", () => {
  const draft = drafted();
  expect(hypothesisField(draft, ["predictions", 0, "tolerance", "sd"])).toBe("predictions.1.sd");
  expect(hypothesisField(draft, ["predictions", 0, "expected"])).toBe("predictions.1.expected");
  expect(hypothesisField(draft, ["predictions", 0])).toBe("predictions.1.expected");
  expect(hypothesisField(draft, ["title"])).toBe("title");
});

test("a registered hypothesis comes back into the form as it was", () => {
  const content = hypothesisContent(drafted());
  const registered = { ...content, statement: null } as unknown as Hypothesis;
  expect(hypothesisContent(draftOfHypothesis(document, registered))).toEqual(content);
});

test("a draft from before a quantity was declared keeps what was typed and is silent on the new one", () => {
  const draft = drafted();
  const older = draft.predictions.slice(0, 2);
  const aligned = alignedPredictions(document, older);
  expect(aligned.map(({ measurand, says }) => `${measurand} ${says}`)).toEqual([
    "may silent",
    "june number",
    "undated silent",
  ]);
  expect(alignedPredictions(document, draft.predictions)).toBe(draft.predictions);
});
