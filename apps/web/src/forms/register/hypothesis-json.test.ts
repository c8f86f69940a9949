import { campaignDocumentSchema, type CampaignDocument } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import { hypothesisFromJson } from "./hypothesis-json";

const document = campaignDocumentSchema.parse({
  format: "weighhouse-campaign/1",
  campaign: { key: "bed", title: "Bed" },
  observables: [{ key: "heat", title: "Heat", unit: "mW/m^2", scale: "linear" }],
  measurands: [
    { key: "heat-a", observable: "heat", reference: { family: "uniform", lower: 0, upper: 9 } },
  ],
}) as CampaignDocument;

const hypothesis = {
  key: "warm",
  title: "Warm",
  registeredAt: "2031-01-01T00:00:00Z",
  predictions: [{ measurand: "heat-a", expected: 3, tolerance: { family: "normal", sd: 1 } }],
};

function linesOf(value: unknown): string[] {
  const read = hypothesisFromJson(JSON.stringify(value), document);
  return read.ok ? [] : read.lines;
}

test("a hypothesis as a campaign document holds it fills the form; its date counts for nothing", () => {
  const read = hypothesisFromJson(JSON.stringify(hypothesis), document);
  expect(read.ok && read.hypothesis).toMatchObject({ key: "warm", weight: 1, claimed: null });
});

test("text that is no JSON says so", () => {
  const read = hypothesisFromJson("{", document);
  expect(read.ok ? [] : read.lines[0]).toMatch(/^Not JSON: /);
});

test("everything wrong is said with its place", () => {
  expect(
    linesOf({ ...hypothesis, key: "W", weight: -1 }).map((line) => line.split(":")[0]),
  ).toEqual(["/key", "/weight"]);
});

test("what the form could not show is refused, so that nothing pasted is dropped in silence", () => {
  const parameters = [{ key: "q", prior: { family: "fixed", value: 1 } }];
  const [first] = hypothesis.predictions;
  expect(linesOf({ ...hypothesis, parameters })).toEqual([
    "/parameters: found 1; allowed none on this form",
  ]);
  expect(linesOf({ ...hypothesis, predictions: [{ ...first, measurand: "heat-b" }] })).toEqual([
    "/predictions/0/measurand: found heat-b; allowed heat-a",
  ]);
  const relative = { family: "normal", sd: 0.1, relative: true };
  expect(linesOf({ ...hypothesis, predictions: [{ ...first, tolerance: relative }] })[0]).toMatch(
    /^\/predictions\/0\/tolerance: /,
  );
});
