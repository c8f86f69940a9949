import * as fc from "fast-check";
import { describe, expect, it } from "vitest";
import { hex } from "./bytes";
import { canonicalBytes, canonicalJson, parseCanonical } from "./canonical";
import vectors from "./fixtures/rfc8785.json";
import { nodeHasher } from "./node-hasher";

describe("against RFC 8785's published vectors", () => {
  it("the sample has the published text, bytes and digest", () => {
    const value: unknown = JSON.parse(vectors.sample.text);
    expect(canonicalJson(value)).toBe(vectors.sample.canonical);
    expect(hex(canonicalBytes(value))).toBe(vectors.sample.utf8Hex);
    expect(hex(nodeHasher(canonicalBytes(value)))).toBe(vectors.sample.sha256);
  });

  it("names are sorted by UTF-16 code units", () => {
    const text = canonicalJson(JSON.parse(vectors.sorting.text));
    expect(text).toBe(vectors.sorting.canonical);
    expect([...text.matchAll(/:"([^"]+)"/g)].map((match) => match[1])).toEqual(
      vectors.sorting.valueOrder,
    );
  });

  it.each(vectors.numbers.rows)("the double $ieee754Hex is written $text", (row) => {
    expect(canonicalJson(double(row.ieee754Hex))).toBe(row.text);
  });

  it.each(vectors.refusedNumbers.ieee754Hex)("the double %s is refused", (bits) => {
    expect(() => canonicalJson([double(bits)])).toThrow("/0: found");
  });
});

describe("what JSON can't hold is refused where it stands", () => {
  class Point {
    x = 1;
  }
  const sparse: unknown[] = [1];
  sparse.length = 2;
  const loop: unknown[] = [];
  loop.push(loop);

  it.each([
    ["undefined", { a: [1, undefined] }, "/a/1: found undefined"],
    ["undefined as a property", { a: undefined }, "/a: found undefined"],
    ["a hole in a list", sparse, "/1: found undefined"],
    ["NaN", { a: { b: Number.NaN } }, "/a/b: found NaN"],
    ["an infinity", [Number.NEGATIVE_INFINITY], "/0: found -Infinity"],
    ["a bigint", [1n], "/0: found bigint"],
    ["a function", { toJSON: () => 1 }, "/toJSON: found function"],
    ["a symbol", [Symbol("s")], "/0: found symbol"],
    ["a date", [new Date(0)], "/0: found an object of a class"],
    ["a map", [new Map()], "/0: found an object of a class"],
    ["an object of a class", new Point(), "/: found an object of a class"],
    ["a lone high surrogate", { "a/b": "x\ud800" }, "/a~1b: found half a surrogate pair"],
    ["a lone low surrogate", ["\udc00x"], "/0: found half a surrogate pair"],
    ["a lone surrogate in a name", { "\ud83d": 1 }, "found half a surrogate pair"],
    ["U+0000", ["a\u0000b"], "/0: found U+0000"],
    ["U+0000 in a name", { "\u0000": 1 }, "found U+0000"],
    ["a value that holds itself", loop, "more than 100 levels"],
  ])("%s", (_, value, message) => {
    expect(() => canonicalJson(value)).toThrow(message);
  });
});

it("a pair of surrogates is a character and passes", () => {
  expect(hex(canonicalBytes("\ud83d\ude00"))).toBe("22f09f988022");
});

it("the canonical text reads back as the value, whatever the order of its names", () => {
  fc.assert(
    fc.property(fc.jsonValue({ maxDepth: 5 }), fc.nat(), (value, turn) => {
      fc.pre(!JSON.stringify(value).match(/\\ud[89a-f]|\\u0000/i));
      const text = canonicalJson(value);
      // JSON has one zero.
      expect(parseCanonical(text)).toEqual(JSON.parse(JSON.stringify(value)));
      expect(canonicalJson(turned(value, turn))).toBe(text);
    }),
    { numRuns: 1000 },
  );
});

describe("a text that isn't the canonical one is refused", () => {
  it.each([
    ["white space", '{"a": 1}', "another form"],
    ["names out of order", '{"b":1,"a":1}', "another form"],
    ["a doubled name", '{"a":1,"a":2}', "another form"],
    ["a number written longer", '{"a":1.0}', "another form"],
    ["a minus zero", "[-0]", "another form"],
    ["an escape that isn't needed", '["\\u0041"]', "another form"],
    ["a number past the doubles", "[1e400]", "found Infinity"],
    ["a text that isn't JSON", "{", "not JSON"],
    ["an escaped U+0000", '["\\u0000"]', "found U+0000"],
    ["an escaped lone surrogate", '["\\ud800"]', "half a surrogate pair"],
  ])("%s", (_, text, message) => {
    expect(() => parseCanonical(text)).toThrow(message);
  });
});

function double(bits: string): number {
  return Buffer.from(bits, "hex").readDoubleBE();
}

/** The same value with every object's names in another order. */
function turned(value: unknown, turn: number): unknown {
  if (Array.isArray(value)) return value.map((child) => turned(child, turn));
  if (typeof value !== "object" || value === null) return value;
  const entries = Object.entries(value);
  const at = entries.length === 0 ? 0 : turn % entries.length;
  return Object.fromEntries(
    [...entries.slice(at), ...entries.slice(0, at)].map(([name, child]) => [
      name,
      turned(child, turn),
    ]),
  );
}
