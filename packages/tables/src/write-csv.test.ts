import * as fc from "fast-check";
import { expect, test } from "vitest";
import { readRecords } from "./records";
import { writeCsv } from "./write-csv";

// RFC 4180, section 2: rules 1, 6 and 7 as printed there.
test("RFC 4180's examples are written as printed", () => {
  expect(writeCsv(["aaa", "bbb", "ccc"], [["zzz", "yyy", "xxx"]])).toBe(
    "aaa,bbb,ccc\r\nzzz,yyy,xxx\r\n",
  );
  expect(writeCsv(["aaa", "b\r\nbb", "ccc"], [["zzz", "yyy", "xxx"]])).toBe(
    'aaa,"b\r\nbb",ccc\r\nzzz,yyy,xxx\r\n',
  );
  expect(writeCsv(["aaa", 'b"bb', "ccc"], [])).toBe('aaa,"b""bb",ccc\r\n');
});

test("numbers read back the same, null is an empty field", () => {
  expect(writeCsv(["x", "y"], [[0.1 + 0.2, null]])).toBe("x,y\r\n0.30000000000000004,\r\n");
});

test("a number that isn't finite and a row of another length are refused", () => {
  expect(() => writeCsv(["x"], [[NaN]])).toThrow("NaN is not a finite number");
  expect(() => writeCsv(["x"], [[1, 2]])).toThrow("row 1 has 2 fields; the header has 1");
});

test("whatever is written is read back", () => {
  const text = fc.string({
    unit: fc.constantFrom("a", ",", '"', "\n", "\r\n", ";", "é"),
    minLength: 1,
  });
  const field = text.map((value) => `x${value}x`);
  fc.assert(
    fc.property(fc.array(fc.tuple(field, field), { minLength: 1 }), (rows) => {
      const read = readRecords(writeCsv(["a", "b"], rows));
      expect(read.problems).toEqual([]);
      expect(read.records.slice(1).map(({ cells }) => cells)).toEqual(rows);
    }),
  );
});
