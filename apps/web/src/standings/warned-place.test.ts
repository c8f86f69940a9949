import { campaignDocumentSchema } from "@weighhouse/campaign/document";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import { warnedPlaces } from "./warned-place";

const document = campaignDocumentSchema.parse({
  format: "weighhouse-campaign/1",
  campaign: { key: "c", title: "C" },
  observables: [{ key: "o", title: "O", unit: "m", scale: "linear" }],
  measurands: [
    {
      key: "m",
      title: "Height",
      observable: "o",
      reference: { family: "uniform", lower: 0, upper: 1 },
    },
  ],
  hypotheses: [
    {
      key: "h",
      title: "Tide",
      predictions: [{ measurand: "m", expected: 1, tolerance: { family: "normal", sd: 1 } }],
    },
  ],
  measurements: [{ id: "a", measurand: "m", value: 1, sd: 1 }],
}) as CampaignDocument;

const quantity = { key: "m", title: "Height", path: "quantities/m" };
const hypothesis = { key: "h", title: "Tide", path: "hypotheses/h" };

test("a warning leads to the quantity or the hypothesis that it is about", () => {
  expect(warnedPlaces("/measurands/0", document)).toEqual([quantity]);
  expect(warnedPlaces("/measurements/0/unit", document)).toEqual([quantity]);
  expect(warnedPlaces("/hypotheses/0", document)).toEqual([hypothesis]);
});

test("a warning about a prediction leads to its hypothesis and its quantity", () => {
  expect(warnedPlaces("/hypotheses/0/predictions/0", document)).toEqual([hypothesis, quantity]);
});

test("a warning about no one place, or about one that is not there, leads nowhere", () => {
  expect(warnedPlaces("/pairs/0", document)).toEqual([]);
  expect(warnedPlaces("", document)).toEqual([]);
  expect(warnedPlaces("/measurands/7", document)).toEqual([]);
});
