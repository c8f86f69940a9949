import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import { expect, test } from "vitest";
import { differences, sameDataAs } from "./same-data";

const measurement = (more: object) =>
  ({
    id: "a",
    facility: "weir",
    sameData: "plate-3",
    conditions: {},
    extra: {},
    ...more,
  }) as never as Measurement;

test("all that was made of the same data stands together, the measurement itself too", () => {
  const one = measurement({});
  const again = measurement({ id: "b" });
  const other = measurement({ id: "c", sameData: "plate-4" });
  const none = measurement({ id: "d", sameData: null });
  const document = { measurements: [one, other, again, none] } as never as CampaignDocument;
  expect(sameDataAs(document, one)).toEqual([one, again]);
  expect(sameDataAs(document, none)).toEqual([]);
});

test("a difference says the field and both sides; absent and null are the same", () => {
  const here = measurement({ status: "provisional", unit: null, extra: { method: "aperture" } });
  const there = measurement({ status: "final", extra: { method: "profile", seeing: 1.2 } });
  expect(differences(here, there)).toEqual([
    { field: "status", here: "provisional", there: "final" },
    { field: "method", here: "aperture", there: "profile" },
    { field: "seeing", here: null, there: "1.2" },
  ]);
});

test("shared errors differ by their coefficients", () => {
  const loaded = (coefficient: number) => measurement({ shared: [{ error: "zero", coefficient }] });
  expect(differences(loaded(1), loaded(0.5))).toEqual([
    { field: "shared", here: "zero × 1", there: "zero × 0.5" },
  ]);
  expect(differences(loaded(1), measurement({ shared: [] }))[0]).toMatchObject({ there: null });
});
