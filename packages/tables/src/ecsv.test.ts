import { describe, expect, it } from "vitest";
import { readEcsv } from "./ecsv";
import { MAX_CELL } from "./limits";
import { faultsOf } from "./testing/sound-table";
import { astropyReads, tableFiles, textOf } from "./testing/table-files";

/** Astropy tells a NaN apart from a missing cell, and widens single precision, whose digits the file has. */
const sameAs = (name: string) => (cell: unknown) =>
  cell === "nan" ? null : name === "f4" && typeof cell === "number" ? Math.fround(cell) : cell;

const scalarFiles = tableFiles(".ecsv").filter((name) => !/subtypes|more-numbers|jd1/.test(name));

describe("a file by astropy is read as astropy reads it", () => {
  it.each(scalarFiles)("%s", (name) => {
    const table = readEcsv(textOf(name));
    const reference = astropyReads(name);
    expect(table.problems).toEqual([]);
    expect(table.rows).toHaveLength(reference.rows);
    for (const expected of reference.columns) {
      const index = table.columns.findIndex((column) => column.name === expected.name);
      const column = table.columns[index];
      const unit = expected.name === "lag" ? "d" : expected.unit; // A TimeDelta's jd are days.
      expect(column).toMatchObject({ unit, description: expected.description });
      expect(column?.timeScale).toBe(expected.time?.scale ?? null);
      expect(column?.timeFormat).toBe(expected.time?.format.replace("isot", "iso") ?? null);
      const same = sameAs(expected.name);
      expect(table.rows.map(({ cells }) => same(cells[index]))).toEqual(expected.cells.map(same));
    }
  });
});

it("a time in two parts is one Julian Date, to the last digit", () => {
  const table = readEcsv(textOf("times-jd1-jd2.ecsv"));
  expect(table.columns.map(({ name, kind, timeFormat }) => [name, kind, timeFormat])).toEqual([
    ["utc_isot", "time", "jd"],
    ["tt_mjd", "time", "jd"],
    ["tdb_jd", "time", "jd"],
  ]);
  // Python 3.11: Decimal(jd1) + Decimal(jd2), to 17 digits behind the point.
  expect(table.rows.map(({ cells }) => cells)).toEqual([
    ["2462926.75", "2462926.75080074074074071", "2462926.75080075676359953"],
    ["2457754.49999131954491272", "2457754.50079206018518529", "2457754.50079205961230466"],
    ["2451544.49999999998842604", "2451544.5007428703587965", "2451544.50074286904234233"],
  ]);
  expect(readEcsv(textOf("masked-times-jd1-jd2.ecsv")).rows.map(({ cells }) => cells)).toEqual([
    ["2462926.75", null],
    [null, "2460124.75"],
  ]);
});

it("numbers that no double holds stay text", () => {
  const { columns, rows } = readEcsv(textOf("more-numbers.ecsv"));
  expect(columns.map(({ kind }) => kind)).toEqual(Array(6).fill("number"));
  expect(rows.map(({ cells }) => cells)).toEqual([
    [0, 0, 0, -128, 0.1, 0.1],
    ["18446744073709551615", 4294967295, 65535, 127, 65500, Math.PI],
    ["9223372036854775808", 7, 7, 7, 6e-8, "1e+4000"],
  ]);
});

it("objects and arrays of changing length are refused by name", () => {
  expect(readEcsv(textOf("subtypes.ecsv")).problems).toMatchObject([
    { column: "ragged", found: "arrays of changing length (subtype int64[null])" },
    { column: "thing", found: "objects (subtype json)" },
  ]);
});

it("what is left out or not understood is said", () => {
  expect(readEcsv(textOf("quantities.ecsv")).notes).toEqual([
    "where is of the class astropy.coordinates.sky_coordinate.SkyCoord: its parts are columns of their own",
  ]);
  expect(readEcsv(textOf("numbers.ecsv")).notes).toEqual([
    "column f8: 1 NaN, taken as missing",
    "column f4: 1 NaN, taken as missing",
  ]);
  expect(readEcsv(textOf("times-jd1-jd2.ecsv")).notes).toEqual([
    "column tdb_jd._delta_tdb_tt is astropy's own beside a time, and left out",
  ]);
});

const small = (body: string, header = "") =>
  [
    "# %ECSV 1.0",
    "# ---",
    "# datatype:",
    "# - {name: a, datatype: int16}",
    "# - {name: b, datatype: string}",
    ...(header ? [header] : []),
    body,
  ].join("\n");

it("columns may be called what YAML takes for a number or a truth", () => {
  const text =
    "# %ECSV 1.0\n# ---\n# datatype:\n# - {name: no, datatype: float64}\n# - {name: 1e5, datatype: bool}\nno 1e5\n1.5 True\n";
  expect(readEcsv(text)).toMatchObject({
    columns: [{ name: "no" }, { name: "1e5" }],
    rows: [{ cells: [1.5, true] }],
  });
});

it("runs of spaces part once, quotes hold anything, comments and blank lines are no rows", () => {
  const table = readEcsv(small('a b\n1    x\n\n# 9 y\n 2 "p ""q""\n\n# r"\r\n3 ""\n'));
  expect(table.rows).toEqual([
    { line: 7, cells: [1, "x"] },
    { line: 10, cells: [2, 'p "q"\n\n# r'] },
    { line: 13, cells: [3, null] },
  ]);
  expect(table.notes).toEqual(["1 comment line among the rows left out"]);
});

it("version 0.9, as older files say, is read the same", () => {
  const text = small("a b\n1 x\n");
  expect(readEcsv(text.replace("ECSV 1.0", "ECSV 0.9"))).toEqual(readEcsv(text));
});

it("a file without a last line end may be cut off, which is said", () => {
  expect(readEcsv(small("a b\n1 x")).notes).toEqual([
    "the last line isn't ended: the file may be cut off",
  ]);
});

const faults: [
  fault: string,
  text: string,
  line: number | null,
  column: string | null,
  found: string,
][] = [
  ["no header", "a b\n1 x\n", 1, null, "a first line without # %ECSV"],
  ["another version", "# %ECSV 2.0\n# ---\na\n1\n", 1, null, "%ECSV 2.0"],
  [
    "a header without columns",
    "# %ECSV 1.0\n# ---\n# delimiter: ','\na\n1\n",
    null,
    null,
    "a header without a `datatype` list",
  ],
  [
    "a column without a type",
    "# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a}\na\n1\n",
    null,
    null,
    "column 1 of the header without its name or datatype",
  ],
  [
    "a name twice",
    "# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: bool}\n# - {name: a, datatype: bool}\na a\n1 1\n",
    null,
    null,
    "two columns named a",
  ],
  ["another delimiter", small("a|b\n1|x\n", "# delimiter: '|'"), null, null, 'the delimiter "|"'],
  [
    "broken YAML",
    "# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a\na\n1\n",
    4,
    null,
    "a header that isn't YAML: Flow map in block collection must be sufficiently indented and end with a }",
  ],
  [
    "an alias of nothing",
    small("a b\n", "# meta: *x"),
    2,
    null,
    "a header that can't be read: Unresolved alias (the anchor must be set before the alias): x",
  ],
  [
    "an unknown type",
    "# %ECSV 1.0\n# ---\n# datatype:\n# - {name: a, datatype: object}\na\n1\n",
    null,
    "a",
    "the datatype object",
  ],
  ["no names", small(""), 6, null, "the end of the file"],
  ["another name", small("a c\n1 x\n"), 6, null, "the name c of column 2"],
  ["a name too many", small("a b c\n1 x\n"), 6, null, "the name c of column 3"],
  ["a cell too few", small("a b\n1\n"), 7, null, "1 cell"],
  ["a cell too many", small("a b\n1 x y\n"), 7, null, "3 cells"],
  ["an integer out of range", small("a b\n32768 x\n"), 7, "a", "32768"],
  ["a fraction in an integer", small("a b\n1.5 x\n"), 7, "a", "1.5"],
  ["another notation", small("a b\n0x10 x\n"), 7, "a", "0x10"],
  ["an open quote", small('a b\n1 x\n2 "y\n3 z\n'), 8, null, "a quoted cell that is never closed"],
  ["a quote inside", small('a b\n1 x"y\n'), 7, null, "a quote inside a cell that isn't quoted"],
  ["text behind a quote", small('a b\n1 "x"y\n'), 7, null, "text after a closing quote"],
  ["a NUL", small("a b\n1 x\0\n"), 7, null, "a NUL character (U+0000)"],
  [
    "a lost character",
    small("a b\n1 \ufffd\n"),
    7,
    null,
    "a character that was lost in decoding (U+FFFD)",
  ],
  [
    "a cell that is too long",
    small(`a b\n1 ${"x".repeat(MAX_CELL + 1)}\n`),
    7,
    null,
    `a cell of ${MAX_CELL + 1} characters`,
  ],
  [
    "201 columns",
    `# %ECSV 1.0\n# ---\n# datatype:\n${Array.from({ length: 201 }, (_, n) => `# - {name: c${n}, datatype: bool}\n`).join("")}`,
    null,
    null,
    "201 columns",
  ],
  [
    "a part that isn't there",
    small(
      "a b\n1 x\n",
      "# meta: {__serialized_columns__: {t: {__class__: Time, value: {name: q}}}}",
    ),
    null,
    "q",
    "a part called q in the header's __serialized_columns__",
  ],
];

describe("what can't be read is refused with its place", () => {
  it.each(faults)("%s", (_, text, line, column, found) => {
    const [fault] = faultsOf(readEcsv(text));
    expect(fault).toMatchObject({ line, column, found });

    expect(fault?.allowed).toMatch(/\S/);
  });

  it("a faulty row leaves the others as they are", () => {
    const table = readEcsv(small("a b\nz x\n2 y\n"));
    expect(table.problems).toEqual([]);
    expect(table.rows).toEqual([
      {
        line: 7,
        cells: [null, "x"],
        problems: [{ column: "a", found: "z", allowed: "an integer from -32768 to 32767" }],
      },
      { line: 8, cells: [2, "y"] },
    ]);
  });
});
