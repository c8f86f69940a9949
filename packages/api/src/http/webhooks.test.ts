import { afterAll, beforeAll, describe, expect, it } from "vitest";
import * as z from "zod";
import type { Actor } from "@weighhouse/desk/desk";
import { openLagoon } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { answerHttp } from "../http";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";
import { listedWebhookSchema, webhookSchema } from "./webhook-answers";

let server: TestServer;
let lagoon: Lagoon;
const url = "https://tell.example/here";

beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
});
afterAll(() => server.close());

async function ask(
  method: string,
  path: string,
  { actor = lagoon.coordinator, body }: { actor?: Actor; body?: unknown } = {},
) {
  const context = { ...(await server.context()), actor };
  const content =
    body === undefined
      ? {}
      : { body: JSON.stringify(body), headers: { "content-type": "application/json" } };
  const { headers = {}, ...rest } = content as { headers?: object; body?: string };
  const address = `${ORIGIN}/api/v1/campaigns/${lagoon.key}/${path}`;
  const asked = new Request(address, { method, headers: { origin: ORIGIN, ...headers }, ...rest });
  return answerHttp(context, asked);
}

async function listed() {
  const answer = await ask("GET", "webhooks");
  expect(answer.status).toBe(200);
  const schema = z.strictObject({ webhooks: z.array(listedWebhookSchema) });
  return schema.parse(await answer.json()).webhooks;
}

describe("webhooks over HTTP", () => {
  it("are made, listed without their secret, tested, and removed", async () => {
    const made = await ask("POST", "webhooks", { body: { url, movedBy: 0.5, turned: true } });
    expect(made.status).toBe(201);
    const answer = (await made.json()) as { webhook: { id: string }; secret: string };
    const { id } = webhookSchema.parse(answer.webhook);
    expect(answer.secret).toMatch(/^[\w-]{43}$/);
    const [there] = await listed();
    expect(there).toMatchObject({ id, url, movedBy: 0.5, turned: true, deliveries: [] });
    expect(await (await ask("GET", "webhooks")).text()).not.toContain(answer.secret);

    const tested = await ask("POST", `webhooks/${id}/test`);
    const { delivery } = (await tested.json()) as { delivery: string };
    expect((await listed())[0]!.deliveries).toMatchObject([
      { id: delivery, what: "test", tries: 0, deliveredAt: null },
    ]);

    const on = await ask("POST", `webhooks/${id}/switch-on`);
    expect(webhookSchema.parse(await on.json()).switchedOffAt).toBeNull();

    expect((await ask("DELETE", `webhooks/${id}`)).status).toBe(204);
    expect(await listed()).toEqual([]);
    for (const [method, path] of [
      ["DELETE", `webhooks/${id}`],
      ["POST", `webhooks/${id}/test`],
      ["POST", `webhooks/${id}/switch-on`],
    ] as const) {
      expect((await ask(method, path)).status).toBe(404);
    }
  });

  it.each([
    [{ url: "http://tell.example/here", turned: true }, "/url"],
    [{ url: "https://127.0.0.1/here", turned: true }, "/url"],
    [{ url: "here", turned: true }, "/url"],
    [{ url, turned: false }, "/turned"],
    [{ url, turned: true, movedBy: 0 }, "/movedBy"],
    [{ url, turned: true, secret: "mine" }, ""],
  ])("of %j are refused at %s", async (body, pointer) => {
    const refused = await ask("POST", "webhooks", { body });
    expect(refused.status).toBe(422);
    expect(await refused.json()).toMatchObject({ problems: [{ pointer }] });
  });

  it("are their coordinators' alone", async () => {
    for (const [actor, status] of [
      [null, 401],
      [lagoon.reader, 403],
      [lagoon.member, 403],
      [lagoon.stranger, 403],
    ] as const) {
      expect((await ask("GET", "webhooks", { actor })).status).toBe(status);
      expect((await ask("POST", "webhooks", { actor, body: { url, turned: true } })).status).toBe(
        status,
      );
    }
  });

  it("are at most 20 in a campaign", async () => {
    const body = { url, turned: true };
    for (let index = 0; index < 20; index += 1) {
      expect((await ask("POST", "webhooks", { body })).status).toBe(201);
    }
    expect((await ask("POST", "webhooks", { body })).status).toBe(409);
  });
});
