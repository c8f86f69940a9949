import { campaignDocumentSchema, type CampaignDocument } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import { problemsInCampaign } from "./check-in-campaign";

const document = campaignDocumentSchema.parse({
  format: "weighhouse-campaign/1",
  campaign: { key: "bed", title: "Bed" },
  observables: [{ key: "heat", title: "Heat", unit: "mW/m^2", scale: "log10" }],
  measurands: [
    { key: "heat-a", observable: "heat", reference: { family: "uniform", lower: 1, upper: 9 } },
  ],
  hypotheses: [{ key: "warm", title: "Warm", predictions: [] }],
}) as CampaignDocument;

const pointers = async (part: object, replaces?: string) =>
  (await problemsInCampaign(document, { list: "hypotheses", part, replaces })).map(
    ({ pointer }) => pointer,
  );

test("a part that fits its campaign has no problem, and claims of its own are none", async () => {
  const predictions = [{ measurand: "heat-a", expected: 3 }];
  expect(await pointers({ key: "cold", title: "Cold", predictions, claimed: null })).toEqual([]);
});

test("what only the campaign shows stands at its place within the part", async () => {
  const predictions = [
    { measurand: "heat-a", expected: -3 },
    { measurand: "heat-b", expected: 3 },
  ];
  expect(await pointers({ key: "cold", title: "Cold", predictions })).toEqual([
    "/predictions/0/expected",
    "/predictions/1/measurand",
  ]);
});

test("a taken key is refused, but for the part that is being amended", async () => {
  const part = { key: "warm", title: "Warm again", predictions: [] };
  expect(await pointers(part)).toEqual(["/key"]);
  expect(await pointers(part, "warm")).toEqual([]);
});
