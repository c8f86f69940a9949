import type * as z from "zod";

/** Any Zod schema, with its definition open to be walked: what kind it is, and of what. */
export type Schema = z.core.$ZodTypes;
export type SchemaDef = Schema["_zod"]["def"];
export type CheckDef = z.core.$ZodChecks["_zod"]["def"];
type Checked = { checks?: z.core.$ZodCheck<never>[] };

export function defOf(schema: z.core.$ZodType): SchemaDef {
  return (schema as unknown as { def: SchemaDef }).def;
}

/** Bounds, lengths and patterns of a schema, as plain data. */
export function checksOf(def: Checked): CheckDef[] {
  return (def.checks ?? []).map((check) => (check as unknown as z.core.$ZodChecks)["_zod"].def);
}

export function descriptionOf(schema: z.core.$ZodType): string | undefined {
  return (schema as unknown as z.ZodType).description;
}

/** The members of an object's schema, in its order; a transform behind it doesn't matter. */
export function membersOf(schema: z.core.$ZodType): string[] {
  const def = defOf(schema);
  if (def.type === "pipe") return membersOf(def.in);
  return def.type === "object" ? Object.keys(def.shape) : [];
}
