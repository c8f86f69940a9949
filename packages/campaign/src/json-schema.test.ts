import { readFileSync } from "node:fs";
import { Ajv2020 } from "ajv/dist/2020";
import { assert, constantFrom, property } from "fast-check";
import { expect, test } from "vitest";
import { campaignDocumentSchema } from "./document";
import { jsonSchemas, schemaText } from "./json-schema";
import { duneDocument, junk, placesOf, put } from "./testing/documents";

function shipped(name: string): string {
  return readFileSync(new URL(`../schemas/${name}.json`, import.meta.url), "utf8");
}

test("the shipped JSON Schemas are those of the Zod schemas", () => {
  const howTo = "run `npm run schemas` in packages/campaign";
  for (const [name, schema] of jsonSchemas()) {
    expect(shipped(name), howTo).toBe(schemaText(schema));
  }
});

// ajv is another implementation of draft 2020-12: it has to agree with Zod on every document.
test("another validator takes and refuses by the JSON Schema what Zod does", () => {
  const validate = new Ajv2020({ strict: true, strictTuples: false }).compile(
    JSON.parse(shipped("campaign")) as object,
  );
  expect(validate(duneDocument()), JSON.stringify(validate.errors)).toBe(true);
  let refused = 0;
  assert(
    property(constantFrom(...placesOf(duneDocument())), junk, (path, value) => {
      const document = put(duneDocument(), path, value);
      const takes = campaignDocumentSchema.safeParse(document).success;
      if (!takes) refused += 1;
      expect(validate(document)).toBe(takes);
    }),
    { numRuns: 500 },
  );
  expect(refused).toBeGreaterThan(100);
});
