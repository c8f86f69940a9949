import { array, assert, constantFrom, json, property, tuple, nat } from "fast-check";
import { describe, expect, test } from "vitest";
import { scanJson } from "./json-scan";
import { parseJson } from "./json-text";

describe("a text that isn't JSON", () => {
  test.each([
    ["", "the end at line 1, column 1", "a JSON value"],
    ['{"a": 1,}', '"}" at line 1, column 9', "a member's name in double quotes"],
    ["[1, 2\n 3]", '"3" at line 2, column 2', ", or ] in the list"],
    ['{"a" 1}', '"1" at line 1, column 6', ": after the member's name"],
    ['{"a": 1 "b"}', '"\\"" at line 1, column 9', ", or } in the object"],
    ["{'a': 1}", '"\'" at line 1, column 2', "a member's name in double quotes"],
    ["[1] 2", '"2" at line 1, column 5', "nothing after the value"],
    ["[01]", '"1" at line 1, column 3', ", or ] in the list"],
    ["[NaN]", '"N" at line 1, column 2', "a JSON value"],
    ['["a\nb"]', '"\\"" at line 1, column 2', "a JSON value"],
    ['["\\x"]', '"\\"" at line 1, column 2', "a JSON value"],
    ["[1, ", "the end at line 1, column 5", "a JSON value"],
    ["// note\n1", '"/" at line 1, column 1', "a JSON value"],
  ])("%j", (text, found, allowed) => {
    expect(parseJson(text)).toEqual({
      value: undefined,
      problems: [{ pointer: "", code: "syntax", found, allowed }],
    });
  });

  test("nested deeper than a recursion could follow is told too", () => {
    const deep = `${"[".repeat(200_000)}x`;
    expect(parseJson(deep).problems[0]?.found).toBe('"x" at line 1, column 200001');
  });
});

describe("members that stand twice", () => {
  test.each([
    ['{"a": 1, "a": 2}', [["", "a"]]],
    ['{"a": {"b": [1, {"c": 1, "d": 2, "c": 3}]}}', [["/a/b/1", "c"]]],
    [
      '{"a": {"x": 1, "x": 1}, "a": {"y": 1, "y": 2, "y": 3}}',
      [
        ["/a", "x"],
        ["", "a"],
        ["/a", "y"],
        ["/a", "y"],
      ],
    ],
    ['{"a": 1, "\\u0061": 2}', [["", "a"]]],
    ['{"a/b": {"~": 1, "~": 2}}', [["/a~1b", "~"]]],
    ['{"__proto__": 1, "__proto__": 2}', [["", "__proto__"]]],
  ])("%s", (text, places) => {
    const { value, problems } = parseJson(text);
    expect(value).toEqual(JSON.parse(text));
    expect(problems).toEqual(
      places.map(([pointer, name]) => ({
        pointer,
        code: "duplicate-member",
        found: `the member ${JSON.stringify(name)} a second time`,
        allowed: "each member once",
      })),
    );
  });

  test.each([
    ['{"a": "a", "b": ["a", "a"], "c": {"a": "\\"a\\": 1"}}'],
    ['{"a\\\\": 1, "a": 2, "a\\"": 3}'],
    ['["a", "a:", ":", {"": {"": 1}}]'],
    ['\uFEFF{"a": 1}'],
    ["  3 "],
  ])("none in %s", (text) => {
    expect(parseJson(text)).toEqual({
      value: JSON.parse(text.replace("\uFEFF", "")),
      problems: [],
    });
  });
});

// JSON.parse is the other implementation of RFC 8259.
test("the scan takes and refuses what JSON.parse does", () => {
  const broken = tuple(
    json(),
    array(tuple(nat(), constantFrom(...'{}[],:"\\0e-. \ntn')), { maxLength: 3 }),
  );
  assert(
    property(broken, ([text, changes]) => {
      let changed = text;
      for (const [at, character] of changes) {
        const place = at % (changed.length + 1);
        changed = changed.slice(0, place) + character + changed.slice(place + (at % 2));
      }
      let parses = true;
      try {
        JSON.parse(changed);
      } catch {
        parses = false;
      }
      expect(scanJson(changed).fault === null).toBe(parses);
    }),
    { numRuns: 5000 },
  );
});
