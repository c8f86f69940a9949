import { campaignDocumentSchema } from "@weighhouse/campaign/document";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import { warnedPlace } from "./warned-place";

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
  hypotheses: [{ key: "h", title: "Tide", predictions: [] }],
  measurements: [{ id: "a", measurand: "m", value: 1, sd: 1 }],
}) as CampaignDocument;

test("a warning leads to the quantity or the hypothesis that it is about", () => {
  const quantity = { title: "Height", path: "quantities/m" };
  expect(warnedPlace("/measurands/0", document)).toEqual(quantity);
  expect(warnedPlace("/measurements/0", document)).toEqual(quantity);
  expect(warnedPlace("/hypotheses/0/predictions/1", document)).toEqual({
    title: "Tide",
    path: "hypotheses/h",
  });
});

test("a warning about no one place, or about one that is not there, leads nowhere", () => {
  expect(warnedPlace("/pairs/0", document)).toBeNull();
  expect(warnedPlace("", document)).toBeNull();
  expect(warnedPlace("/measurands/7", document)).toBeNull();
});
