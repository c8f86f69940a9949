import { assert, double, property, tuple } from "fast-check";
import { describe, expect, test } from "vitest";
import { rangeOf } from "./expression-range";
import { compiled, texts } from "./testing/expressions";

const side = tuple(
  double({ min: -3, max: 3, noNaN: true }),
  double({ min: 0, max: 2, noNaN: true }),
  double({ min: 0, max: 1, noNaN: true }),
);

/** A name's bounds, and a value between them. */
function bounded([lower, width, part]: [number, number, number]) {
  const upper = lower + width;
  return { range: { lower, upper }, value: Math.min(upper, lower + part * width) };
}

describe("bounds of an expression", () => {
  test("hold every value inside the box, and are none only where there is no value", () => {
    let told = 0;
    assert(
      property(texts, side, side, side, (text, ...sides) => {
        const [x, y, z] = sides.map(bounded) as [
          ReturnType<typeof bounded>,
          ReturnType<typeof bounded>,
          ReturnType<typeof bounded>,
        ];
        const expression = compiled(text, ["x", "y", "z"]);
        const value = expression.evaluate({ x: x.value, y: y.value, z: z.value });
        const range = rangeOf(
          expression.tree,
          new Map([
            ["x", x.range],
            ["y", y.range],
            ["z", z.range],
          ]),
        );
        if (range === null) told += 1;
        if (Number.isNaN(value)) return;
        expect(range).not.toBeNull();
        // Rounded to nearest at each of some dozen steps, of which powers enlarge what is lost.
        const slack = Number.isFinite(value) ? 1e-9 * Math.abs(value) + 1e-12 : 0;
        expect(range!.lower).toBeLessThanOrEqual(value + slack);
        expect(range!.upper).toBeGreaterThanOrEqual(value - slack);
      }),
      { numRuns: 5000, seed: 20310308 },
    );
    expect(told).toBeGreaterThan(100);
  });

  test.each([
    ["x + y", [1, 5]],
    ["x - y", [-2, 2]],
    ["x * -y", [-6, -0]],
    ["1 / x", [1 / 2, 1]],
    ["1 / y", [-Infinity, Infinity]],
    ["x ^ y", [1, 8]],
    ["(x - 2) ^ 2", [0, 1]],
    ["sqrt(x - 1)", [0, 1]],
    ["abs(y - 1)", [0, 2]],
    ["table(grid, 10 * x)", [4, 9]],
    ["x > 0 ? y : 7", [0, 3]],
    ["x > 5 ? y : 7", [7, 7]],
    ["min(x, y)", [0, 2]],
  ])("%s for x in 1 to 2 and y in 0 to 3: %j (by hand)", (text, [lower, upper]) => {
    const range = rangeOf(
      compiled(text, ["x", "y"]).tree,
      new Map([
        ["x", { lower: 1, upper: 2 }],
        ["y", { lower: 0, upper: 3 }],
      ]),
    );
    expect(range!.lower).toBeCloseTo(lower!, 14);
    expect(range!.upper).toBeCloseTo(upper!, 14);
  });

  test.each(["sqrt(-x)", "log(-x)", "asin(x + 1)", "table(grid, -x)", "(-x) ^ 0.5", "0 / (0 * x)"])(
    "%s has none for x in 1 to 2",
    (text) => {
      const range = new Map([["x", { lower: 1, upper: 2 }]]);
      expect(rangeOf(compiled(text, ["x"]).tree, range)).toBeNull();
    },
  );
});
