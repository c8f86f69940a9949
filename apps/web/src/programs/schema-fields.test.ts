import { describe, expect, it } from "vitest";
import { schemaFields, typeWords } from "./schema-fields";

const schemas = {
  Row: {
    type: "object",
    properties: {
      id: { type: "string", description: "Its id." },
      sd: { anyOf: [{ type: "number", description: "In its unit." }, { type: "null" }] },
    },
    required: ["id"],
  },
};

describe("the fields of a schema", () => {
  it("are named from the top, those of lists and objects within below them", () => {
    const schema = {
      type: "object",
      properties: {
        rows: { type: "array", items: { $ref: "#/components/schemas/Row" } },
        about: {
          anyOf: [{ type: "object", properties: { note: { type: "string" } } }, { type: "null" }],
        },
      },
      required: ["rows"],
    };
    expect(schemaFields(schema, schemas)).toEqual([
      { name: "rows", type: "list of Row", required: true, says: "" },
      { name: "rows[].id", type: "text", required: true, says: "Its id." },
      { name: "rows[].sd", type: "number", required: false, says: "In its unit." },
      { name: "about", type: "object", required: false, says: "" },
      { name: "about.note", type: "text", required: false, says: "" },
    ]);
  });

  it("are those of the schema that is referred to", () => {
    const fields = schemaFields({ $ref: "#/components/schemas/Row" }, schemas);
    expect(fields.map(({ name }) => name)).toEqual(["id", "sd"]);
  });
});

it.each([
  [{ type: "integer" }, "whole number"],
  [{ enum: ["all", "faults"] }, "all or faults"],
  [{ const: true }, "true"],
  [{ anyOf: [{ type: "string" }, { type: "null" }] }, "text"],
  [{ type: "array", items: { type: "string" } }, "list of texts"],
  [{}, "anything"],
])("%j is %s", (schema, words) => {
  expect(typeWords(schema)).toBe(words);
});
