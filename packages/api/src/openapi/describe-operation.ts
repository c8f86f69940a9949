import * as z from "zod";
import { key as campaignKey } from "@weighhouse/campaign/fields";
import type { Route } from "../http/route";
import { bare, operationId, problemRef } from "./name-schemas";
import type { JsonSchema, NamedSchemas } from "./name-schemas";

export type Parameter = {
  name: string;
  in: "path" | "query" | "header";
  required: boolean;
  description?: string;
  schema: JsonSchema;
};
export type Content = Record<string, { schema: JsonSchema; example?: unknown }>;
export type Described = {
  description: string;
  headers?: Record<string, { description: string; schema: JsonSchema }>;
  content?: Content;
};
export type Operation = {
  operationId: string;
  tags: string[];
  summary: string;
  description: string;
  security: Record<string, string[]>[];
  parameters: Parameter[];
  requestBody?: { required: true; description: string; content: Content };
  responses: Record<string, Described>;
};

const LINES = "application/x-ndjson";

/** One route as OpenAPI 3.1 describes it. */
export function describeOperation(route: Route, named: NamedSchemas): Operation {
  const types = Object.entries(route.takes);
  return {
    operationId: operationId(route),
    tags: [route.group],
    summary: route.summary,
    description: [route.says ?? route.summary, `Scope: ${route.scope}.`].join("\n\n"),
    security: securityOf(route),
    parameters: parametersOf(route),
    ...(types.length === 0
      ? {}
      : {
          requestBody: {
            required: true as const,
            description: [...new Set(types.map(([type, { says }]) => `${type}: ${says}`))].join(
              "\n",
            ),
            content: Object.fromEntries(
              types.map(([type, { schema, says, example }]) => [
                type,
                {
                  schema: schemaOf(type, schema, { says, named }),
                  ...(example === undefined ? {} : { example: exampleOf(type, example) }),
                },
              ]),
            ),
          },
        }),
    responses: responsesOf(route, named),
  };
}

/** A key with the scope, or the session of the server's own pages; a public campaign asks for none. */
function securityOf({ method, scope }: Route): Operation["security"] {
  const either: Operation["security"] = [{ key: [scope] }, { session: [] }];
  return method === "GET" && scope === "read" ? [...either, {}] : either;
}

function parametersOf(route: Route): Parameter[] {
  const key: Parameter = {
    name: "key",
    in: "path",
    required: true,
    description: "The campaign's key.",
    schema: plain(campaignKey),
  };
  return [
    key,
    ...fieldsOf(route.parameters, "path"),
    ...fieldsOf(route.query, "query"),
    ...(route.once ? [IDEMPOTENCY_KEY] : []),
    ...(route.method === "GET" ? [IF_NONE_MATCH] : []),
  ];
}

function fieldsOf(fields: z.ZodObject, place: "path" | "query"): Parameter[] {
  return Object.entries(fields.shape as Record<string, z.ZodType>).map(([name, field]) => {
    const { description, ...schema } = plain(field);
    return {
      name,
      in: place,
      required: place === "path" || !field.safeParse(undefined).success,
      ...(typeof description === "string" ? { description } : {}),
      schema,
    };
  });
}

const IDEMPOTENCY_KEY: Parameter = {
  name: "Idempotency-Key",
  in: "header",
  required: false,
  description:
    "1 to 255 visible letters. The same request with the same key is answered as the first time, for a day, and enters nothing again.",
  schema: { type: "string", minLength: 1, maxLength: 257 },
};

const IF_NONE_MATCH: Parameter = {
  name: "If-None-Match",
  in: "header",
  required: false,
  description: "Tags of what one has; what is still so is answered with 304.",
  schema: { type: "string" },
};

function responsesOf(route: Route, named: NamedSchemas): Operation["responses"] {
  const { status, types } = route.gives;
  const given = Object.entries(types);
  const content = Object.fromEntries(
    given.map(([type, { schema, says }]) => [
      type,
      { schema: schemaOf(type, schema, { says, named }) },
    ]),
  );
  const says = given.map(([, { says }]) => says);
  const success: Described = {
    description: says.length > 0 ? [...new Set(says)].join(" ") : "Done; there is nothing to say.",
    ...(route.method === "GET"
      ? { headers: { ETag: { description: "The tag of this answer.", schema: TEXT } } }
      : {}),
    ...(given.length > 0 ? { content } : {}),
  };
  return {
    [status]: success,
    ...(route.method === "GET" ? { 304: { description: "Still as the client has it." } } : {}),
    ...Object.fromEntries(refusalsOf(route).map(([code, words]) => [code, refusal(code, words)])),
  };
}

const TEXT = { type: "string" };

function refusalsOf(route: Route): [code: number, words: string][] {
  const takes = Object.keys(route.takes).length > 0;
  const enters = route.method !== "GET";
  return [
    ...(route.once ? ([[400, "An Idempotency-Key that is none."]] as const) : []),
    [401, "No account, or a key that opens nothing."],
    [403, "Not allowed to this person, or beyond the key's scopes."],
    [404, "No such campaign, or nothing there that may be seen."],
    [406, "None of the types that are given is wanted."],
    ...(enters
      ? ([[409, "In conflict with what is there, or still being worked on."]] as const)
      : []),
    ...(enters ? ([[412, "Closed for this."]] as const) : []),
    ...(takes ? ([[413, "More than is taken."]] as const) : []),
    ...(takes ? ([[415, "A type that isn't taken."]] as const) : []),
    [422, "Read, and refused: what is wrong stands in problems."],
    [429, "Too many requests."],
    [503, "Others kept writing; try again."],
  ].map(([code, words]) => [code as number, words as string]);
}

function refusal(code: number, description: string): Described {
  const retry = { "Retry-After": { description: "Seconds to wait.", schema: { type: "integer" } } };
  return {
    description,
    ...(code === 429 || code === 503 ? { headers: retry } : {}),
    content: { "application/problem+json": { schema: problemRef } },
  };
}

/** What isn't JSON is a text or bytes to OpenAPI; of lines it can only be said what each is. */
function schemaOf(
  type: string,
  schema: z.ZodType | null,
  { says, named }: { says: string; named: NamedSchemas },
): JsonSchema {
  if (type === "application/json" && schema !== null) {
    return { ...named.refTo(schema), description: says };
  }
  if (type === LINES && schema !== null) {
    const { $ref } = named.refTo(schema);
    return {
      type: "string",
      description: `${says} Each line is JSON by ${$ref}.`,
      "x-line": { $ref },
    };
  }
  if (type === "application/zip") return { contentMediaType: type };
  return { type: "string", description: says };
}

function exampleOf(type: string, example: string): unknown {
  return type === "application/json" ? (JSON.parse(example) as unknown) : example;
}

function plain(schema: z.ZodType): JsonSchema {
  return bare(z.toJSONSchema(schema, { io: "input" }));
}
