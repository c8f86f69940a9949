import { describe, expect, test } from "vitest";
import { MAX_ROWS } from "./limits";
import { readRecords } from "./records";

const cells = (text: string) => readRecords(text).records.map((record) => record.cells);

// RFC 4180, section 2, rules 1 to 7: the examples as printed there.
describe("RFC 4180's examples", () => {
  test("records are lines, the last with or without its break (rules 1 and 2)", () => {
    const expected = [
      ["aaa", "bbb", "ccc"],
      ["zzz", "yyy", "xxx"],
    ];
    expect(cells("aaa,bbb,ccc\r\nzzz,yyy,xxx\r\n")).toEqual(expected);
    expect(cells("aaa,bbb,ccc\r\nzzz,yyy,xxx")).toEqual(expected);
  });

  test("a header comes first (rule 3)", () => {
    expect(cells("field_name,field_name,field_name\r\naaa,bbb,ccc\r\n")[0]).toEqual([
      "field_name",
      "field_name",
      "field_name",
    ]);
  });

  test("fields may be quoted (rule 5)", () => {
    expect(cells('"aaa","bbb","ccc"\r\nzzz,yyy,xxx')[0]).toEqual(["aaa", "bbb", "ccc"]);
  });

  test("a quoted field may hold a line break (rule 6)", () => {
    expect(cells('"aaa","b\r\nbb","ccc"\r\nzzz,yyy,xxx')[0]).toEqual(["aaa", "b\r\nbb", "ccc"]);
  });

  test("a quote in a quoted field is doubled (rule 7)", () => {
    expect(cells('"aaa","b""bb","ccc"')[0]).toEqual(["aaa", 'b"bb', "ccc"]);
  });
});

describe("separators", () => {
  test.each([
    [",", "a,b\n1,2"],
    [";", "a;b\n1;2"],
    ["\t", "a\tb\n1\t2"],
    [";", '"a, with a comma";b;c\n1;2;3'],
    [",", "a\n1"],
  ])("%j is found in the header", (separator, text) => {
    expect(readRecords(text).separator).toBe(separator);
  });
});

test("a record's line is where it begins, past comments, blank lines and breaks in quotes", () => {
  const text = '\ufeff# by hand\r\n\r\nvalue,source\r\n1,"two\r\nlines"\r\n# note\r\n3,plain\r\n';
  expect(readRecords(text).records).toEqual([
    { line: 3, cells: ["value", "source"] },
    { line: 4, cells: ["1", "two\r\nlines"] },
    { line: 7, cells: ["3", "plain"] },
  ]);
});

test("a number sign inside a line is no comment", () => {
  expect(cells("a,b\n1,plate #7\n")).toEqual([
    ["a", "b"],
    ["1", "plate #7"],
  ]);
});

test("lines with separators only are no records", () => {
  expect(cells("a,b\n1,2\n,\n")).toHaveLength(2);
});

describe("refused texts say where and what", () => {
  test.each([
    ["", 1, "no line with a header"],
    ["# only a comment\n", 1, "no line with a header"],
    ["a,b\n1,\0\n", 2, "a NUL character (U+0000)"],
    // What reading UTF-16 or Latin-1 as UTF-8 leaves.
    ["\ufffd\ufffda\0,\0b\0", 1, "a NUL character (U+0000)"],
    ["a,b\n1,2\n1,\ufffd\n", 3, "a character that was lost in decoding (U+FFFD)"],
    ['a,b\n1,"never closed\n2,3\n', 2, "a quoted field that is never closed"],
    ['a,b\r\n1,"x\r\ny"\r\n2,"never closed\r\n', 4, "a quoted field that is never closed"],
    [
      'a,b\r\n1,"x\r\ny"\r\n3,x"y\r\n',
      4,
      "a quote inside a field that isn't quoted, or text after a closing quote",
    ],
  ])("%j", (text, line, found) => {
    const { problems, records } = readRecords(text);
    expect(records).toEqual([]);
    expect(problems).toEqual([expect.objectContaining({ line, found })]);
  });

  test("more rows than one file may hold", () => {
    const { problems } = readRecords(`a\n${"1\n".repeat(MAX_ROWS + 1)}`);
    expect(problems).toEqual([
      expect.objectContaining({ line: MAX_ROWS + 2, found: `more than ${MAX_ROWS} rows` }),
    ]);
  });

  test("more columns than one file may hold", () => {
    expect(readRecords(Array.from({ length: 201 }, (_, i) => `c${i}`).join(",")).problems).toEqual([
      expect.objectContaining({ found: "201 columns", allowed: "at most 200" }),
    ]);
  });
});
