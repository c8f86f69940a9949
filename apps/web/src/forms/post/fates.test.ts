import { expect, test } from "vitest";
import {
  countWords,
  postLabel,
  reasonsOf,
  rowsToShow,
  valueWords,
  type PreviewedRow,
} from "./fates";

function row(line: number, fate: PreviewedRow["fate"], more: object = {}): PreviewedRow {
  return {
    line,
    id: `m:${line}`,
    fate,
    problems: [],
    conflict: null,
    measurement: null,
    notes: [],
    ...more,
  };
}

test("rows that stop the posting come first, then the file's order", () => {
  const rows = [row(1, "new"), row(2, "refused"), row(3, "alreadyThere"), row(4, "conflict")];
  expect(rowsToShow(rows, { stopping: 9, others: 1 }).map(({ line }) => line)).toEqual([2, 4, 1]);
});

test("a count names only the fates that there are", () => {
  expect(countWords({ new: 3, alreadyThere: 0, conflict: 1, refused: 0 })).toBe(
    "3 new, 1 in conflict",
  );
  expect(countWords({ new: 0, alreadyThere: 0, conflict: 0, refused: 0 })).toBe("no rows");
});

test("a refused row says its column, what was found and what is allowed", () => {
  const problems = [{ column: "sd", found: "-1", allowed: "a number above 0" }];
  expect(reasonsOf(row(2, "refused", { problems }))).toEqual([
    "sd: Found -1; allowed is a number above 0.",
  ]);
});

test("a conflict says which field differs, and how", () => {
  const conflict = { field: "value", there: 1.5, posted: 1.6 };
  expect(reasonsOf(row(2, "conflict", { conflict }))[0]).toContain(
    "another value: 1.5 there, 1.6 here",
  );
});

test("a value is shown rounded to its uncertainty, in the unit it is posted in", () => {
  const measurement = { value: 1.98, sd: 0.1779, unit: null };
  expect(valueWords(row(1, "new", { measurement }), "arcsec")).toBe("1.98 ± 0.18\u00a0arcsec");
  expect(
    valueWords(row(1, "new", { measurement: { ...measurement, unit: "mas" } }), "arcsec"),
  ).toBe("1.98 ± 0.18\u00a0mas");
});

test("the button says how many it will enter", () => {
  expect(postLabel(1)).toBe("Post 1 measurement");
  expect(postLabel(2)).toBe("Post 2 measurements");
});
