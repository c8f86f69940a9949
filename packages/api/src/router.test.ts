import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { appRouter } from "./router";
import { serveHttp } from "./testing/http-server";
import { openTestServer } from "./testing/test-server";
import type { TestServer } from "./testing/test-server";

let server: TestServer;
let http: Awaited<ReturnType<typeof serveHttp>>;
let lagoon: Lagoon;

beforeAll(async () => {
  server = await openTestServer();
  http = await serveHttp(server);
  lagoon = await openLagoon(server);
});
afterAll(async () => {
  await http.close();
  await server.close();
});

const callerFor = async (actor: Lagoon["member"] | null) =>
  appRouter.createCaller({ ...(await server.context()), actor });

/** A call as the browser makes it, superjson about its input and its answer. */
async function post(procedure: string, input: unknown, headers: Record<string, string> = {}) {
  const response = await fetch(`${http.url}/${procedure}`, {
    method: "POST",
    headers: { "content-type": "application/json", ...headers },
    body: JSON.stringify({ json: input }),
  });
  return { status: response.status, body: (await response.json()) as object };
}

describe("called in the process", () => {
  it("a campaign's whole way: register, preview, post, read", async () => {
    const { key, member } = lagoon;
    const caller = await callerFor(member);
    await caller.hypotheses.register({ key, hypothesis: hypothesis("algae", 40) });
    const source = { from: "drafts" as const, drafts: [reading("n1", 41)] };
    const seen = await caller.measurements.preview({ key, source });
    expect(seen.postable).toBe(true);
    const { appended } = await caller.measurements.post({ key, source });
    const { standings } = await caller.standings.get({ key, size: appended!.to });
    expect({ ...standings, asOf: null }).toEqual(seen.changes?.after);
    const { entries } = await caller.ledger.entries({ key, from: appended!.from });
    expect(entries.map(({ about }) => about)).toEqual([{ keys: ["n1"], count: 1 }]);
    expect((await caller.ledger.entry({ key, seq: appended!.from })).proof.length).toBeGreaterThan(
      0,
    );
    expect(await caller.audit.summary({ key })).toMatchObject({
      size: appended!.to,
      measurements: 1,
    });
  });
});

describe("with a replica that lags", () => {
  it("reads what the replica has and decides on the primary", async () => {
    const lagging = await openTestServer();
    try {
      const { desk, ...context } = await server.context();
      const store = { ...desk.store, readDb: lagging.desk.store.db };
      const caller = appRouter.createCaller({
        ...context,
        desk: { ...desk, store },
        actor: lagoon.member,
      });
      const { key } = lagoon;
      await expect(caller.campaigns.get({ key })).rejects.toMatchObject({ code: "NOT_FOUND" });
      await caller.hypotheses.register({ key, hypothesis: hypothesis("late-for-the-replica", 41) });
    } finally {
      await lagging.close();
    }
  });
});

describe("over HTTP", () => {
  it("a session's cookie is enough to act", async () => {
    const { headers } = await server.signUp("Cora Cookie");
    const cookie = headers.get("cookie") ?? "";
    const campaign = { key: "cookie-cove", title: "Why the cove is calm" };
    const opened = await post("campaigns.open", { campaign }, { cookie });
    expect(opened).toMatchObject({ status: 200, body: { result: { data: { json: { to: 1 } } } } });
  });

  it("a refusal has its status, the desk's code and the fields at fault, and no stack", async () => {
    const { headers } = await server.signUp("Fay Fault");
    const cookie = headers.get("cookie") ?? "";
    const refused = await post(
      "campaigns.open",
      { campaign: { key: "No", title: "T" } },
      { cookie },
    );
    expect(refused.status).toBe(422);
    const { error } = refused.body as { error: { json: { data: { refusal: unknown } } } };
    const { data } = error.json;
    expect(data.refusal).toMatchObject({
      code: "invalid",
      problems: [{ pointer: "/campaign/key", code: "bad-format" }],
    });
    expect(data).not.toHaveProperty("stack");
  });

  it.each([
    ["campaigns.open", { campaign: { key: "k", title: "T" } }, 401],
    ["campaigns.closeRegistration", { key: "lagoon-glow" }, 401],
    ["campaigns.closeRegistration", { key: "no-such-lagoon" }, 404],
    ["campaigns.closeRegistration", { nothing: true }, 422],
  ])("%s of nobody with %j: %i", async (procedure, input, status) => {
    expect((await post(procedure, input)).status).toBe(status);
  });

  it("what goes wrong within is told in no words of its own", async () => {
    const context = await server.context();
    const broken = { ...context, desk: { ...context.desk, store: null as never } };
    await expect(
      appRouter.createCaller(broken).campaigns.get({ key: "lagoon-glow" }),
    ).rejects.toMatchObject({ code: "INTERNAL_SERVER_ERROR" });
  });
});
