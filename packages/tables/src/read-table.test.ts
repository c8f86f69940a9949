import { describe, expect, test } from "vitest";
import { decodeText } from "./decode";
import { MAX_BYTES, MAX_LINE } from "./limits";
import { readTable, readText } from "./read-table";
import { readDrafts } from "./testing/harbour";

const bytes = (text: string) => new TextEncoder().encode(text);
const utf16 = (text: string, littleEndian: boolean) => {
  const view = new DataView(new ArrayBuffer(2 * text.length + 2));
  [..."\ufeff", ...text].forEach((one, index) =>
    view.setUint16(2 * index, one.charCodeAt(0), littleEndian),
  );
  return new Uint8Array(view.buffer);
};
const cells = (table: ReturnType<typeof readTable>) =>
  table.rows.map((row) => ("cells" in row ? row.cells : row.draft));

describe("encodings", () => {
  test.each([
    ["UTF-8", bytes("a,b\n1,é\n")],
    ["UTF-8 with a byte order mark", bytes("\ufeffa,b\n1,é\n")],
    ["UTF-16 LE", utf16("a,b\n1,é\n", true)],
    ["UTF-16 BE", utf16("a,b\n1,é\n", false)],
  ])("%s is read", (_, file) => {
    const table = readTable("t.csv", file);
    expect(table.problems).toEqual([]);
    expect(table.columns.map(({ name }) => name)).toEqual(["a", "b"]);
    expect(cells(table)).toEqual([["1", "é"]]);
  });

  test("Latin-1 is refused at its line, since nothing says that it is", () => {
    const file = Uint8Array.from([...bytes("a,b\n1,x\n2,"), 0xe9, ...bytes("\n")]);
    expect(readTable("t.csv", file).problems).toEqual([
      {
        line: 3,
        column: null,
        found: "bytes that aren't UTF-8",
        allowed: "text in UTF-8, or in UTF-16 with a byte order mark; save the file in one of them",
      },
    ]);
  });

  test("UTF-16 that isn't whole is refused", () => {
    const file = utf16("a,b\n", true).subarray(0, 7);
    expect(readTable("t.csv", file).problems).toMatchObject([
      { found: "bytes that aren't UTF-16 (LE)" },
    ]);
  });

  test.each([
    ["gzip", [0x1f, 0x8b, 8, 0], "a file compressed with gzip"],
    ["ZIP", [0x50, 0x4b, 3, 4], "a ZIP archive, or a spreadsheet"],
    ["FITS", [...bytes("SIMPLE  =                    T")], "a FITS file"],
    ["PDF", [...bytes("%PDF-1.7")], "a PDF"],
  ])("%s is named", (_, start, found) => {
    expect(readTable("t", Uint8Array.from(start)).problems).toMatchObject([{ line: 1, found }]);
  });

  test("NUL bytes are refused at their line", () => {
    expect(readTable("t.csv", bytes("a,b\n1,\0\n")).problems).toMatchObject([
      { line: 2, found: "a NUL character (U+0000)" },
    ]);
  });
});

describe("what is too much is refused before it is taken apart", () => {
  test("a file of more bytes than one may have", () => {
    const file = new Uint8Array(MAX_BYTES + 1);
    expect(decodeText(file).problem).toMatchObject({ found: `${MAX_BYTES + 1} bytes` });
  });

  test.each([
    ["a cell", `a,b\n1,${"x".repeat(MAX_LINE)}\n2,3\n`],
    ["a number", `a,b\n${"1".repeat(MAX_LINE + 1)},2\n`],
    ["separators", `a,b\n${",".repeat(MAX_LINE + 1)}\n`],
    ["quotes", `a,b\n${'"'.repeat(MAX_LINE + 1)}\n`],
    ["NDJSON", `{"value":1}\n{"value":"${"x".repeat(MAX_LINE)}"}\n`],
  ])("a line of a million letters: %s", (_, text) => {
    expect(readText("t", text).problems).toMatchObject([
      { line: 2, found: `a line of more than ${MAX_LINE} characters` },
    ]);
  });

  test("more cells than one file may have", () => {
    const text = `a,b\n${`${",".repeat(500_000)}\n`.repeat(33)}`;
    expect(readText("t.csv", text).problems).toMatchObject([{ found: "16500001 commas" }]);
  });
});

describe("the format is told by the content", () => {
  test.each([
    ["csv", "value,sd\n1,2\n"],
    ["ecsv", "# %ECSV 1.0\n# ---\n# datatype:\n# - {name: value, datatype: float64}\nvalue\n1.0\n"],
    ["votable", '<?xml version="1.0"?>\n<VOTABLE version="1.4"><RESOURCE/></VOTABLE>'],
    ["ndjson", '{"value":1}\n{"value":2}\n'],
    ["document", '{"format":"weighhouse-campaign/1",\n"measurements":[]}'],
    ["document", '[{"value":1}]'],
    ["document", '{"measurand":"flux-may","value":1}'],
  ])("%s", (format, text) => {
    expect(readTable("file", bytes(text)).format).toBe(format);
  });

  test("one line of JSON is NDJSON by its name", () => {
    expect(readText("night.ndjson", '{"value":1}').format).toBe("ndjson");
  });
});

describe("headers", () => {
  test("a comment line with as many words is one, where the first line is of numbers", () => {
    const read = readDrafts("# night 4\n# MJD,flux,flux_err\n60310.25,8.1,0.6\n");
    expect(read.rows.map(({ line, draft }) => [line, draft?.value, draft?.sd])).toEqual([
      [3, 8.1, 0.6],
    ]);
    expect(read.notes.slice(0, 2)).toEqual([
      "Line 2, a comment, is read as the header.",
      "1 comment line is left out.",
    ]);
  });

  test("without one, a table of numbers is refused", () => {
    expect(readText("t.csv", "# night 4\n1,2,3\n4,5,6\n").problems).toEqual([
      {
        line: 2,
        column: null,
        found: "a first line of numbers",
        allowed: "a header line with the columns' names, then a line for each measurement",
      },
    ]);
  });

  test("cells parted by spaces are told by lines of one length", () => {
    const read = readDrafts("# MJD flux  flux_err\n60310.25   8.1 0.6\n60311.25  -0.4 0.6\n");
    expect(read.rows.map(({ draft }) => draft?.value)).toEqual([8.1, -0.4]);
    expect(read.notes).toContain("Cells are parted by spaces.");
    expect(readText("t", "a note\nof three words\n").columns).toHaveLength(1);
  });
});

describe("units under the header", () => {
  test("are told apart surely, and said", () => {
    const read = readDrafts("night,flux,e_flux,T\n,mJy,mJy,K\n1,8.1,0.6,280\n");
    expect(read.notes).toContain("Line 2 is read as the columns' units.");
    expect(read.rows).toHaveLength(1);
    expect(read.rows[0]?.draft).toMatchObject({ value: 8.1, unit: "mJy", extra: { "T [K]": 280 } });
  });

  test("with a ruled line under them, as catalogues in text have it", () => {
    const read = readDrafts("flux\te_flux\nmJy\tmJy\n------\t------\n8.1\t0.6\n");
    expect(read.rows.map(({ line, draft }) => [line, draft?.unit])).toEqual([[4, "mJy"]]);
  });

  test("whatever stands between a header and a ruled line is units", () => {
    const text = "obsDate\tl_flux\tflux\te_flux\ndate\t\tADU\tADU\n----\t-\t---\t---\n";
    const table = readText("t.tsv", `${text}2031-05-04T00:00:00Z\t\t8.1\t0.6\n`);
    expect(table.columns.map(({ unit }) => unit)).toEqual([null, null, "ADU", "ADU"]);
    expect(table.rows.map(({ line }) => line)).toEqual([4]);
  });

  test.each([
    ["a row of data", "value,sd\n1,2\n3,4\n", 2],
    ["units where the header has some", "value [Jy],sd\n1,2\n3,4\n", 2],
    ["texts that could be units", "value,sd,batch\n1,2,m\n3,4,s\n", 2],
  ])("%s is none", (_, text, rows) => {
    expect(readDrafts(text).rows).toHaveLength(rows);
  });

  test("a first row of units without numbers below is a row like the others", () => {
    const read = readText("t.csv", "a,b\nm,s\nx,y\n");
    expect(read.rows).toHaveLength(2);
  });
});

describe("NDJSON and documents", () => {
  test("rows are drafts already; unknown properties are refused by name", () => {
    const read = readDrafts(
      '{"value":8.1,"sd":0.6}\n\n{"measurand":"flux-may","value":9,"sdd":1}\n{"value":1,"value":2}\n[1]\n{"value":\n',
      { defaults: { facility: "north-raft" } },
    );
    expect(read.rows.map(({ line, draft }) => [line, draft])).toEqual([
      [1, { measurand: "flux-may", facility: "north-raft", value: 8.1, sd: 0.6 }],
      [3, null],
      [4, null],
      [5, null],
      [6, null],
    ]);
    expect(read.rows.slice(1).map(({ problems }) => problems[0]?.found)).toEqual([
      'the property "sdd"',
      'the member "value" a second time',
      "a list",
      "the end at character 10",
    ]);
  });

  test("a document's measurements are drafts, without the dates that the ledger gives", () => {
    const read = readDrafts(
      JSON.stringify({
        format: "weighhouse-campaign/1",
        measurements: [
          { id: "a", measurand: "flux-may", value: 1, sd: 1, postedAt: "2031-05-05T00:00:00Z" },
        ],
        correlations: [{ a: "a", b: "b", coefficient: 0.5 }],
      }),
    );
    expect(read.rows[0]?.draft).toEqual({ id: "a", measurand: "flux-may", value: 1, sd: 1 });
    expect(read.rows[0]?.notes).toEqual(["postedAt is left out: posting gives it."]);
    expect(read.notes).toHaveLength(2);
  });

  test.each([
    ["{", "the end at line 1, column 2"],
    ['{"a":1}', "no list of measurements"],
    ["[1]", null],
  ])("%s is refused with what was found", (text, found) => {
    const table = readText("t.json", text);
    if (found === null) expect(readDrafts(text).rows[0]?.problems).toHaveLength(1);
    else expect(table.problems).toMatchObject([{ found }]);
  });
});
