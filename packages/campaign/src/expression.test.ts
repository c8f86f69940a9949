import { expect, test, describe } from "vitest";
import { compileExpression, constantExpected } from "./expression";

function valueOf(text: string, scope: Record<string, number> = {}): number {
  const compiled = compileExpression(text, { names: new Set(Object.keys(scope)), tables });
  if (!compiled.ok) throw new Error(JSON.stringify(compiled.faults));
  return compiled.expression.evaluate(scope);
}

function faultsOf(text: string, names: string[] = ["x"]) {
  const compiled = compileExpression(text, { names: new Set(names), tables });
  return compiled.ok ? [] : compiled.faults;
}

const tables = new Map([
  ["grid", { at: [[0, 10, 20, 40]], values: [9, 7, 5, 4] }],
  [
    "plane",
    {
      at: [
        [0, 1],
        [0, 2],
      ],
      values: [
        [0, 2],
        [10, 12],
      ],
    },
  ],
]);

// Expected values are those of the arithmetic that the campaign format spells out; JavaScript's own
// operators stand beside them as the other computation.
describe("arithmetic", () => {
  test.each([
    ["1 + 2 * 3", 7],
    ["8 / 2 * 4", 16],
    ["8 - 2 - 3", 3],
    ["2 ^ 3 ^ 2", 512],
    ["-2 ^ 2", -4],
    ["2 ^ -1", 0.5],
    ["-x ^ 2", -9],
    ["(2 + x) * 4", 20],
    ["2 - -3", 5],
    [".5 + 5. + 1e3 + 2E-2", 1005.52],
    ["5.^2", 25],
    ["x > 2 ? 10 : 20", 10],
    ["x >= 4 ? 10 : 20", 20],
    ["(x < 4) ? (x <= 2 ? 1 : 2) : 3", 2],
    ["min(3, 1, 2) + max(1, x)", 4],
    ["abs(-x) + sqrt(16)", 7],
    ["log(e ^ 2) + log10(1000)", 5],
    ["sin(90 * deg) + cos(pi) + tan(0)", 0],
    ["asin(1) + acos(1) + atan(0) + atan2(1, 0)", Math.PI],
    ["exp(0)", 1],
    ["table(grid, 5)", 8],
    ["table(grid, 40)", 4],
    ["table(plane, 0.5, 1)", 6],
  ])("%s is %d", (text, value) => {
    expect(valueOf(text, { x: 3 })).toBeCloseTo(value, 12);
  });

  test("a power of a negative exponent binds from the right", () => {
    expect(valueOf("2^-1^2")).toBe(0.5);
  });

  test("names that the parser has words for are names like any other", () => {
    const scope = { to: 1, in: 2, mod: 3, not: 4, and: 5, or: 6, xor: 7, end: 8, i: 9, true: 10 };
    expect(valueOf(Object.keys(scope).join(" + "), scope)).toBe(55);
  });

  test("outside its table a look-up has no value", () => {
    expect(valueOf("table(grid, 41)")).toBeNaN();
    expect(valueOf("table(plane, 0.5, -1)")).toBeNaN();
  });

  test("names in use are told, constants and functions are not among them", () => {
    const compiled = compileExpression("x * sin(pi) + table(grid, y)", {
      names: new Set(["x", "y", "z"]),
      tables,
    });
    expect(
      compiled.ok && [[...compiled.expression.names], [...compiled.expression.tables]],
    ).toEqual([["x", "y"], ["grid"]]);
  });
});

describe("what is refused", () => {
  test.each([
    ["2 x", "a multiplication without *"],
    ["2(3)", "a multiplication without *"],
    ["(1)(2)", "a multiplication without *"],
    ["+x", "the sign + in front"],
    ["5 % 2", '"%" at character 3'],
    ["x!", '"!" at character 2'],
    ["x = 3", '"=" at character 3'],
    ["x == 3", '"=" at character 3'],
    ["x.y", '"." at character 2'],
    ["x[1]", '"[" at character 2'],
    ["'a'", '"\'" at character 1'],
    ["x; 2", '";" at character 2'],
    ["x < 2", "the comparison <"],
    ["1 < x < 2 ? 1 : 2", "no single comparison before ?"],
    ["x ? 1 : 2", "no single comparison before ?"],
    ["1 : 2", "RangeNode in the expression"],
    ["y + 1", "the unknown name y"],
    ["sinh(x)", "the unknown function sinh"],
    ["x(2)", "the unknown function x"],
    ["sin", "the function sin without its values"],
    ["sin(1, 2)", "sin of 2 values"],
    ["atan2(1)", "atan2 of 1 values"],
    ["table(nothing, 1)", "the unknown table nothing"],
    ["table(grid, 1, 2)", "2 coordinates for the table grid"],
    ["table(1, 2)", "the unknown table"],
    ["1 +", "a text that doesn't parse at the end"],
    ["(1", "a text that doesn't parse at the end"],
    ["1 + * 2", "a text that doesn't parse at character 5"],
    ["1e999", "the number 1e999 at character 1"],
    ["   ", "an empty text"],
    ["0x10", "a multiplication without *"],
    ["μ", '"μ" at character 1'],
  ])("%s", (text, found) => {
    expect(faultsOf(text).map((fault) => fault.found)).toContain(found);
  });

  test("every unknown name of an expression is told at once", () => {
    expect(faultsOf("a + b * sinh(c)").map((fault) => fault.found)).toEqual([
      "the unknown name a",
      "the unknown name b",
      "the unknown function sinh",
    ]);
  });

  test("limits of length, depth and nodes hold before the parser sees the text", () => {
    expect(faultsOf(" ".repeat(1999) + "1")).toEqual([]);
    expect(faultsOf(" ".repeat(2000) + "1")[0]?.found).toBe("2001 characters");
    expect(faultsOf("(".repeat(64) + "1" + ")".repeat(64))).toEqual([]);
    expect(faultsOf("(".repeat(65) + "1" + ")".repeat(65))[0]?.found).toBe(
      "parentheses 65 deep at character 65",
    );
    expect(faultsOf("1" + "+1".repeat(199))).toEqual([]);
    expect(faultsOf("1" + "+1".repeat(200))[0]?.found).toBe("401 nodes");
    expect(valueOf("-".repeat(398) + "1")).toBe(1);
    expect(faultsOf("-".repeat(1900) + "1")[0]?.found).toBe("1901 nodes");
    expect(valueOf("1^".repeat(199) + "1")).toBe(1);
    expect(valueOf("1>2?1:".repeat(79) + "7")).toBe(7);
  });
});

test("an expectation without names has a value; one with names has none", () => {
  const table = { key: "grid", in: ["d"], at: [[0, 1]], values: [0, 2] };
  expect(constantExpected({ expected: 3 })).toBe(3);
  expect(constantExpected({ expected: "2 * pi" })).toBe(2 * Math.PI);
  expect(constantExpected({ expected: "table(grid, 0.5)" }, [table])).toBe(1);
  expect(constantExpected({ expected: "2 * q0" })).toBeNull();
  expect(constantExpected({ expected: null })).toBeNull();
});
