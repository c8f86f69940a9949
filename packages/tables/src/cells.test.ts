import { describe, expect, test } from "vitest";
import { manyQuantities, readDrafts } from "./testing/harbour";

type Options = Parameters<typeof readDrafts>[1];
const row = (header: string, cells: string, options: Options = {}) =>
  readDrafts(`${header}\n${cells}\n`, options).rows[0];

describe("decimal marks", () => {
  test("commas are told from the data as a whole, and said", () => {
    const read = readDrafts("value;sd\n8,1;0,6\n1,234;0,5\n7;1\n");
    expect(read.rows.map(({ draft }) => [draft?.value, draft?.sd])).toEqual([
      [8.1, 0.6],
      [1.234, 0.5],
      [7, 1],
    ]);
    expect(read.notes).toEqual([
      "Cells are parted by semicolons.",
      "Decimal commas: 8,1 in line 2 is read as 8.1.",
    ]);
  });

  test("both in one table are refused, with both places", () => {
    expect(readDrafts("value;sd\n8,1;0.6\n").problems).toEqual([
      {
        line: 2,
        column: "value",
        found: '"8,1" beside "0.6" in line 2',
        allowed: "one decimal mark in the whole table, and no marks between thousands",
      },
    ]);
    expect(readDrafts("value;sd\n1.234,5;1\n").problems).toHaveLength(0);
    expect(row("value;sd", "1.234,5;1")?.problems).toEqual([
      { column: "value", found: '"1.234,5"', allowed: "a number" },
    ]);
  });

  test("commas that may part thousands are asked about, never guessed", () => {
    expect(readDrafts("value;sd\n1,234;2\n").problems).toEqual([
      {
        line: 2,
        column: "value",
        found: '"1,234", which may be a thousand or a decimal comma',
        allowed:
          "numbers without marks between thousands; or choose the decimal comma for the table",
      },
    ]);
    expect(row("value;sd", "1,234;2", { choices: { decimal: "comma" } })?.draft?.value).toBe(1.234);
    expect(row("value;sd", "1,234;2", { choices: { decimal: "point" } })?.problems).toEqual([
      { column: "value", found: '"1,234"', allowed: "a number" },
    ]);
  });

  test("in a Julian Date too", () => {
    expect(row("JD;value;sd", "2460310,75;8,1;1")?.draft?.observedAt).toBe("2024-01-01T06:00:00Z");
  });
});

describe("missing cells", () => {
  test.each(["", "nan", "NaN", "--", "N/A", "null", "…"])("%j is nothing there", (mark) => {
    const read = readDrafts(`value,plus,minus,sd\n8.1,${mark},${mark},0.6\n`);
    expect(read.rows[0]?.draft).toEqual({ measurand: "flux-may", value: 8.1, sd: 0.6 });
    if (mark !== "") {
      expect(read.notes).toContain(
        `Column plus: "${mark}" is read as nothing there (1 cell, the first in line 2).`,
      );
    }
  });

  test("a row without any result gives none, and it is said", () => {
    const read = readDrafts("id,value,sd\na,--,--\nb,8.1,0.6\nc,,\n");
    expect(read.rows.map(({ line }) => line)).toEqual([3]);
    expect(read.notes.at(-1)).toBe(
      "2 rows have no result, and nothing is posted for it: line 2, 4.",
    );
  });

  test("an uncertainty without its value is refused", () => {
    expect(row("value,sd", "nan,0.6")?.problems).toEqual([
      { column: "value", found: "nothing, beside an uncertainty", allowed: "a value" },
    ]);
  });

  test("NA may be a batch's name, and stays one", () => {
    expect(row("value,sd,batch", "8.1,0.6,NA")?.draft?.batch).toBe("NA");
  });
});

describe("limits", () => {
  const at5 = { choices: { limits: { sigmas: 5 } } };

  test.each([
    ["<8.1", { limit: "upper", value: 8.1 }],
    ["< 8.1", { limit: "upper", value: 8.1 }],
    ["≤8.1", { limit: "upper", value: 8.1 }],
    [">8.1", { limit: "lower", value: 8.1 }],
    ["<-1e3", { limit: "upper", value: -1000 }],
  ])("%s in a value's cell", (cell, expected) => {
    expect(row("value", cell, at5)?.draft).toEqual({
      measurand: "flux-may",
      sigmas: 5,
      ...expected,
    });
  });

  test.each([
    // On a magnitude scale the fainter has the larger number; an upper limit in words is on brightness.
    ["glow,l_glow", "21.3,>", "fainter"],
    ["glow,l_glow", "21.3,<", "brighter"],
    ["glow,l_glow", "21.3,upper", "fainter"],
    ["glow,l_glow", "21.3,fainter", "fainter"],
    ["glow,upper_limit", "21.3,true", "fainter"],
    ["glow", ">21.3", "fainter"],
    ["level,l_level", "21.3,<", "upper"],
    ["level,level_upper_limit", "21.3,1", "upper"],
    ["level,l_level", "21.3,>", "lower"],
  ])("%s: %s is %s", (header, cells, limit) => {
    const dated = row(`date-obs,${header}`, `2031-05-04T00:00:00,${cells}`, {
      document: manyQuantities,
      ...at5,
    });
    expect(dated?.problems).toEqual([]);
    expect(dated?.draft).toMatchObject({ limit, value: 21.3 });
  });

  test("what they are said at comes from the row, else from a choice, and is asked for otherwise", () => {
    expect(row("value,confidence", "<8.1,0.95", at5)?.draft).toMatchObject({ confidence: 0.95 });
    expect(row("value,conf [%]", "<8.1,95", at5)?.draft).toMatchObject({ confidence: 0.95 });
    expect(row("value", "<8.1", at5)?.notes).toContain(
      "The limit is taken at sigmas 5, as chosen for the table.",
    );
    expect(row("value,sd", "<8.1,0")?.problems).toEqual([
      {
        column: "value",
        found: "a limit that nothing says the confidence of",
        allowed: "a column confidence or sigmas, or one of them chosen for all limits of the table",
      },
    ]);
  });

  test("a flag and a sign that contradict each other are refused", () => {
    expect(row("value,l_value,sigmas", "<8.1,>,3")?.problems).toEqual([
      {
        column: "value",
        found: '"<8.1" beside another limit in l_value',
        allowed: "one kind of limit",
      },
    ]);
  });

  test("a flag without its value is refused", () => {
    expect(row("value,l_value,sigmas", ",<,3")?.problems).toEqual([
      { column: "value", found: "nothing, beside a limit flag", allowed: "a value" },
    ]);
  });

  test("a confidence beside a value that is no limit is kept as extra, and said", () => {
    const read = row("value,sd,confidence", "8.1,0.6,0.683");
    expect(read?.draft?.extra).toEqual({ confidence: 0.683 });
    expect(read?.notes).toContain(
      "Column confidence says nothing of a value that is no limit, and is kept as extra.",
    );
  });
});

describe("values", () => {
  test("below zero stay values", () => {
    expect(row("flux,e_flux", "-0.4,1")?.draft).toMatchObject({ value: -0.4, sd: 1 });
  });

  test.each([
    ["8.1±0.6", { value: 8.1, sd: 0.6 }],
    ["8.1 +/- 0.6", { value: 8.1, sd: 0.6 }],
    ["-8.1e-3 ± 6e-4", { value: -0.0081, sd: 0.0006 }],
    ["8.1 +0.5 -0.3", { value: 8.1, plus: 0.5, minus: 0.3 }],
    ["8.1+0.5-0.3", { value: 8.1, plus: 0.5, minus: 0.3 }],
    ["8.1 +0.5/-0.3", { value: 8.1, plus: 0.5, minus: 0.3 }],
  ])("with their uncertainty in one cell: %s", (cell, expected) => {
    expect(row("value", cell)?.draft).toEqual({ measurand: "flux-may", ...expected });
  });

  test.each(["8.1(6)", "8.1±", "~8", "8.1 0.6", "8.1+-0.6-0.3", "1e+5-3"])(
    "%s is refused as it stands",
    (cell) => {
      expect(row("value", cell)?.problems).toEqual([
        { column: "value", found: JSON.stringify(cell), allowed: "a number" },
      ]);
    },
  );

  test("lower errors below zero are taken without the sign where all are so", () => {
    const read = readDrafts("value,plus,minus\n8.1,0.5,-0.3\n8.2,0.5,-0.2\n");
    expect(read.rows.map(({ draft }) => draft?.minus)).toEqual([0.3, 0.2]);
    expect(read.notes).toHaveLength(1);
    const mixed = readDrafts("value,plus,minus\n8.1,0.5,-0.3\n8.2,0.5,0.2\n");
    expect(mixed.rows[0]?.problems).toEqual([
      { column: "minus", found: "-0.3", allowed: "a number above 0" },
    ]);
  });
});
