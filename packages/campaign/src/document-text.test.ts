import { assert, constantFrom, double, integer, nat, oneof, property, tuple } from "fast-check";
import { describe, expect, test } from "vitest";
import { divideText } from "./document-text";
import { parseJson } from "./json-text";
import { readCampaign, readCampaignPieces, readCampaignText } from "./read";
import { duneDocument, junk, placesOf, put } from "./testing/documents";
import { everyForm } from "./testing/every-form";
import { TextCursor } from "./text-cursor";

/** The other way to read a text: JSON.parse for all of it, and the schemas. */
function readByParsing(text: string) {
  const parsed = parseJson(text);
  if (parsed.value === undefined) return { ok: false, problems: parsed.problems };
  const read = readCampaign(parsed.value);
  const problems = [...parsed.problems, ...(read.ok ? [] : read.problems)];
  return problems.length === 0 ? read : { ok: false, problems };
}

function expectTheSame(text: string, size = 40): void {
  // As texts, so that the order of members counts too.
  const expected = JSON.stringify(readByParsing(text));
  expect(JSON.stringify(readCampaignText(text))).toBe(expected);
  const inPieces = readCampaignPieces(piecesOf(text, size));
  if (inPieces === null) expect(divideText(text)).toBeNull();
  else expect(JSON.stringify(inPieces)).toBe(expected);
}

function* piecesOf(text: string, size: number): Generator<string> {
  for (let at = 0; at < text.length; at += size) yield text.slice(at, at + size);
}

const documents = { ...everyForm(), dune: duneDocument() };

describe("a text is read as its value is", () => {
  test.each(Object.entries(documents))(
    "the campaign %s, in one line and in many",
    (_, document) => {
      expectTheSame(JSON.stringify(document));
      expectTheSame(JSON.stringify(document, null, 2));
      for (const size of [1, 3, 500]) expectTheSame(JSON.stringify(document), size);
      expect(divideText(JSON.stringify(document, null, 2))?.measurements).toHaveLength(
        document.measurements.length,
      );
    },
  );

  test("with anything in the place of any part of a measurement", () => {
    const whole = {
      dune: documents.dune,
      events: documents.events,
      curves: documents.smoothCurves,
    };
    const places = Object.entries(whole).flatMap(([name, document]) =>
      placesOf(document.measurements, ["measurements"]).map((path) => ({ name, path })),
    );
    assert(
      property(constantFrom(...places), junk, ({ name, path }, value) => {
        const document = structuredClone(whole[name as "dune"]);
        expectTheSame(JSON.stringify(put(document, path, value)));
      }),
      { numRuns: 400, seed: 20310304 },
    );
  });

  test("with any letters put in or taken out anywhere", () => {
    const text = JSON.stringify({ ...documents.course, measurements: course() }, null, 1);
    const letters = constantFrom(
      ...'{}[],:"\\ \n0-.e1',
      "null",
      "\u0001",
      "é",
      '"value":1,',
      '"__proto__":{},',
      '"shared":[],',
    );
    assert(
      property(nat(text.length), nat(3), oneof(letters, constantFrom("")), (at, cut, put_) => {
        expectTheSame(text.slice(0, at) + put_ + text.slice(at + cut));
      }),
      { numRuns: 1000, seed: 20310305 },
    );
  });

  test.each([
    ["an empty key", '{"measurements":[{"id":"a","measurand":""}]}'],
    ["a byte order mark", `\uFEFF${JSON.stringify(documents.events)}`],
    ["no measurements", JSON.stringify({ ...documents.events, measurements: undefined })],
    ["an empty list", JSON.stringify({ ...documents.events, measurements: [] })],
    ["no list", JSON.stringify({ ...documents.events, measurements: 3 })],
    ["two lists", `{"measurements":[],${JSON.stringify(documents.events).slice(1)}`],
    ["a list alone", "[]"],
    ["nothing", ""],
    [
      "an escaped name",
      JSON.stringify(documents.events).replace('"measurements"', '"measurement\\u0073"'),
    ],
    ["more after its end", `${JSON.stringify(documents.events)} 3`],
  ])("with %s", (_, text) => {
    expectTheSame(text);
  });
});

/** Measurements of the course alone: short enough that a change nearly always hits one. */
function course() {
  return documents.course.measurements.slice(0, 3);
}

test("a measurement that has no end isn't waited for for ever", () => {
  const endless = `{"measurements":[${"[".repeat(1_100_000)}`;
  expect(readCampaignPieces(piecesOf(endless, 50_000))).toBeNull();
});

test("equal lists of shared errors are one, which can't be changed", () => {
  const text = JSON.stringify(documents.sharedErrors);
  const { measurements } = divideText(text)!;
  const [first, second] = measurements.map((one) => one?.shared);
  expect(first).toBe(second);
  expect(Object.isFrozen(first) && Object.isFrozen(first?.[0])).toBe(true);
});

describe("a number", () => {
  const written = oneof(
    double({ noNaN: true, noDefaultInfinity: true }).map(String),
    double({ noNaN: true, min: -1e6, max: 1e6 }).map((value) => value.toFixed(6)),
    tuple(integer(), nat(999_999_999), integer({ min: -330, max: 310 })).map(
      ([whole, part, power]) => `${whole}.${part}E${power}`,
    ),
    tuple(nat(999_999_999), nat(999_999)).map(([a, b]) => `${a}.${b}`),
    constantFrom("-0", "0.0", "-0.0e5", "1e400", "123456789012345", "1234567890123456", "01", "-"),
    constantFrom("1.", ".5", "1e", "1e+", "+1", "--1", "0x1", "1e5", "9007199254740993"),
  );

  test("is the double that JSON.parse makes of it, to the last bit", () => {
    assert(
      property(written, (text) => {
        const cursor = new TextCursor(`${text},`);
        const value = cursor.number();
        const whole = !Number.isNaN(value) && cursor.at === text.length;
        let parsed: unknown = null;
        try {
          parsed = JSON.parse(text);
        } catch {
          // No JSON, so that the cursor may not take the whole of it either.
        }
        expect(whole).toBe(Number.isFinite(parsed));
        if (whole) expect(value).toBe(parsed);
      }),
      { numRuns: 2000, seed: 20310306 },
    );
  });
});
