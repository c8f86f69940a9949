import { describe, expect, it } from "vitest";
import { MAX_CELL } from "./limits";
import { faultsOf } from "./testing/sound-table";
import { astropyReads, bytesOf, tableFiles, textOf } from "./testing/table-files";
import { readVotable } from "./votable";

/** Astropy gives no text as an empty one, widens single precision, and arrays as arrays. */
const sameAs = (name: string) => (cell: unknown) => {
  if (cell === "") return null;
  if (name === "f4" && typeof cell === "number") return Math.fround(cell);
  return Array.isArray(cell) ? cell.flat(9).join(" ") : cell;
};

const files = tableFiles(".vot").filter((name) => name !== "failed.vot");

describe("a file by astropy is read as astropy reads it", () => {
  it.each(files)("%s", (name) => {
    const table = readVotable(bytesOf(name));
    const reference = astropyReads(name);
    expect(table.problems).toEqual([]);
    expect(table.rows).toHaveLength(reference.rows);
    expect(table.columns.map((column) => column.name)).toEqual(
      reference.columns.map((column) => column.name),
    );
    for (const [index, expected] of reference.columns.entries()) {
      const { unit, description, ucd = null } = expected;
      expect(table.columns[index]).toMatchObject({ unit, description, ucd });
      const same = sameAs(expected.name);
      expect(table.rows.map(({ cells }) => same(cells[index]))).toEqual(expected.cells.map(same));
    }
  });
});

it("a file in BINARY2 says what the same file in TABLEDATA does, to the digit", () => {
  const [text, binary, binary2] = ["tabledata", "binary", "binary2"].map((serialization) =>
    readVotable(bytesOf(`numbers-${serialization}.vot`)).rows.map(({ cells }) => cells),
  );
  expect(binary).toEqual(binary2);
  expect(binary2).toEqual(text);
});

it("a time is in its TIMESYS's scale, from its origin, counted at its place", () => {
  const { columns } = readVotable(bytesOf("time-systems.vot"));
  const times = columns.map(({ kind, timeScale, timeFormat, timeOrigin, timeReference }) => [
    kind,
    timeScale,
    timeFormat,
    timeOrigin,
    timeReference,
  ]);
  expect(times).toEqual([
    ["time", "tdb", "mjd", null, "barycenter"],
    ["time", "tt", "jd", null, "topocenter"],
    ["time", "utc", "jd", 2455197.5, "topocenter"],
    ["time", "utc", "iso", null, "topocenter"],
    ["number", null, null, null, null],
  ]);
});

it("of several tables the first with rows is read, and the others are named", () => {
  expect(readVotable(bytesOf("several.vot")).notes).toEqual([
    "table night was read; not read: empty, log",
  ]);
});

it("an error of the service that made the file is the problem", () => {
  expect(readVotable(bytesOf("failed.vot")).problems).toMatchObject([
    { found: "an error of the service that made the file: the service has no such column: glwo" },
  ]);
});

const votable = (
  inside: string,
  attributes = 'version="1.4" xmlns="http://www.ivoa.net/xml/VOTable/v1.3"',
) =>
  new TextEncoder().encode(
    `<?xml version="1.0"?>\n<VOTABLE ${attributes}>\n<RESOURCE>\n${inside}\n</RESOURCE>\n</VOTABLE>\n`,
  );
const table = (fields: string, data: string) =>
  votable(`<TABLE>\n${fields}\n<DATA>${data}</DATA>\n</TABLE>`);
const rows = (fields: string, ...cells: string[]) =>
  table(fields, `<TABLEDATA>\n${cells.map((one) => `<TR>${one}</TR>\n`).join("")}</TABLEDATA>`);
const stream = (fields: string, kind: "BINARY" | "BINARY2", bytes: number[]) =>
  table(
    fields,
    `<${kind}><STREAM encoding="base64">${btoa(String.fromCharCode(...bytes))}</STREAM></${kind}>`,
  );
const cellsOf = (bytes: Uint8Array) => readVotable(bytes).rows.map(({ cells }) => cells);

describe("what astropy doesn't write", () => {
  const x = '<FIELD name="x" datatype="int"/>';

  it("no namespace, or a prefix for it, is as good; elements of others are left out", () => {
    const inside = `<RESOURCE><TABLE>${x}<DATA><TABLEDATA><TR><TD>7</TD></TR></TABLEDATA></DATA></TABLE></RESOURCE>`;
    const plain = new TextEncoder().encode(`<VOTABLE>${inside}</VOTABLE>`);
    expect(cellsOf(plain)).toEqual([[7]]);
    const prefixed = inside.replaceAll(/<(\/?)/g, "<$1v:");
    const other = '<o:TABLE xmlns:o="urn:other"><FIELD name="y" datatype="char"/></o:TABLE>';
    expect(
      cellsOf(
        new TextEncoder().encode(
          `<v:VOTABLE xmlns:v="http://www.ivoa.net/xml/VOTable/v1.3">${other}${prefixed}</v:VOTABLE>`,
        ),
      ),
    ).toEqual([[7]]);
  });

  it("missing by BINARY2's bits alone, in the order of the fields", () => {
    const nine = Array.from(
      { length: 9 },
      (_, n) => `<FIELD name="c${n}" datatype="unsignedByte"/>`,
    ).join("");
    const bytes = [0b01000000, 0b10000000, 1, 2, 3, 4, 5, 6, 7, 8, 9];
    expect(cellsOf(stream(nine, "BINARY2", bytes))).toEqual([[1, null, 3, 4, 5, 6, 7, 8, null]]);
  });

  it("a null value is one by its value, in text and in binary", () => {
    const field =
      '<FIELD name="x" datatype="int"><VALUES null="-99"/></FIELD><FIELD name="y" datatype="double"><VALUES null="-99"/></FIELD>';
    expect(cellsOf(rows(field, "<TD>-99</TD><TD>-99.0</TD>", "<TD>-9</TD><TD> 1 </TD>"))).toEqual([
      [null, null],
      [-9, 1],
    ]);
    const bytes = [0xff, 0xff, 0xff, 0x9d, 0xc0, 0x58, 0xc0, 0, 0, 0, 0, 0];
    expect(cellsOf(stream(field, "BINARY", bytes))).toEqual([[null, null]]);
  });

  it("truths in all their spellings, and bits", () => {
    const field = '<FIELD name="x" datatype="boolean"/>';
    const texts = ["T", "t", "1", "true", "True", "F", "f", "0", "false", "?", ""];
    expect(cellsOf(rows(field, ...texts.map((text) => `<TD>${text}</TD>`))).flat()).toEqual([
      true,
      true,
      true,
      true,
      true,
      false,
      false,
      false,
      false,
      null,
      null,
    ]);
    const bytes = [..."Tt1Ff0? "].map((letter) => letter.charCodeAt(0));
    expect(cellsOf(stream(field, "BINARY", [...bytes, 0])).flat()).toEqual([
      true,
      true,
      true,
      false,
      false,
      false,
      null,
      null,
      null,
    ]);
    // By the standard a scalar bit is its byte's first; astropy sets another.
    expect(
      cellsOf(stream('<FIELD name="x" datatype="bit"/>', "BINARY", [0x80, 8, 0])).flat(),
    ).toEqual([true, true, false]);
    expect(
      cellsOf(
        stream('<FIELD name="x" datatype="bit" arraysize="10"/>', "BINARY", [0xa5, 0x40]),
      ).flat(),
    ).toEqual(["1010010101"]);
  });

  it("integers in hexadecimal, text in CDATA and entities, white space around cells", () => {
    const fields = `${x}<FIELD name="t" datatype="char" arraysize="*"/>`;
    expect(cellsOf(rows(fields, "<TD> 0x1F\n</TD><TD><![CDATA[<a> & ]]>&#946;&lt;</TD>"))).toEqual([
      [31, "<a> & \u03b2<"],
    ]);
  });

  it("text in BINARY ends at NUL; its length may change; UTF-8 and UTF-16", () => {
    const fields =
      '<FIELD name="a" datatype="char" arraysize="4"/><FIELD name="b" datatype="char" arraysize="9*"/><FIELD name="c" datatype="unicodeChar" arraysize="*"/>';
    const bytes = [0x61, 0x62, 0, 0x63, 0, 0, 0, 2, 0xc3, 0xa9, 0, 0, 0, 2, 0xd8, 0x3c, 0xdf, 0x19];
    expect(cellsOf(stream(fields, "BINARY", bytes))).toEqual([["ab", "\u00e9", "\u{1f319}"]]);
  });

  it("Latin-1 and UTF-16 are read where the file says so", () => {
    const text = `<?xml version="1.0" encoding="ISO-8859-1"?><VOTABLE><TABLE><FIELD name="\u00b5" datatype="char" arraysize="*"/><DATA><TABLEDATA><TR><TD>\u00e9</TD></TR></TABLEDATA></DATA></TABLE></VOTABLE>`;
    const latin1 = Uint8Array.from([...text].map((letter) => letter.charCodeAt(0)));
    expect(readVotable(latin1)).toMatchObject({
      columns: [{ name: "\u00b5" }],
      rows: [{ cells: ["\u00e9"] }],
    });
    const units = `\ufeff${text.replace("ISO-8859-1", "UTF-16")}`;
    const utf16 = new Uint8Array(
      Uint16Array.from([...units].map((letter) => letter.charCodeAt(0))).buffer,
    );
    expect(readVotable(utf16)).toMatchObject({ rows: [{ cells: ["\u00e9"] }] });
  });

  it("what a service left out, parameters and second columns of a name are said", () => {
    const inside =
      '<INFO name="QUERY_STATUS" value="OVERFLOW"/><PARAM name="gain" datatype="float" unit="adu" value="1.5"/>';
    const file = votable(
      `${inside}<TABLE nrows="3">${x}${x}<DATA><TABLEDATA><TR><TD>1</TD><TD>2</TD></TR></TABLEDATA></DATA></TABLE>`,
    );
    expect(readVotable(file)).toMatchObject({
      columns: [{ name: "x" }, { name: "x_2" }],
      notes: [
        "the service that made the file left rows out (QUERY_STATUS OVERFLOW)",
        "parameter gain: 1.5 adu",
        "a second column x is called x_2 here",
        "the file declares 3 rows and has 1",
      ],
    });
  });

  it("an xtype tells a time, its scale left open", () => {
    const fields =
      '<FIELD name="t" datatype="char" arraysize="*" xtype="timestamp"/><FIELD name="m" datatype="double" xtype="mjd"/>';
    expect(
      readVotable(rows(fields, "<TD>2031-03-01T00:00:00</TD><TD>1</TD>")).columns,
    ).toMatchObject([
      { kind: "time", timeFormat: "iso", timeScale: null },
      { kind: "time", timeFormat: "mjd", timeScale: null },
    ]);
  });

  const faults: [
    fault: string,
    bytes: Uint8Array,
    line: number | null,
    column: string | null,
    found: RegExp,
  ][] = [
    ["a number out of range", rows(x, "<TD>1</TD>", "<TD>2147483648</TD>"), 8, "x", /^2147483648$/],
    ["a word for a number", rows(x, "<TD>one</TD>"), 7, "x", /^one$/],
    ["a cell too few", rows(x + x, "<TD>1</TD>"), 7, null, /^1 cell$/],
    ["a cell too many", rows(x, "<TD>1</TD><TD>1</TD>"), 7, null, /^2 cells$/],
    ["an element in a cell", rows(x, "<TD><b>1</b></TD>"), 7, null, /an element b in a row/],
    ["a cell in base64", rows(x, '<TD encoding="base64">MQ==</TD>'), 7, null, /a cell in base64/],
    [
      "a cell that is too long",
      rows(x, `<TD>${"1".repeat(MAX_CELL + 1)}</TD>`),
      7,
      null,
      /a cell of more than \d+ characters/,
    ],
    [
      "an unknown type",
      rows('<FIELD name="x" datatype="int128"/>', "<TD>1</TD>"),
      null,
      "x",
      /int128/,
    ],
    ["no type", rows('<FIELD name="x"/>', "<TD>1</TD>"), null, "x", /no datatype/],
    [
      "a strange arraysize",
      rows('<FIELD name="x" datatype="int" arraysize="1e9"/>', "<TD>1</TD>"),
      null,
      "x",
      /the arraysize 1e9/,
    ],
    [
      "a huge arraysize",
      rows('<FIELD name="x" datatype="int" arraysize="99999x99999"/>', "<TD>1</TD>"),
      null,
      "x",
      /the arraysize/,
    ],
    ["rows of no fields", rows("", "<TD>1</TD>"), null, null, /no TABLE with a FIELD/],
    ["no table", votable(""), null, null, /no TABLE/],
    [
      "data cut within a row",
      stream(x, "BINARY", [0, 0, 0, 1, 0, 0]),
      2,
      "x",
      /the data's end, 2 bytes on/,
    ],
    [
      "a negative length",
      stream('<FIELD name="x" datatype="char" arraysize="*"/>', "BINARY", [255, 255, 255, 255]),
      1,
      "x",
      /a cell of -1 values/,
    ],
    [
      "a length past the end",
      stream('<FIELD name="x" datatype="double" arraysize="*"/>', "BINARY", [0, 1, 0, 0]),
      1,
      "x",
      /the data's end, 0 bytes on/,
    ],
    [
      "bytes that are no text",
      stream('<FIELD name="x" datatype="char" arraysize="2"/>', "BINARY", [0xc3, 0x28]),
      1,
      "x",
      /bytes that aren't text/,
    ],
    [
      "a byte that is no truth",
      stream('<FIELD name="x" datatype="boolean"/>', "BINARY2", [0, 65]),
      1,
      "x",
      /no truth value/,
    ],
    [
      "rows of no bytes",
      stream('<FIELD name="x" datatype="char" arraysize="0"/>', "BINARY", [1]),
      1,
      null,
      /rows of no bytes/,
    ],
    [
      "base64 cut off",
      table(x, '<BINARY><STREAM encoding="base64">AAAAB</STREAM></BINARY>'),
      6,
      null,
      /base64 that is cut off/,
    ],
    [
      "base64 without its end",
      table(x, '<BINARY><STREAM encoding="base64">AAAABA</STREAM></BINARY>'),
      6,
      null,
      /base64 that is cut off/,
    ],
    [
      "a letter that isn't base64's",
      table(x, '<BINARY><STREAM encoding="base64">AAA-</STREAM></BINARY>'),
      6,
      null,
      /"-" in base64/,
    ],
    [
      "compressed data",
      table(x, '<BINARY><STREAM encoding="gzip"/></BINARY>'),
      6,
      null,
      /encoding gzip/,
    ],
    [
      "data elsewhere",
      table(x, '<BINARY><STREAM href="file:///etc/passwd"/></BINARY>'),
      6,
      null,
      /data at another address/,
    ],
    ["FITS", table(x, '<FITS><STREAM encoding="base64"/></FITS>'), 6, null, /data in FITS/],
    ["201 columns", rows(x.repeat(201), "<TD>1</TD>"), 5, null, /more than 200 columns/],
  ];
  it.each(faults)("%s is refused with its place", (_, bytes, line, column, found) => {
    const [fault] = faultsOf(readVotable(bytes));
    expect(fault).toMatchObject({ line, column });
    expect(fault?.found).toMatch(found);
    expect(fault?.allowed).toMatch(/\S/);
  });
});

it("versions of 1.1 to 1.4 are one to the reader", () => {
  const [newest, ...others] = ["tabledata", "1.1", "1.2", "1.3"].map((name) =>
    readVotable(bytesOf(`nightly-${name}.vot`)),
  );
  expect(textOf("nightly-1.1.vot")).toContain('version="1.1"');
  for (const other of others)
    expect(other.rows.map(({ cells }) => cells)).toEqual(newest?.rows.map(({ cells }) => cells));
});
