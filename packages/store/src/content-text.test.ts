import { describe, expect, it } from "vitest";
import * as fc from "fast-check";
import { measurementContentSchema } from "@weighhouse/campaign/entries";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { canonicalJson } from "@weighhouse/ledger/canonical";
import { contentText, defaultId, postedText } from "./content-text";
import { defaultMeasurementId } from "./post-measurements";

const text = fc.string({ unit: "binary", minLength: 1, maxLength: 12 });
const number = fc.oneof(
  fc.double({ noNaN: true, noDefaultInfinity: true }),
  fc.integer(),
  fc.constant(-0),
);
const optional = <T>(one: fc.Arbitrary<T>) => fc.option(one, { nil: null });
const name = fc.stringMatching(/^[a-z][a-zA-Z0-9_]{0,5}$/);
const key = fc.stringMatching(/^[a-z0-9][a-z0-9-]{0,8}$/);
const given = fc.record({
  id: fc.stringMatching(/^[A-Za-z0-9._:-]{1,20}$/),
  measurand: key,
  facility: optional(key),
  batch: optional(text),
  observedAt: optional(fc.constantFrom("2031-03-01T00:00:00Z", "2031-03-01T00:00:00.123456789Z")),
  conditions: fc.dictionary(name, number, { maxKeys: 4 }),
  value: optional(number),
  plus: optional(fc.double({ min: 1e-300, noNaN: true, noDefaultInfinity: true })),
  count: optional(fc.nat()),
  occurred: optional(fc.boolean()),
  unit: optional(text),
  source: optional(text),
  extra: fc.dictionary(
    fc.oneof(fc.string({ minLength: 1, maxLength: 5 }), fc.nat().map(String)),
    fc.oneof(text, number, fc.boolean(), fc.constant(null)),
    { maxKeys: 4, noNullPrototype: true },
  ),
  shared: fc.array(fc.record({ error: key, coefficient: number }), { maxLength: 3 }),
  setAside: optional(fc.record({ reason: text })),
  claimed: optional(fc.constant({ postedAt: "2030-01-01T00:00:00Z" })),
});

function outcome<T>(make: () => T): T | string {
  try {
    return make();
  } catch (error) {
    return (error as { code: string }).code;
  }
}

describe("a measurement's text", () => {
  it("is its canonical JSON, with and without the time of posting, or is refused alike", () => {
    fc.assert(
      fc.property(given, (input) => {
        const read = measurementContentSchema.safeParse(input);
        if (!read.success) return;
        const content = read.data;
        const postedAt = "2031-05-01T00:00:00.000001Z";
        expect(outcome(() => contentText(content).head + contentText(content).tail)).toBe(
          outcome(() => canonicalJson(content)),
        );
        expect(outcome(() => postedText(contentText(content), postedAt))).toBe(
          outcome(() => canonicalJson({ ...content, postedAt })),
        );
      }),
      { numRuns: 1000 },
    );
  });

  it("gives the id that a posting without one gets", () => {
    const { id: _, ...raw } = plain({ facility: "mast", observedAt: "2031-03-01T00:00:00Z" });
    expect(defaultId(plain(raw))).toBe(defaultMeasurementId(raw));
    expect(defaultId(plain({}))).toMatch(/^[0-9a-f]{12}$/);
  });

  it.each([
    ["U+0000", "a\u0000b"],
    ["half a surrogate pair", "a\ud800b"],
  ])("of what no payload can hold is refused at its field: %s", (found, source) => {
    expect(() => contentText(plain({ source }))).toThrow(`/source: found ${found}`);
    expect(() => defaultId(plain({ extra: { note: source } }))).toThrow(`/note: found ${found}`);
  });

  it("longer than a payload can be is refused", () => {
    const extra = Object.fromEntries(
      Array.from({ length: 600 }, (_, i) => [`note-${i}`, "x".repeat(2000)]),
    );
    expect(() => contentText(plain({ extra }))).toThrow(/1048576/);
  });
});

function plain(fields: Record<string, unknown>): MeasurementContent {
  return measurementContentSchema.parse({ id: "m", measurand: "pitch", value: 1, ...fields });
}
