import { assert, double, property, record } from "fast-check";
import { describe, expect, test } from "vitest";
import { designOf, linearParameters } from "./expression-linearity";
import { compiled, texts } from "./testing/expressions";

const names = ["p", "q", "r", "x"];
const candidates = ["p", "q", "r"];

/** A power law in depth, a sum of lines and so on: worked by hand. */
describe("a parameter is linear when its derivative names no linear one", () => {
  test.each([
    ["p + q * x", ["p", "q"]],
    ["p * q", ["p"]],
    ["q * p", ["p"]],
    ["p * q + r", ["p", "r"]],
    ["(p + q) * r", ["p", "q"]],
    ["r / q + p", ["p", "r"]],
    ["p ^ 1 + q ^ 2", ["p"]],
    ["p * (10 / x) ^ q", ["p"]],
    ["p ^ 2 / p", []],
    ["p - p", ["p"]],
    ["-p + 3 * -q", ["p", "q"]],
    ["p * exp(-x / q)", ["p"]],
    ["p > 0 ? q : r", ["q", "r"]],
    ["x > 0 ? p : q * r", ["p", "q"]],
    ["p > 0 ? 1 : 2", []],
    ["abs(p) + min(q, 1) + r", ["r"]],
    ["p * table(grid, x) + table(grid, q)", ["p"]],
    ["table(plane, p, q)", []],
    ["p * abs(x)", ["p"]],
    ["10 ^ (p + q * x)", []],
    ["x", []],
  ])("%s: %j", (text, linear) => {
    expect(linearParameters(compiled(text, names), candidates, false)).toEqual(linear);
  });

  test.each([
    ["10 ^ (p + q * x)", ["p", "q"]],
    ["exp(p) * x ^ q", ["p", "q"]],
    ["10 ^ p * r", ["p"]],
    ["sqrt(10 ^ p) / 10 ^ q", ["p", "q"]],
    ["(2 * 10 ^ p) ^ 3", ["p"]],
    ["(2 * 10 ^ p) ^ q", ["p"]],
    ["p * q", []],
    ["10 ^ p + 10 ^ q", []],
    ["p + x", []],
    ["(x > 2 ? x : 3) ^ p", ["p"]],
    ["10 ^ (p > 0 ? q : 1)", ["q"]],
  ])("on log10, %s: %j", (text, linear) => {
    expect(linearParameters(compiled(text, names), candidates, true)).toEqual(linear);
  });

  test("the order of the candidates decides which of a product is taken", () => {
    expect(linearParameters(compiled("p * q", names), ["q", "p"], false)).toEqual(["q"]);
  });
});

describe("a design", () => {
  test("is base and slopes without the linear names", () => {
    const expression = compiled("p * (10 / x) ^ q + r", names);
    const { base, slopes } = designOf(expression, ["p", "r"], false);
    expect([...slopes.keys()]).toEqual(["p", "r"]);
    expect([...slopes.get("p")!.names]).toEqual(["x", "q"]);
    expect(base.evaluate({ q: 2, x: 5 })).toBe(0);
    expect(slopes.get("p")!.evaluate({ q: 2, x: 5 })).toBe(4);
    expect(slopes.get("r")!.evaluate({})).toBe(1);
  });

  const value = double({ min: 0.1, max: 2, noNaN: true });
  test.each([false, true])("adds up to the expression (on log10: %s)", (inLog10) => {
    let found = 0;
    assert(
      property(texts, record({ x: value, y: value, z: value }), (text, scope) => {
        const expression = compiled(inLog10 ? `10 ^ (${text})` : text, ["x", "y", "z"]);
        const linear = linearParameters(expression, ["x", "y", "z"], inLog10);
        const { base, slopes } = designOf(expression, linear, inLog10);
        for (const part of [base, ...slopes.values()]) {
          for (const name of linear) expect(part.names.has(name)).toBe(false);
        }
        let sum = base.evaluate(scope);
        let size = Math.abs(sum);
        for (const [name, slope] of slopes) {
          const term = slope.evaluate(scope) * scope[name as "x"];
          sum += term;
          size += Math.abs(term);
        }
        const whole = expression.evaluate(scope);
        const scored = inLog10 ? Math.log10(whole) : whole;
        if (!Number.isFinite(scored) || !Number.isFinite(size) || linear.length === 0) return;
        found += 1;
        // Each of at most some dozen operations rounds once; 10^u loses |u| ln 10 of it more.
        expect(Math.abs(sum - scored)).toBeLessThanOrEqual(1e3 * Number.EPSILON * (size + 1));
      }),
      { numRuns: 2000, seed: 20310303 },
    );
    expect(found).toBeGreaterThan(150);
  });
});
