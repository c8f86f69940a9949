import { Validator } from "@seriousme/openapi-schema-validator";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import * as z from "zod";
import { actions } from "@weighhouse/desk/roles";
import { scopeActions } from "@weighhouse/desk/scopes";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { answerHttp, routes } from "../http";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";
import { describeApi } from "./describe-api";
import { operationId } from "./name-schemas";

let server: TestServer;
let lagoon: Lagoon;
beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
  const { key, member } = lagoon;
  await registerHypothesis(server.desk, member, { key, hypothesis: hypothesis("algae", 40) });
  const source = { from: "drafts" as const, drafts: [reading("n1", 41)] };
  await postMeasurements(server.desk, member, { key, source });
});
afterAll(() => server.close());

async function get(path: string, headers: Record<string, string> = {}) {
  const context = { ...(await server.context()), actor: lagoon.coordinator };
  return answerHttp(context, new Request(`${ORIGIN}/api/v1/${path}`, { headers }));
}

describe("the API's description", () => {
  it("is OpenAPI 3.1, by a validator that isn't ours", async () => {
    const given = (await (await get("openapi.json")).json()) as Record<string, unknown>;
    const validator = new Validator();
    expect(await validator.validate(given)).toEqual({ valid: true });
    expect(validator.version).toBe("3.1");
    // And the validator does tell what isn't.
    const broken = { ...given, paths: { "no-slash": {} } };
    expect((await new Validator().validate(broken)).valid).toBe(false);
  });

  it("refers to nothing that isn't in it", () => {
    const description = describeApi(routes, ORIGIN);
    const refs = [...JSON.stringify(description).matchAll(/"\$ref":"([^"]+)"/g)];
    expect(refs.length).toBeGreaterThan(50);
    for (const [, ref = ""] of refs) {
      const [, name] = /^#\/components\/schemas\/(\w+)$/.exec(ref) ?? [];
      expect(Object.keys(description.components.schemas), ref).toContain(name);
    }
  });

  it("has each route once, under a name of its own", () => {
    const { paths } = describeApi(routes, ORIGIN);
    const described = Object.entries(paths).flatMap(([path, item]) =>
      Object.entries(item).map(([method, { operationId }]) => `${method} ${path} ${operationId}`),
    );
    const declared = routes.map(
      (route) =>
        `${route.method.toLowerCase()} /campaigns/{key}/${route.path} ${operationId(route)}`,
    );
    expect(described.sort()).toEqual(declared.sort());
    expect(new Set(routes.map(operationId)).size).toBe(routes.length);
  });

  it("is answered with 304 to who has it, and to nothing but GET and HEAD", async () => {
    const first = await get("openapi.json");
    const headers = { "if-none-match": first.headers.get("etag") ?? "" };
    expect((await get("openapi.json", headers)).status).toBe(304);
    const request = new Request(`${ORIGIN}/api/v1/openapi.json`, { method: "DELETE" });
    const refused = await answerHttp(await server.context(), request);
    expect([refused.status, refused.headers.get("allow")]).toEqual([405, "GET, HEAD"]);
  });
});

describe("what is described is what comes", () => {
  const asked: Record<string, string> = { "{seq}": "3", "{id}": "n1" };
  const gets = routes.filter(({ method, path }) => method === "GET" && !path.startsWith("uploads"));

  it.each(gets.map((route) => [route.path, route] as const))("%s", async (path, route) => {
    const filled = path.replaceAll(/\{\w+\}/g, (name) => asked[name] ?? name);
    for (const [type, { schema }] of Object.entries(route.gives.types)) {
      const answer = await get(`campaigns/${lagoon.key}/${filled}`, { accept: type });
      expect(answer.status).toBe(route.gives.status);
      expect(answer.headers.get("content-type")?.split(";")[0]).toBe(type);
      if (schema === null) continue;
      const text = (await answer.text()).trimEnd();
      for (const one of type === "application/x-ndjson" ? text.split("\n") : [text]) {
        const read = schema.safeParse(JSON.parse(one));
        expect(read.error && z.prettifyError(read.error)).toBeUndefined();
      }
    }
  });
});

it("every scope opens something that is described, and every action in it exists", () => {
  for (const [scope, opened] of Object.entries(scopeActions)) {
    expect(routes.map((route) => route.scope)).toContain(scope);
    for (const action of opened) expect(actions).toContain(action);
  }
});
