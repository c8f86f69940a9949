import { expect, test } from "vitest";
import { problemLine } from "./problem";

test("a problem is one line, whatever it quotes", () => {
  const code = "wrong-dimension";
  const problem = {
    pointer: "/a\n/b",
    code,
    found: "the unit \u0007kg\u2028",
    allowed: "m",
  } as const;
  expect(problemLine(problem)).toBe("/a\\u000a/b: found the unit \\u0007kg\\u2028; allowed m");
  expect(problemLine({ ...problem, pointer: "", found: "x" })).toBe(
    "(document): found x; allowed m",
  );
});
