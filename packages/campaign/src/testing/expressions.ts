import { letrec, oneof, constantFrom, integer, tuple } from "fast-check";
import type { Arbitrary } from "fast-check";
import { compileExpression } from "../expression";
import type { Expression } from "../expression";

/** Tables that expressions of tests may look values up in. */
export const lookUps = new Map([
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
        [10, 13],
      ],
    },
  ],
]);

export function compiled(text: string, names: Iterable<string>): Expression {
  const read = compileExpression(text, { names: new Set(names), tables: lookUps });
  if (!read.ok) throw new Error(JSON.stringify(read.faults));
  return read.expression;
}

/** Texts of the format over x, y and z: every operator, function, choice and table. */
export const texts: Arbitrary<string> = letrec<{ text: string }>((tie) => {
  const inner = tie("text");
  const one = constantFrom("sqrt", "exp", "log", "log10", "sin", "cos", "tan", "asin", "acos");
  const more = constantFrom("atan", "abs", "min", "max");
  return {
    text: oneof(
      { depthSize: "small", withCrossShrink: true },
      constantFrom("x", "y", "z", "1.5", "0.3", "2", "pi"),
      tuple(inner, constantFrom("+", "-", "*", "/", "^"), inner).map(
        ([a, sign, b]) => `(${a} ${sign} ${b})`,
      ),
      inner.map((a) => `-(${a})`),
      tuple(oneof(one, more), inner).map(([name, a]) => `${name}(${a})`),
      tuple(constantFrom("min", "max", "atan2"), inner, inner).map(
        ([name, a, b]) => `${name}(${a}, ${b})`,
      ),
      tuple(inner, constantFrom("<", "<=", ">", ">="), inner, inner, inner).map(
        ([a, sign, b, yes, no]) => `(${a} ${sign} ${b} ? ${yes} : ${no})`,
      ),
      tuple(integer({ min: 1, max: 9 }), inner).map(([by, a]) => `table(grid, ${by} * (${a}))`),
      tuple(inner, inner).map(([a, b]) => `table(plane, ${a}, ${b})`),
    ),
  };
}).text;
