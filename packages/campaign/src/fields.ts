import * as z from "zod";

/**
 * What the schemas of all parts are built from. `null` in an optional field means that it is
 * absent, so that a reader finds every field: its value, its default or null.
 */
export const KEY_PATTERN = /^[a-z0-9][a-z0-9-]{0,63}$/;
export const NAME_PATTERN = /^[a-z][a-zA-Z0-9_]{0,31}$/;
export const ID_PATTERN = /^[A-Za-z0-9._:-]{1,200}$/;

/** RFC 3339 in UTC, with up to nine digits of a second; 23:59:60 is a leap second. */
export const TIME_PATTERN =
  /^(?:(?:\d\d[2468][048]|\d\d[13579][26]|\d\d0[48]|[02468][048]00|[13579][26]00)-02-29|\d{4}-(?:(?:0[13578]|1[02])-(?:0[1-9]|[12]\d|3[01])|(?:0[469]|11)-(?:0[1-9]|[12]\d|30)|02-(?:0[1-9]|1\d|2[0-8])))T(?:(?:[01]\d|2[0-3]):[0-5]\d:[0-5]\d|23:59:60)(?:\.\d{1,9})?Z$/;

export const key = z
  .string()
  .regex(KEY_PATTERN)
  .describe("a key: 1 to 64 of a-z, 0-9 and -, starting with a letter or digit");
export const name = z
  .string()
  .regex(NAME_PATTERN)
  .describe("a name for expressions: a small letter, then up to 31 of a-z, A-Z, 0-9 and _");
export const measurementId = z
  .string()
  .regex(ID_PATTERN)
  .describe("an id: 1 to 200 of A-Z, a-z, 0-9, . _ : and -");
export const time = z
  .string()
  .regex(TIME_PATTERN)
  .describe("an RFC 3339 time in UTC, such as 2031-03-01T00:00:00Z");

/** Texts are bounded so that no document can be made of one of them. */
export const LINE_LENGTH = 500;
export const UNIT_LENGTH = 100;
export const line = z.string().min(1).max(LINE_LENGTH);
export const prose = z.string().max(20_000);
export const unit = z.string().min(1).max(UNIT_LENGTH);

export const number = z.number();
export const positive = z.number().positive();
export const notNegative = z.number().nonnegative();
export const coefficient = z.number();

/** An optional field: absent and null both read as null. */
export function optional<S extends z.ZodType>(schema: S) {
  return schema.nullish().transform((value) => value ?? null);
}

/** An optional field with a default. */
export function defaulted<S extends z.ZodType, D>(schema: S, fallback: D) {
  return schema.nullish().transform((value) => value ?? fallback);
}

/** An optional list: absent and null read as a new empty list. */
export function list<S extends z.ZodType>(schema: S) {
  return z
    .array(schema)
    .nullish()
    .transform((value) => value ?? []);
}

/** An optional record: absent and null read as a new empty one. */
export function record<K extends z.ZodString, V extends z.ZodType>(keys: K, values: V) {
  return z
    .record(keys, values)
    .nullish()
    .transform((value): Record<string, z.output<V>> => value ?? {});
}

/** A part whose title is its key where none is given. */
export function titled<T extends { key: string; title: string | null }>(part: T) {
  return { ...part, title: part.title ?? part.key };
}
