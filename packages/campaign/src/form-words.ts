import type * as z from "zod";
import { checksOf, defOf, descriptionOf } from "./schema-def";

type Schema = z.core.$ZodType;

/** What stands at a place, short enough for one line. */
export function found(value: unknown): string {
  if (value === undefined) return "nothing";
  if (Array.isArray(value)) return `a list of ${value.length}`;
  if (value !== null && typeof value === "object") return "an object";
  const text = typeof value === "string" ? JSON.stringify(value) : String(value);
  return text.length > 80 ? `${text.slice(0, 77)}...` : text;
}

/** What a schema allows, in words: its own description, or one made from its kind and bounds. */
export function allowed(schema: Schema): string {
  const described = descriptionOf(schema);
  if (described !== undefined) return described;
  const def = defOf(schema);
  switch (def.type) {
    case "pipe":
      return allowed(def.in);
    case "optional":
    case "nullable":
      return allowed(def.innerType);
    case "number":
      return numberWords(def);
    case "string":
      return `a text${lengthWords(def, "characters")}`;
    case "boolean":
      return "true or false";
    case "literal":
      return alternatives(def.values);
    case "enum":
      return alternatives(Object.values(def.entries));
    case "object":
      return `an object with ${Object.keys(def.shape).join(", ")}`;
    case "array":
      return `a list${lengthWords(def, "items")}, each ${allowed(def.element)}`;
    case "tuple":
      return `a list of ${def.items.length}: ${def.items.map((item) => allowed(item)).join(", ")}`;
    case "record":
      return "an object whose members are named for what they hold";
    case "union":
      return "discriminator" in def
        ? `an object with ${String(def.discriminator)} ${families(schema).join(" or ")}`
        : def.options.map((option) => allowed(option)).join(" or ");
    default:
      return def.type;
  }
}

/** The values that a discriminated union tells its forms apart by. */
export function families(schema: Schema): string[] {
  const def = defOf(schema);
  if (def.type !== "union" || !("discriminator" in def)) return [];
  return def.options.flatMap((option) => {
    const inner = defOf(option);
    if (inner.type !== "object") return [];
    const family = defOf(inner.shape[String(def.discriminator)]!);
    return family.type === "literal" ? family.values.map((one) => JSON.stringify(one)) : [];
  });
}

function numberWords(def: z.core.$ZodNumberDef): string {
  const bounds = checksOf(def).flatMap((check) => {
    if (check.check === "greater_than") {
      return [check.inclusive ? `at least ${check.value}` : `above ${check.value}`];
    }
    if (check.check === "less_than") {
      return [check.inclusive ? `at most ${check.value}` : `below ${check.value}`];
    }
    return [];
  });
  const noun = def.type === "number" && "format" in def ? "a whole number" : "a number";
  return bounds.length === 0 ? noun : `${noun} ${bounds.join(" and ")}`;
}

function lengthWords(def: { checks?: z.core.$ZodCheck<never>[] }, things: string): string {
  const bounds = checksOf(def).flatMap((check) => {
    if (check.check === "min_length") return [`at least ${check.minimum}`];
    if (check.check === "max_length") return [`at most ${check.maximum}`];
    return [];
  });
  return bounds.length === 0 ? "" : ` of ${bounds.join(" and ")} ${things}`;
}

function alternatives(values: readonly unknown[]): string {
  return values.map((value) => JSON.stringify(value)).join(" or ");
}
