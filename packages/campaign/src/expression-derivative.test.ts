import { assert, double, property, record } from "fast-check";
import { describe, expect, test } from "vitest";
import { compileSlots } from "./expression";
import { compiled, texts } from "./testing/expressions";

/**
 * What a derivative by x is and should be. The other computation is Ridders's extrapolated central
 * difference (Adv. Eng. Software 4, 1982), with its own estimate of its error.
 */
function numerical(f: (x: number) => number, x: number): { value: number; error: number } {
  const SHRINK = 1.4;
  let step = 0.02 * Math.max(1, Math.abs(x));
  let row = [(f(x + step) - f(x - step)) / (2 * step)];
  let best = { value: row[0]!, error: Infinity };
  for (let i = 1; i < 12; i++) {
    step /= SHRINK;
    const next = [(f(x + step) - f(x - step)) / (2 * step)];
    let factor = SHRINK * SHRINK;
    for (let j = 1; j <= i; j++) {
      next.push((next[j - 1]! * factor - row[j - 1]!) / (factor - 1));
      factor *= SHRINK * SHRINK;
      const error = Math.max(Math.abs(next[j]! - next[j - 1]!), Math.abs(next[j]! - row[j - 1]!));
      if (error <= best.error) best = { value: next[j]!, error };
    }
    row = next;
  }
  return best;
}

const scopes = record({
  x: double({ min: 0.05, max: 3, noNaN: true }),
  y: double({ min: -2, max: 2, noNaN: true }),
  z: double({ min: 0.1, max: 1, noNaN: true }),
});

describe("a derivative", () => {
  test("is the slope that differences find, for any expression where they find one", () => {
    let compared = 0;
    assert(
      property(texts, scopes, (text, scope) => {
        const expression = compiled(text, ["x", "y", "z"]);
        const found = expression.derivative("x").evaluate(scope);
        const slope = numerical((x) => expression.evaluate({ ...scope, x }), scope.x);
        // Steps, poles and kinks inside the widest step have no slope that differences find.
        if (!(slope.error <= 1e-7 * Math.max(1e-3, Math.abs(slope.value)))) return;
        if (!(Math.abs(expression.evaluate(scope)) < 1e6)) return;
        compared += 1;
        expect(Math.abs(found - slope.value)).toBeLessThanOrEqual(
          100 * slope.error + 1e-6 * Math.max(1e-3, Math.abs(slope.value)),
        );
      }),
      { numRuns: 3000, seed: 20310301 },
    );
    expect(compared).toBeGreaterThan(1000);
  });

  // By the rules of any calculus text, e.g. Abramowitz & Stegun 3.3 and 4.
  test.each([
    ["x ^ 3", 2, 12],
    ["x ^ 1", 0, 1],
    ["x ^ 2", 0, 0],
    ["2 ^ x", 3, 8 * Math.LN2],
    ["x ^ x", 2, 4 * (Math.LN2 + 1)],
    ["0 ^ x", 2, 0],
    ["sqrt(x)", 4, 0.25],
    ["1 / x", 2, -0.25],
    ["log10(x)", 10, 0.1 / Math.LN10],
    ["log(3 * x)", 5, 0.2],
    ["tan(x)", 0, 1],
    ["asin(x)", 0.6, 1.25],
    ["acos(x)", 0.6, -1.25],
    ["atan2(x, 2)", 2, 0.25],
    ["atan2(2, x)", 2, -0.25],
    ["abs(x)", -3, -1],
    ["abs(x - 5)", 6, 1],
    ["min(x, 2, 2 * x)", -1, 2],
    ["min(x, 2, 2 * x)", 3, 0],
    ["max(x ^ 2, 1)", 3, 6],
    ["x < 1 ? 3 * x : x ^ 2", 0.5, 3],
    ["x < 1 ? 3 * x : x ^ 2", 4, 8],
    ["table(grid, x)", 5, -0.2],
    ["table(grid, x)", 10, -0.2],
    ["table(grid, x)", 40, -0.05],
    ["table(grid, x ^ 2)", 5, -0.05 * 10],
    // By hand: (1 - x) y + x (10 + 1.5 y), with slopes 10 + 0.5 y and 1 + 0.5 x.
    ["table(plane, x, 1)", 0.5, 10.5],
    ["table(plane, x, x)", 0.5, 10.25 + 1.25],
  ])("of %s at %d is %d", (text, x, slope) => {
    expect(compiled(text, ["x"]).derivative("x").evaluate({ x })).toBeCloseTo(slope, 12);
  });

  test("doesn't exist outside a table", () => {
    expect(compiled("table(grid, x)", ["x"]).derivative("x").evaluate({ x: 41 })).toBeNaN();
  });

  test("of a derivative is the second one", () => {
    const second = compiled("x ^ 3 * exp(y) + table(grid, x)", ["x", "y"])
      .derivative("x")
      .derivative("x");
    expect(second.evaluate({ x: 2, y: 0 })).toBeCloseTo(12, 12);
    const mixed = compiled("table(plane, x, y)", ["x", "y"]).derivative("x").derivative("y");
    expect(mixed.evaluate({ x: 0.2, y: 0.7 })).toBeCloseTo(0.5, 12);
  });

  test("by a name that the expression lacks is 0", () => {
    const none = compiled("x ^ 2 + table(grid, x)", ["x", "y"]).derivative("y");
    expect([none.evaluate({ x: 50 }), none.names.size]).toEqual([0, 0]);
  });

  test("of 400 nodes is found, and has a value", () => {
    const product = compiled(Array.from({ length: 200 }, () => "x").join("*"), ["x"]);
    expect(product.derivative("x").evaluate({ x: 1 })).toBe(200);
    const least = compiled(`min(${Array.from({ length: 399 }, () => "x").join(",")})`, ["x"]);
    expect(least.derivative("x").evaluate({ x: 7 })).toBe(1);
    const deep = compiled(`${"sin(".repeat(64)}x${")".repeat(64)}`, ["x"]);
    expect(deep.derivative("x").evaluate({ x: 0 })).toBe(1);
  });
});

test("in slots an expression has the same value as over its names", () => {
  assert(
    property(texts, scopes, (text, scope) => {
      const expression = compiled(text, ["x", "y", "z"]);
      const value = compileSlots(expression, ["z", "x", "y"]);
      const slots = Float64Array.of(scope.z, scope.x, scope.y);
      expect(value(slots)).toBe(expression.evaluate(scope));
    }),
    { numRuns: 500, seed: 20310302 },
  );
  expect(compileSlots(compiled("x + y", ["x", "y"]), ["x"])(Float64Array.of(1))).toBeNaN();
});
