import * as z from "zod";
import { campaignDocumentSchema } from "@weighhouse/campaign/document";
import { standingsSchema } from "@weighhouse/campaign/standings";
import { appendedSchema } from "../http/ledger-answers";
import { postedSchema, previewSchema } from "../http/measurement-answers";
import type { Route } from "../http/route";

export type JsonSchema = Record<string, unknown>;

/** Schemas that are known by a name of their own; others are named for where they stand. */
const known = new Map<z.ZodType, string>([
  [campaignDocumentSchema, "CampaignDocument"],
  [standingsSchema, "Standings"],
  [postedSchema, "Posted"],
  [previewSchema, "Preview"],
  [appendedSchema, "Appended"],
]);

/** RFC 9457, with what this server says beside it. */
const problemSchema = z.looseObject({
  type: z.string(),
  title: z.string(),
  status: z.int(),
  code: z.string().optional().describe("What it is, for programs."),
  detail: z.string().optional().describe("What was found and what is allowed."),
  problems: z
    .array(
      z.looseObject({
        pointer: z.string().describe("Where: a JSON Pointer (RFC 6901) into what was sent."),
        code: z.string(),
        found: z.string(),
        allowed: z.string(),
      }),
    )
    .optional(),
});

export type NamedSchemas = {
  /** As `components.schemas` holds them. */
  schemas: Record<string, JsonSchema>;
  /** The reference to a schema of a route. */
  refTo(schema: z.ZodType): { $ref: string };
};

/** All schemas of bodies and answers, each once, as JSON Schema (draft 2020-12) by name. */
export function nameSchemas(routes: Route[]): NamedSchemas {
  const registry = z.registry<{ id: string }>();
  const names = new Map<z.ZodType, string>();
  const add = (schema: z.ZodType | null, name: string) => {
    if (schema === null || names.has(schema)) return;
    const id = known.get(schema) ?? freeName(name, new Set(names.values()));
    names.set(schema, id);
    registry.add(schema, { id });
  };
  for (const [schema, name] of known) add(schema, name);
  add(problemSchema, "Problem");
  for (const route of routes) {
    const name = pascal(operationId(route));
    for (const { schema } of Object.values(route.takes)) add(schema, `${name}Body`);
    for (const { schema } of Object.values(route.gives.types)) add(schema, `${name}Answer`);
  }
  const made = z.toJSONSchema(registry, { io: "input", uri: pointerTo });
  return {
    schemas: Object.fromEntries(
      Object.entries(made.schemas).map(([name, schema]) => [name, bare(schema)]),
    ),
    refTo: (schema) => ({ $ref: pointerTo(names.get(schema)!) }),
  };
}

/** Without what names the dialect and the place, and what `toJSONSchema` adds for its own validators. */
export function bare(schema: object): JsonSchema {
  const plain = JSON.parse(JSON.stringify(schema)) as JsonSchema;
  for (const member of ["$schema", "$id", "~standard"]) delete plain[member];
  return plain;
}

export const problemRef = { $ref: pointerTo("Problem") };

/** A name for generated clients: the method and the path's words, such as `getLedgerEntriesBySeq`. */
export function operationId({ method, path }: Pick<Route, "method" | "path">): string {
  const words = path
    .replace(/\.\w+$/, "")
    .replaceAll(/\{(\w+)\}/g, "by-$1")
    .split(/[/-]/);
  return method.toLowerCase() + words.map(pascal).join("");
}

function pointerTo(name: string): string {
  return `#/components/schemas/${name}`;
}

function freeName(name: string, taken: Set<string>): string {
  for (let number = 2, free = name; ; number++) {
    if (!taken.has(free)) return free;
    free = `${name}${number}`;
  }
}

function pascal(word: string): string {
  return word.charAt(0).toUpperCase() + word.slice(1);
}
