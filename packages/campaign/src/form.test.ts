import { array, assert, constantFrom, oneof, property, record } from "fast-check";
import type { Arbitrary } from "fast-check";
import { describe, expect, test } from "vitest";
import { campaignDocumentSchema } from "./document";
import { measurementContentSchema, payloadSchemas } from "./entries";
import { readForm } from "./form";
import { measurementSchema } from "./measurement";
import { quickContent, quickMeasurement } from "./quick-measurement";
import { standingsSchema } from "./standings";
import { duneDocument, junk, placesOf, put } from "./testing/documents";

describe("reading on after an error", () => {
  test("takes and refuses what Zod does, and reads the same", () => {
    let taken = 0;
    assert(
      property(constantFrom(...placesOf(duneDocument())), junk, (path, value) => {
        const document = put(duneDocument(), path, value);
        const zod = campaignDocumentSchema.safeParse(document);
        const form = readForm(campaignDocumentSchema, document, "");
        expect(form.problems.length === 0).toBe(zod.success);
        if (!zod.success) return;
        taken += 1;
        expect(form.value).toEqual(zod.data);
      }),
      { numRuns: 1000 },
    );
    expect(taken).toBeGreaterThan(50);
  });

  test("each of Zod's issues has a problem at its place", () => {
    assert(
      property(constantFrom(...placesOf(duneDocument())), junk, (path, value) => {
        const document = put(duneDocument(), path, value);
        const zod = campaignDocumentSchema.safeParse(document);
        const { problems } = readForm(campaignDocumentSchema, document, "");
        const pointers = new Set(problems.map(({ pointer }) => pointer));
        for (const issue of zod.error?.issues ?? []) {
          // Zod names the member of a record that has a wrong name, this reader its holder.
          const steps = issue.code === "invalid_key" ? issue.path.slice(0, -1) : issue.path;
          expect(pointers).toContain(steps.map((step) => `/${String(step)}`).join(""));
        }
      }),
      { numRuns: 500 },
    );
  });

  test("passes over the wrong part alone", () => {
    const { value, problems } = readForm(
      measurementSchema,
      { id: "a", measurand: 3, value: "x", sd: 1, colour: "red" },
      "/measurements/7",
    );
    expect(value).toMatchObject({ id: "a", measurand: undefined, value: undefined, sd: 1 });
    expect(problems).toEqual([
      {
        pointer: "/measurements/7/measurand",
        code: "wrong-type",
        found: "3",
        allowed: "a key: 1 to 64 of a-z, 0-9 and -, starting with a letter or digit",
      },
      {
        pointer: "/measurements/7/value",
        code: "wrong-type",
        found: '"x"',
        allowed: "a number",
      },
      expect.objectContaining({ pointer: "/measurements/7", found: 'the property "colour"' }),
    ]);
  });

  test("knows every kind of schema that the documents and payloads are made of", () => {
    for (const schema of [
      campaignDocumentSchema,
      standingsSchema,
      ...Object.values(payloadSchemas),
    ]) {
      expect(readForm(schema, null, "").problems).toHaveLength(1);
      expect(readForm(schema, {}, "").problems.length).toBeGreaterThan(0);
    }
  });

  test("a pointer escapes what stands in a member's name (RFC 6901, section 3)", () => {
    const bad = { ...duneDocument().measurements[0], extra: { "a/b~c": { deep: true } } };
    expect(readForm(measurementSchema, bad, "").problems).toMatchObject([
      { pointer: "/extra/a~1b~0c", found: "an object" },
    ]);
  });
});

/** Measurements of every form, with something odd in many of them. */
const fields: Arbitrary<unknown>[] = [];
const odd = oneof(junk, constantFrom<unknown>(1, 0.97, 12, -1, "final", "linear", "upper", {}, []));
const names = [
  ...Object.keys(measurementSchema.parse({ id: "a", measurand: "b" })),
  "claimed",
  "hue",
];
for (const measurement of duneDocument().measurements) {
  fields.push(constantFrom<unknown>(measurement));
  const change = record({ name: constantFrom(...names), value: odd });
  fields.push(
    array(change, { maxLength: 3 }).map((changes) => {
      const changed = structuredClone(measurement);
      for (const { name, value } of changes) changed[name] = value;
      return changed as unknown;
    }),
  );
}
for (const conditions of [{ slope: 3 }, { slope: "3" }, { Slope: 3 }, [3], { slope: Infinity }]) {
  fields.push(constantFrom<unknown>({ id: "a", measurand: "b", value: 1, sd: 1, conditions }));
}
for (const shared of [
  [{ error: "e" }],
  [{ error: "e", coefficient: null }],
  [{ error: 3 }],
  [{}],
]) {
  fields.push(constantFrom<unknown>({ id: "a", measurand: "b", value: 1, sd: 1, shared }));
}
for (const observedAt of [
  "2032-02-29T23:59:60Z",
  "2032-02-29T00:00:00.123456789Z",
  "2031-02-29T00:00:00Z",
  "2032-02-29T24:00:00Z",
  "2032-02-29t00:00:00z",
]) {
  fields.push(constantFrom<unknown>({ id: "a", measurand: "b", observedAt }));
}

describe("the quick check of a measurement", () => {
  test.each([
    ["in a document", quickMeasurement, measurementSchema],
    ["in a payload", quickContent, measurementContentSchema],
  ] as const)("%s takes nothing that Zod refuses, and reads the same", (_where, quick, schema) => {
    let taken = 0;
    let left = 0;
    assert(
      property(oneof(...fields), (value) => {
        const before = JSON.stringify(value);
        const read = quick(value);
        expect(JSON.stringify(value)).toBe(before);
        const zod = schema.safeParse(structuredClone(value));
        if (read === null) {
          left += Number(zod.success);
          return;
        }
        taken += 1;
        expect(zod.success).toBe(true);
        expect(read).toEqual(zod.data);
        expect(Object.keys(read)).toEqual(Object.keys(zod.data!));
      }),
      { numRuns: 3000 },
    );
    expect(taken).toBeGreaterThan(500);
    // What it leaves to Zod though it is right: filled `extra` and `claimed`.
    expect(left).toBeLessThan(taken);
  });

  test.each([[null], [3], ["a"], [[]], [{}], [{ id: "a" }]])("leaves %j to Zod", (value) => {
    expect(quickMeasurement(value)).toBeNull();
    expect(quickContent(value)).toBeNull();
  });
});
