import { expect, test } from "vitest";
import { inWindowOrder } from "./table-rows";

const measurand = (key: string, from: string | null, to: string | null = null) => ({
  key,
  window: { from, to },
});

test("quantities stand in the order of their windows, open ones first, ties as declared", () => {
  const rows = inWindowOrder([
    measurand("may", "2031-05-01T00:00:00Z"),
    measurand("always-a", null),
    measurand("march-long", "2031-03-01T00:00:00Z", "2031-06-01T00:00:00Z"),
    measurand("march-short", "2031-03-01T00:00:00Z", "2031-04-01T00:00:00Z"),
    measurand("always-b", null),
  ]);
  expect(rows.map((row) => row.key)).toEqual([
    "always-a",
    "always-b",
    "march-short",
    "march-long",
    "may",
  ]);
});
