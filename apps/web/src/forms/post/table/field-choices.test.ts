import type { CampaignDocument } from "@weighhouse/campaign/document";
import { matchColumns } from "@weighhouse/tables/match-columns";
import { plainColumn } from "@weighhouse/tables/raw-table";
import { expect, test } from "vitest";
import { fieldGroups } from "./field-choices";

const observable = (scale: string) => ({
  key: "hum",
  title: "Pitch",
  unit: "Hz",
  scale,
  conditions: [{ key: "wind", title: "Wind", unit: "m/s" }],
});
const documentOf = (scale: string) =>
  ({
    observables: [observable(scale)],
    measurands: [
      { key: "march", title: "Hum in March", observable: "hum", window: null, where: {} },
    ],
  }) as unknown as CampaignDocument;

test("every field that can be chosen is one that a table is read by", () => {
  const document = documentOf("linear");
  const fields = fieldGroups(document, "value").flatMap((group) => group.fields);
  for (const { field, words } of fields) {
    const table = { columns: [plainColumn("x")], rows: [] };
    const [match] = matchColumns(table, { document }, { columns: { x: field } });
    const problem = match?.problem ?? null;
    expect(problem?.found ?? "", `${field}: ${words}`).not.toContain("the field");
  }
});

test("fields of counts and events are offered where something is counted or occurs", () => {
  const has = (scale: string, field: string) =>
    fieldGroups(documentOf(scale), "value").some(({ fields }) =>
      fields.some((each) => each.field === field),
    );
  expect(has("linear", "count")).toBe(false);
  expect(has("count", "count")).toBe(true);
  expect(has("event", "occurred")).toBe(true);
});

test("what a column is read as can always be seen, also where it isn't offered", () => {
  const [own] = fieldGroups(documentOf("linear"), "exposure@march");
  expect(own?.fields).toEqual([{ field: "exposure@march", words: "exposure of Hum in March" }]);
});
