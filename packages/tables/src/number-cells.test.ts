import { expect, test } from "vitest";
import { readNumber } from "./number-cells";

test.each([
  ["0.000", 0],
  ["-0e5", -0],
  ["5e-324", 5e-324],
  ["1e-400", null],
  ["0.1e-350", null],
  ["1e400", null],
])("%s is read as %s: what a double can't hold is no number, nor zero", (text, number) => {
  expect(readNumber(text, "point")).toBe(number);
});
