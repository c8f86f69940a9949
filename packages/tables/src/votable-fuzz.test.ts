import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { MAX_CHARACTERS } from "./limits";
import { mutated } from "./testing/mutations";
import { expectSound } from "./testing/sound-table";
import { bytesOf, tableFiles, textOf } from "./testing/table-files";
import { readVotable } from "./votable";
import { readBase64, writeBase64 } from "./votable-base64";

const encoded = (text: string) => new TextEncoder().encode(text);
const firstFault = (bytes: Uint8Array) => readVotable(bytes).problems[0];

describe("XML that would take the machine, or reads what isn't the file's, is refused at once", () => {
  const laughs = Array.from(
    { length: 9 },
    (_, n) => `<!ENTITY l${n + 1} "${`&l${n};`.repeat(10)}">`,
  );
  const body = "<VOTABLE><TABLE><DESCRIPTION>&l9;</DESCRIPTION></TABLE></VOTABLE>";
  const bombs: [name: string, text: string, line: number, found: RegExp][] = [
    [
      "entities of entities",
      `<!DOCTYPE a [\n<!ENTITY l0 "ha">\n${laughs.join("\n")}\n]>${body}`,
      12,
      /DOCTYPE/,
    ],
    [
      "a file by entity",
      `<!DOCTYPE a [<!ENTITY x SYSTEM "file:///etc/passwd">]>${body}`,
      1,
      /DOCTYPE/,
    ],
    [
      "a document type of elsewhere",
      `<!DOCTYPE a SYSTEM "http://localhost/x.dtd">${body}`,
      1,
      /DOCTYPE/,
    ],
    ["an entity of nothing", body, 1, /undefined entity/],
    ["elements in elements", `<VOTABLE>${"<GROUP>".repeat(1000)}`, 1, /nested 33 deep/],
    [
      "attributes of one name without end",
      `<VOTABLE ${'a="" '.repeat(100_000)}>`,
      1,
      /duplicate attribute/,
    ],
    [
      "tables without end",
      `<VOTABLE>${"<TABLE/>".repeat(100_001)}`,
      1,
      /more than 100000 elements/,
    ],
    ["another document", "<html><body/></html>", 1, /the root element html/],
    ["another namespace", '<VOTABLE xmlns="urn:other"/>', 1, /the root element VOTABLE/],
    ["no XML", "id,value\n1,2\n", 3, /isn't well-formed/],
    ["nothing", "", 1, /isn't well-formed/],
    ["a character that XML has not", "<VOTABLE>\n\0</VOTABLE>", 2, /disallowed character/],
    ["two documents", "<VOTABLE/>\n<VOTABLE/>", 2, /isn't well-formed/],
  ];
  it.each(bombs)("%s", (_, text, line, found) => {
    const fault = firstFault(encoded(text));
    expect(fault?.found).toMatch(found);
    expect(fault).toMatchObject({ line, column: null });
  });

  it("bytes past the limit are refused before anything of them is read", () => {
    const fault = firstFault(new Uint8Array(MAX_CHARACTERS + 1));
    expect(fault).toMatchObject({ found: `${MAX_CHARACTERS + 1} bytes` });
  });
});

it("another encoding than the file says, or one that isn't known, is refused", () => {
  const text = textOf("nightly-tabledata.vot");
  const units = Array.from({ length: text.length }, (_, at) => text.charCodeAt(at));
  const latin1 = Uint8Array.from(units.map((unit) => Math.min(255, unit)));
  expect(firstFault(latin1)).toMatchObject({ line: 87, found: "bytes that aren't utf-8" });
  const utf16 = new Uint8Array(Uint16Array.from(units).buffer);
  expect(readVotable(utf16).problems).toEqual([]);
  expect(firstFault(utf16.subarray(0, 501))?.found).toMatch(/aren't utf-16le|isn't well-formed/);
  expect(firstFault(encoded(text.replace('"utf-8"', '"EBCDIC-FR"')))).toMatchObject({
    found: "text in ebcdic-fr",
  });
  expect(firstFault(encoded(text.replace('"utf-8"', '"UTF-16"')))?.found).toBe(
    "text in utf-16 by its own word only",
  );
});

it("a file cut off anywhere is refused", () => {
  for (const name of ["nightly-tabledata.vot", "nightly-binary2.vot"]) {
    const whole = bytesOf(name);
    const end = new TextDecoder().decode(whole).lastIndexOf(">");
    for (let length = 0; length < end; length += 13) {
      expect(readVotable(whole.subarray(0, length)).problems).not.toEqual([]);
    }
  }
});

it("changed files of astropy's give problems or tables, and never an exception", () => {
  fc.assert(
    fc.property(mutated(tableFiles(".vot").map(bytesOf)), (bytes) => {
      const table = readVotable(bytes);
      expectSound(table);
      if (new TextDecoder().decode(bytes).includes("STREAM")) return;
      // Its layout aside, each number of TABLEDATA stands in the text as one that reads the same.
      const said = new Set(
        new TextDecoder()
          .decode(bytes)
          .split(/[<>]|&lt;|&gt;/)
          .map((text) => Number(text.trim())),
      );
      for (const { cells } of table.rows) {
        for (const cell of cells) if (typeof cell === "number") expect(said).toContain(cell);
      }
    }),
    { numRuns: 500, seed: 1 },
  );
});

it("binary data of any bytes is read or refused", () => {
  const types = ["boolean", "bit", "unsignedByte", "short", "int", "long", "char", "unicodeChar"];
  const field = fc.tuple(
    fc.constantFrom(...types, "float", "double", "floatComplex", "doubleComplex"),
    fc.constantFrom("", "1", "3", "*", "2*", "2x2", "3x*"),
  );
  const arbitrary = fc.tuple(
    fc.array(field, { maxLength: 12 }),
    fc.uint8Array({ maxLength: 300 }),
    fc.constantFrom("BINARY", "BINARY2"),
  );
  fc.assert(
    fc.property(arbitrary, ([fields, data, kind]) => {
      const declared = fields.map(
        ([datatype, size], n) => `<FIELD name="c${n}" datatype="${datatype}" arraysize="${size}"/>`,
      );
      const base64 = btoa(String.fromCharCode(...data));
      const stream = `<DATA><${kind}><STREAM encoding="base64">${base64}</STREAM></${kind}></DATA>`;
      expectSound(
        readVotable(encoded(`<VOTABLE><TABLE>${declared.join("")}${stream}</TABLE></VOTABLE>`)),
      );
    }),
    { numRuns: 500, seed: 2 },
  );
});

it("arrays that are far more as text than as data are refused while they are read", () => {
  const field = '<FIELD name="x" datatype="bit" arraysize="60000"/>';
  const data = `<BINARY><STREAM encoding="base64">${"////".repeat(3_000_000)}</STREAM></BINARY>`;
  const file = encoded(`<VOTABLE><TABLE>${field}<DATA>${data}</DATA></TABLE></VOTABLE>`);
  expect(firstFault(file)).toMatchObject({
    line: 1119, // The first row past 64 Mi letters, of 60,000 each.
    column: "x",
    found: "arrays that are more than 67108864 characters as text",
  });
});

it("base64 of any bytes is read back as it was written, in lines of 76 letters", () => {
  fc.assert(
    fc.property(fc.uint8Array({ maxLength: 400 }), (bytes) => {
      const text = writeBase64(bytes);
      expect(text.replaceAll("\n", "")).toBe(btoa(String.fromCharCode(...bytes)));
      expect(text.split("\n").every((line) => line.length <= 76)).toBe(true);
      expect(readBase64(text)).toEqual(bytes);
    }),
    { numRuns: 200, seed: 3 },
  );
});

it("of a row in which nothing can be read, ten faults are told", () => {
  const fields = '<FIELD name="x" datatype="boolean"/>'.repeat(60);
  const data = `<BINARY><STREAM encoding="base64">${"////".repeat(20)}</STREAM></BINARY>`;
  const file = encoded(`<VOTABLE><TABLE>${fields}<DATA>${data}</DATA></TABLE></VOTABLE>`);
  const [row] = readVotable(file).rows;
  expect(row?.problems).toHaveLength(11);
  expect(row?.problems?.[10]?.found).toBe("more cells that can't be read");
});
