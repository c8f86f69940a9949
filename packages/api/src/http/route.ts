import * as z from "zod";
import type { Scope } from "@weighhouse/desk/scopes";
import type { Context } from "../context";
import type { RateClass } from "./rate-classes";

/** What a route's answer is asked with: everything in it is read and allowed by the declaration. */
export type Question<P = unknown, Q = unknown> = Context & {
  /** Its body is counted while it is read: past the declared size reading it throws (413). */
  request: Request;
  /** The campaign's. */
  key: string;
  /** What stands in the path's braces. */
  parameters: P;
  query: Q;
  /** The body's media type, one of those declared; "" where the route takes no body. */
  bodyType: string;
  /** The media type to answer in: the one of those declared that the client likes best. */
  answerType: string;
};

export type BodyType = {
  /** A JSON body's form, or that of each line of NDJSON; null: not JSON, `says` tells the form. */
  schema: z.ZodType | null;
  says: string;
  /** The most that is read; null: any size, read as a stream. */
  maxBytes: number | null;
  example?: string;
};

export type AnswerType = { schema: z.ZodType | null; says: string };

/**
 * One line of the API: how it is asked, what it takes and gives. The handler and the description
 * (OpenAPI) are both made from it, so what is described is what happens.
 */
export type Route = {
  method: "GET" | "POST" | "PUT" | "DELETE";
  /** Below `/api/v1/campaigns/{key}/`, such as `ledger/entries/{seq}`. */
  path: string;
  /** Under which heading the description lists it. */
  group: string;
  /** A few words, and what there is more to say. */
  summary: string;
  says?: string;
  /** Which scope a key needs; what a person may do is for the table of roles alone. */
  scope: Scope;
  rate: RateClass;
  parameters: z.ZodObject;
  query: z.ZodObject;
  /** By media type, the first being taken where a body comes without a type; {}: no body. */
  takes: Record<string, BodyType>;
  /** The status of success, and what comes by media type, the preferred first; {}: nothing. */
  gives: { status: 200 | 201 | 204; types: Record<string, AnswerType> };
  /** Whether Idempotency-Key is heeded: for a POST that enters something. */
  once: boolean;
  answer: (question: Question<never, never>) => Promise<Response>;
};

type Declared<P extends z.ZodObject, Q extends z.ZodObject> = Pick<
  Route,
  "method" | "path" | "group" | "summary" | "says" | "scope" | "gives"
> &
  Partial<Pick<Route, "rate" | "takes" | "once">> & {
    parameters?: P;
    query?: Q;
    answer: (question: Question<z.output<P>, z.output<Q>>) => Promise<Response>;
  };

const nothing = z.strictObject({});

/** Declares a route; what is left out is: no parameters, no query, no body, rate by the method. */
export function route<
  P extends z.ZodObject = typeof nothing,
  Q extends z.ZodObject = typeof nothing,
>(declared: Declared<P, Q>): Route {
  return {
    rate: declared.method === "GET" ? "read" : "write",
    takes: {},
    once: false,
    ...declared,
    parameters: declared.parameters ?? nothing,
    query: declared.query ?? nothing,
  };
}
