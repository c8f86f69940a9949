import * as fc from "fast-check";
import { expect, test } from "vitest";
import { measurementSchema } from "@weighhouse/campaign/measurement";
import { formProblems } from "./draft-form";

const whatever = fc.oneof(
  fc.string({ maxLength: 5 }),
  fc.double(),
  fc.boolean(),
  fc.constant(null),
  fc.constant(undefined),
  fc.constant("x".repeat(2001)),
  fc.dictionary(
    fc.oneof(fc.string(), fc.constant("a".repeat(201))),
    fc.jsonValue({ maxDepth: 1 }),
    {
      maxKeys: 2,
    },
  ),
  fc.array(fc.integer(), { maxLength: 2 }),
);

test("the quick look at a draft's form is the schema's own", () => {
  const draft = fc.record(
    {
      id: fc.constantFrom("a", "a b"),
      measurand: fc.constantFrom("flux-may", "Flux"),
      value: fc.constantFrom(1, "1", Number.NaN),
      sd: fc.constantFrom(1, 0, -1, null),
      extra: whatever,
      sdd: whatever,
    },
    { requiredKeys: ["measurand", "value"] },
  );
  fc.assert(
    fc.property(draft, (one) => {
      const { success } = measurementSchema.safeParse({ id: "-", ...one });
      expect(formProblems(one, () => null).length === 0).toBe(success);
    }),
    { numRuns: 1000 },
  );
});

test("a member that would be an object's prototype is refused by name", () => {
  const draft = JSON.parse('{"measurand":"flux-may","value":1,"sd":1,"__proto__":1}') as object;
  expect(formProblems(draft as Record<string, unknown>, () => null)).toMatchObject([
    { found: 'the property "__proto__"' },
  ]);
});

test("an extra that would be an object's prototype is refused by name", () => {
  const extra = JSON.parse('{"__proto__": 1}') as object;
  expect(formProblems({ measurand: "flux-may", value: 1, sd: 1, extra }, () => null)).toMatchObject(
    [{ column: "extra", found: 'the member "__proto__"' }],
  );
});
