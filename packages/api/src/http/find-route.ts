import * as z from "zod";
import { DeskError } from "@weighhouse/desk/desk-error";
import { ApiError } from "./api-error";
import type { Route } from "./route";

export type Found = { route: Route; key: string; parameters: Record<string, unknown> };

const CAMPAIGN = /^\/api\/v1\/campaigns\/([^/]+)\/(.+)$/;
const LARGEST = 15;

/** Finds by path, then by method, so that what is allowed at a path can be told. */
export function routeFinder(routes: Route[]): (method: string, path: string) => Found {
  const patterns = routes.map((route) => ({ route, pattern: patternOf(route.path) }));
  return (method, path) => {
    const [, key = "", below = ""] = CAMPAIGN.exec(path) ?? [];
    const there = patterns.filter(({ pattern }) => pattern.test(below));
    if (there.length === 0) throw new DeskError("not-found", `found nothing at ${path}`);
    const asked = method === "HEAD" ? "GET" : method;
    const found = there.find(({ route }) => route.method === asked);
    if (found === undefined) throw wrongMethod(method, there);
    const texts = found.pattern.exec(below)?.groups ?? {};
    const parameters = readTexts(found.route.parameters, Object.entries(texts), "path");
    return { route: found.route, key, parameters };
  };
}

/** The query by the route's schema; what stands in none is refused, as it would be overlooked else. */
export function readQuery(route: Route, query: URLSearchParams): Record<string, unknown> {
  return readTexts(route.query, [...query], "query");
}

function patternOf(path: string): RegExp {
  const source = path.replaceAll(".", "\\.").replaceAll(/\{(\w+)\}/g, "(?<$1>[^/]+)");
  return new RegExp(`^${source}$`);
}

function wrongMethod(method: string, there: { route: Route }[]): ApiError {
  const methods = there.map(({ route }) => (route.method === "GET" ? "GET, HEAD" : route.method));
  const allow = methods.join(", ");
  return new ApiError("method-not-allowed", `found ${method}; allowed ${allow}`, { allow });
}

/** Texts of an address by a schema of whole numbers, yes or no, and texts. */
function readTexts(
  schema: z.ZodObject,
  texts: [name: string, text: string][],
  place: "path" | "query",
): Record<string, unknown> {
  const names = Object.keys(schema.shape);
  const read: Record<string, unknown> = {};
  for (const [name, text] of texts) {
    const field = (schema.shape as Record<string, z.ZodType>)[name];
    const known = names.length > 0 ? `the names ${names.join(", ")}` : "none";
    if (field === undefined) throw refused(place, `${name}=${text}`, known);
    if (Object.hasOwn(read, name)) throw refused(place, `${name} twice`, "each name once");
    const form = z.toJSONSchema(field, { io: "output" });
    const value = form.type === "integer" ? wholeNumber(text) : text;
    if (value === null || !field.safeParse(value).success) {
      throw refused(place, `${name}=${text}`, allowedWords(name, form));
    }
    read[name] = field.parse(value);
  }
  for (const name of names) {
    if (!Object.hasOwn(read, name)) {
      const absent = (schema.shape as Record<string, z.ZodType>)[name]!.safeParse(undefined);
      if (!absent.success) throw refused(place, `no ${name}`, `${name} in the ${place}`);
      if (absent.data !== undefined) read[name] = absent.data;
    }
  }
  return read;
}

function wholeNumber(text: string): number | null {
  return /^\d+$/.test(text) && text.length <= LARGEST ? Number(text) : null;
}

function allowedWords(name: string, form: z.core.JSONSchema.BaseSchema): string {
  if (form.type === "integer") {
    return `${name} as a whole number of ${form.minimum ?? 0} or more`;
  }
  return form.enum
    ? `${name} as one of ${form.enum.join(", ")}`
    : `${name} ${form.description ?? "as a text"}`;
}

function refused(place: "path" | "query", found: string, allowed: string): DeskError {
  return new DeskError("invalid", `found ${found} in the ${place}; allowed ${allowed}`);
}
