import type { CampaignDocument } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import {
  emptyMeasurement,
  measurementContent,
  measurementDraft,
  measurementSchema,
} from "./measurement-draft";
import { problemFields } from "./problem-fields";

const document = {
  measurands: [{ key: "glow" }],
  facilities: [{ key: "east" }, { key: "west" }],
} as unknown as CampaignDocument;

test("what there is only one of is chosen already", () => {
  expect(emptyMeasurement(document)).toMatchObject({ measurand: "glow", facility: "" });
});

test("a filled form is a measurement as the server reads it, without an id of its own", () => {
  const filled = {
    ...emptyMeasurement(document),
    observedAt: "2031-03-01 09:30",
    value: "1.7",
    sd: "0.2",
    shared: [{ error: "zero", coefficient: "" }],
  };
  const content = measurementSchema.parse(measurementContent(filled));
  const draft = measurementDraft(content);
  expect(draft).toMatchObject({
    measurand: "glow",
    observedAt: "2031-03-01T09:30:00Z",
    value: 1.7,
    sd: 0.2,
    shared: [{ error: "zero", coefficient: 1 }],
  });
  expect(draft).not.toHaveProperty("id");
  expect(draft).not.toHaveProperty("facility");
});

test("a value without an uncertainty is refused at its field", () => {
  const content = measurementContent({ ...emptyMeasurement(document), value: "1" });
  const paths = measurementSchema
    .safeParse(content)
    .error?.issues.map(({ path }) => path.join("."));
  expect(paths).toEqual(["sd"]);
});

test("a refused row's problems go to their fields, the others stay in the preview", () => {
  const row = {
    line: 1,
    id: null,
    fate: "refused" as const,
    conflict: null,
    measurement: null,
    notes: [],
    problems: [
      { column: "observedAt", found: "2031", allowed: "a time inside the window" },
      { column: "team", found: "a", allowed: "your own" },
    ],
  };
  expect(problemFields(row)).toEqual([
    { field: "observedAt", message: "Found 2031; allowed is a time inside the window." },
  ]);
});
