export type JsonSchema = Record<string, unknown>;

/** A field of a JSON object as a page shows it. */
export interface SchemaField {
  /** Dotted below objects, `[]` for each of a list. */
  name: string;
  type: string;
  required: boolean;
  says: string;
}

/** Deeper than this a table tells less than the schema itself. */
const DEPTH = 2;

/** The fields of an object's schema, those of objects within it after them. */
export function schemaFields(
  schema: JsonSchema,
  schemas: Record<string, JsonSchema>,
  at: { prefix?: string; depth?: number } = {},
): SchemaField[] {
  const { prefix = "", depth = 0 } = at;
  const object = resolved(schema, schemas);
  const properties = (object["properties"] ?? {}) as Record<string, JsonSchema>;
  const required = (object["required"] ?? []) as string[];
  return Object.entries(properties).flatMap(([name, field]) => {
    const full = `${prefix}${name}`;
    const row: SchemaField = {
      name: full,
      type: typeWords(field),
      required: required.includes(name),
      says: descriptionOf(field, schemas),
    };
    if (depth + 1 >= DEPTH) return [row];
    const inner = withoutNull(resolved(field, schemas), schemas);
    const items = inner["items"] as JsonSchema | undefined;
    const [below, mark] = items ? [withoutNull(items, schemas), "[]."] : [inner, "."];
    return [row, ...schemaFields(below, schemas, { prefix: `${full}${mark}`, depth: depth + 1 })];
  });
}

/** A type in a few words: `text`, `whole number`, `list of numbers`, `a or b`, the name of a schema. */
export function typeWords(schema: JsonSchema): string {
  const name = nameOf(schema);
  if (name !== null) return name;
  if (schema["const"] !== undefined) return JSON.stringify(schema["const"]);
  if (Array.isArray(schema["enum"])) return schema["enum"].map((one) => String(one)).join(" or ");
  const options = (schema["anyOf"] ?? schema["oneOf"]) as JsonSchema[] | undefined;
  if (options) {
    const words = options.map(typeWords).filter((word) => word !== "null");
    return [...new Set(words)].join(" or ");
  }
  if (schema["type"] === "array") {
    const items = schema["items"] as JsonSchema | undefined;
    return `list of ${items ? plural(typeWords(items)) : "anything"}`;
  }
  return words[String(schema["type"])] ?? "anything";
}

const words: Record<string, string> = {
  string: "text",
  integer: "whole number",
  number: "number",
  boolean: "true or false",
  object: "object",
  null: "null",
};

function plural(word: string): string {
  return ["text", "whole number", "number", "object"].includes(word) ? `${word}s` : word;
}

function descriptionOf(schema: JsonSchema, schemas: Record<string, JsonSchema>): string {
  const own = schema["description"];
  if (typeof own === "string") return own;
  const inner = withoutNull(schema, schemas);
  return inner !== schema && typeof inner["description"] === "string" ? inner["description"] : "";
}

function withoutNull(schema: JsonSchema, schemas: Record<string, JsonSchema>): JsonSchema {
  const options = schema["anyOf"] as JsonSchema[] | undefined;
  const present = options?.filter((one) => one["type"] !== "null") ?? [];
  return present.length === 1 ? resolved(present[0]!, schemas) : schema;
}

function resolved(schema: JsonSchema, schemas: Record<string, JsonSchema>): JsonSchema {
  const name = nameOf(schema);
  return name === null ? schema : (schemas[name] ?? schema);
}

function nameOf(schema: JsonSchema): string | null {
  const ref = schema["$ref"];
  return typeof ref === "string" ? (ref.split("/").at(-1) ?? null) : null;
}
