import * as fc from "fast-check";
import { expect, it } from "vitest";
import { writeCsv } from "@weighhouse/tables/write-csv";
import { readCells } from "./csv-cells";

it("reads RFC 4180's own examples", () => {
  // RFC 4180 section 2, rules 1, 5, 6 and 7.
  expect(readCells("aaa,bbb,ccc\r\nzzz,yyy,xxx\r\n")).toEqual([
    { line: 1, cells: ["aaa", "bbb", "ccc"] },
    { line: 2, cells: ["zzz", "yyy", "xxx"] },
  ]);
  expect(readCells('"aaa","b\r\nbb","ccc"\r\nzzz,yyy,xxx\r\n')).toEqual([
    { line: 1, cells: ["aaa", "b\r\nbb", "ccc"] },
    { line: 3, cells: ["zzz", "yyy", "xxx"] },
  ]);
  expect(readCells('"aaa","b""bb","ccc"\r\n')).toEqual([
    { line: 1, cells: ["aaa", 'b"bb', "ccc"] },
  ]);
});

it("reads what the export writes, whatever the texts", () => {
  const rows = fc.array(fc.tuple(fc.string({ unit: "binary" }), fc.string(), fc.string()));
  fc.assert(
    fc.property(rows, (texts) => {
      const read = readCells(writeCsv(["a", "b", "c"], texts));
      expect(Array.isArray(read) && read.map(({ cells }) => cells)).toEqual([
        ["a", "b", "c"],
        ...texts,
      ]);
    }),
  );
});

it.each([
  ["a quote that isn't closed", 'a,"b\r\n', "line 1: found a field"],
  ["text after a quote", 'a\r\n"b"c\r\n', "line 2: found a field"],
  ["a quote inside a bare field", 'a"b\r\n', "line 1: found a field"],
  ["a line end of another kind", "a\nb\n", "line 1: found a field"],
  ["a last line without an end", "a\r\nb", "line 2: found a field"],
  ["a last field without an end", "a\r\nb,", "line 2: found no line end"],
])("%s is named by its line", (_, text, words) => {
  expect(readCells(text)).toMatch(new RegExp(`^${words}`));
});
