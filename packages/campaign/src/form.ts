import type * as z from "zod";
import { allowed, families, found } from "./form-words";
import { below } from "./pointer";
import type { Problem, ProblemCode } from "./problem";
import { checksOf, defOf, descriptionOf } from "./schema-def";

type Schema = z.core.$ZodType;

/**
 * What could be read of a value whose form may be wrong in places: `undefined` stands where it
 * could not. So the rules on what fits together still run on the rest, and all errors of a
 * document are reported together.
 */
export type Legible<T> = T extends string | number | boolean | null | undefined
  ? T
  : { [K in keyof T]: Legible<T[K]> | undefined };

/** What a schema reads a value as, and everything that is wrong with its form. */
export type Form<T> = { value: Legible<T> | undefined; problems: Problem[] };

/**
 * Reads a value by a Zod schema, like `safeParse`, but goes on after an error, says in the
 * format's own words what was found and what is allowed, and refuses a member named `__proto__` (which
 * Zod passes over in records).
 *
 * @param pointer where the value stands in its document
 */
export function readForm<S extends z.ZodType>(
  schema: S,
  value: unknown,
  pointer: string,
): Form<z.output<S>> {
  const problems: Problem[] = [];
  const read = readAt(schema, value, pointer, problems);
  return { value: read as Legible<z.output<S>> | undefined, problems };
}

function readAt(schema: Schema, value: unknown, pointer: string, problems: Problem[]): unknown {
  const def = defOf(schema);
  switch (def.type) {
    case "pipe":
      return readPipe(def, value, pointer, problems);
    case "optional":
      return value === undefined ? value : readAt(def.innerType, value, pointer, problems);
    case "nullable":
      return value === null ? value : readAt(def.innerType, value, pointer, problems);
    case "object":
      return readObject(schema, value, pointer, problems);
    case "record":
      return readRecord(schema, value, pointer, problems);
    case "array":
    case "tuple":
      return readList(schema, value, pointer, problems);
    case "union":
      return "discriminator" in def
        ? readFamily(schema, value, pointer, problems)
        : readLeaf(schema, value, pointer, problems);
    default:
      return readLeaf(schema, value, pointer, problems);
  }
}

/** A default or a title: the transform sees what was read, where it was read. */
function readPipe(
  def: z.core.$ZodPipeDef,
  value: unknown,
  pointer: string,
  problems: Problem[],
): unknown {
  const inner = def.in;
  const absent = value === null || value === undefined;
  const optional = defOf(inner).type === "optional";
  const read = absent && optional ? value : readAt(inner, value, pointer, problems);
  if (read === undefined && !(absent && optional)) return undefined;
  const out = defOf(def.out);
  return out.type === "transform" ? out.transform(read, { value: read, issues: [] }) : read;
}

function readObject(schema: Schema, value: unknown, pointer: string, problems: Problem[]): unknown {
  const def = defOf(schema);
  if (def.type !== "object" || !isObject(value)) return refuse(schema, value, pointer, problems);
  const read: Record<string, unknown> = {};
  for (const [member, inner] of Object.entries(def.shape)) {
    read[member] = readAt(
      inner,
      Object.hasOwn(value, member) ? value[member] : undefined,
      below(pointer, member),
      problems,
    );
  }
  for (const member of Object.keys(value)) {
    if (Object.hasOwn(def.shape, member)) continue;
    const known = Object.keys(def.shape).join(", ");
    report(problems, pointer, "unknown-property", `the property ${found(member)}`, known);
  }
  return read;
}

function readRecord(schema: Schema, value: unknown, pointer: string, problems: Problem[]): unknown {
  const def = defOf(schema);
  if (def.type !== "record" || !isObject(value)) return refuse(schema, value, pointer, problems);
  const keySchema = def.keyType;
  const read: Record<string, unknown> = {};
  for (const [member, inner] of Object.entries(value)) {
    if (member === "__proto__" || !passes(keySchema, member)) {
      report(
        problems,
        pointer,
        "bad-format",
        `the member ${found(member)}`,
        `as a member's name ${allowed(keySchema)}`,
      );
      continue;
    }
    read[member] = readAt(def.valueType, inner, below(pointer, member), problems);
  }
  return read;
}

function readList(schema: Schema, value: unknown, pointer: string, problems: Problem[]): unknown {
  const def = defOf(schema);
  if (!Array.isArray(value)) return refuse(schema, value, pointer, problems);
  if (def.type === "tuple") {
    if (value.length !== def.items.length) return refuse(schema, value, pointer, problems);
    return def.items.map((item, index) =>
      readAt(item, value[index], below(pointer, index), problems),
    );
  }
  if (def.type !== "array") return undefined;
  const element = def.element;
  const read = value.map((item: unknown, index) =>
    readAt(element, item, below(pointer, index), problems),
  );
  const whole = lengthFits(def, value.length);
  if (!whole) refuse(schema, value, pointer, problems);
  return read;
}

/** A union told apart by its `family`: errors are those of the family that was meant. */
function readFamily(schema: Schema, value: unknown, pointer: string, problems: Problem[]): unknown {
  const def = defOf(schema);
  if (def.type !== "union" || !("discriminator" in def) || !isObject(value)) {
    return refuse(schema, value, pointer, problems);
  }
  const name = String(def.discriminator);
  const family = Object.hasOwn(value, name) ? value[name] : undefined;
  const option = def.options.find((one) => {
    const inner = defOf(one);
    return inner.type === "object" && passes(inner.shape[name]!, family);
  });
  if (option === undefined) {
    const code = family === undefined ? "missing" : "bad-choice";
    report(problems, below(pointer, name), code, found(family), families(schema).join(" or "));
    return undefined;
  }
  return readAt(option, value, pointer, problems);
}

function readLeaf(schema: Schema, value: unknown, pointer: string, problems: Problem[]): unknown {
  return passes(schema, value) ? value : refuse(schema, value, pointer, problems);
}

function refuse(schema: Schema, value: unknown, pointer: string, problems: Problem[]): undefined {
  report(problems, pointer, refusalCode(schema, value), found(value), allowed(schema));
  return undefined;
}

function refusalCode(schema: Schema, value: unknown): ProblemCode {
  if (value === undefined || value === null) return "missing";
  const def = defOf(schema);
  if (def.type === "literal" || def.type === "enum") return "bad-choice";
  if (def.type === "number" && typeof value === "number" && Number.isFinite(value)) {
    return "out-of-range";
  }
  if (def.type === "array" && Array.isArray(value)) return "out-of-range";
  if (def.type === "string" && typeof value === "string") {
    return descriptionOf(schema) === undefined ? "out-of-range" : "bad-format";
  }
  return "wrong-type";
}

function lengthFits(def: z.core.$ZodArrayDef, length: number): boolean {
  return checksOf(def).every((check) => {
    if (check.check === "min_length") return length >= check.minimum;
    if (check.check === "max_length") return length <= check.maximum;
    throw new Error(`a list's check ${check.check} that this reader doesn't know`);
  });
}

function passes(schema: Schema, value: unknown): boolean {
  return (schema as unknown as z.ZodType).safeParse(value).success;
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === "object" && value !== null && !Array.isArray(value);
}

function report(
  problems: Problem[],
  pointer: string,
  code: ProblemCode,
  what: string,
  allowedWords: string,
): void {
  problems.push({ pointer, code, found: what, allowed: allowedWords });
}
