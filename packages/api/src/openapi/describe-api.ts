import { rateRows } from "../http/rate-classes";
import type { Route } from "../http/route";
import { describeOperation } from "./describe-operation";
import type { Operation } from "./describe-operation";
import { nameSchemas } from "./name-schemas";
import type { JsonSchema } from "./name-schemas";

export type ApiDescription = {
  openapi: "3.1.0";
  info: { title: string; version: string; description: string };
  servers: { url: string }[];
  tags: { name: string }[];
  paths: Record<string, Record<string, Operation>>;
  components: {
    schemas: Record<string, JsonSchema>;
    securitySchemes: Record<string, JsonSchema>;
  };
};

/** The description (OpenAPI 3.1) of what the routes do, made from the routes themselves. */
export function describeApi(routes: Route[], origin: string): ApiDescription {
  const named = nameSchemas(routes);
  const paths: ApiDescription["paths"] = {};
  for (const route of routes) {
    const path = (paths[`/campaigns/{key}/${route.path}`] ??= {});
    path[route.method.toLowerCase()] = describeOperation(route, named);
  }
  return {
    openapi: "3.1.0",
    info: { title: "Weighhouse", version: "1", description: ABOUT },
    servers: [{ url: `${origin}/api/v1` }],
    tags: [...new Set(routes.map(({ group }) => group))].map((name) => ({ name })),
    paths,
    components: { schemas: named.schemas, securitySchemes },
  };
}

const securitySchemes = {
  key: {
    type: "http",
    scheme: "bearer",
    description: "A campaign's API key, made on its page of keys, with the scopes that it needs.",
  },
  session: {
    type: "apiKey",
    in: "cookie",
    name: "weighhouse.session_token",
    description: "The session of who is signed in on this server's own pages.",
  },
};

const rates = () =>
  rateRows()
    .map(
      ({ rate, key, user, address }) =>
        `${rate} ${key} by key, ${user} by account, ${address} by address`,
    )
    .join("; ");

const ABOUT = [
  "What programs read from a campaign and send to it. Public campaigns are read without a key.",
  "A key acts as the member who made it, in its campaign alone, within its scopes: `Authorization: Bearer weighhouse_…`.",
  "Every GET has an ETag and heeds If-None-Match; HEAD works wherever GET does. What is posted is entered whole or not at all. Refusals are problem details (RFC 9457).",
  "A POST that enters something heeds Idempotency-Key: the same again is answered as the first time, for a day.",
  `Requests are counted by key, else by account, else by address; RateLimit tells how many are left, and 429 comes with Retry-After. A minute allows: ${rates()}.`,
].join("\n\n");
