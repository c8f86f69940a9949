import { randomBytes } from "node:crypto";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { claimAnswer, keepAnswer } from "@weighhouse/store/kept-answers";
import { findMembership } from "@weighhouse/store/members";
import { openLagoon } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import type { Context } from "../context";
import { answerHttp } from "../http";
import { answerOnce } from "./answer-once";
import { keyOf } from "../testing/serve-api";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";

let server: TestServer;
let lagoon: Lagoon;
let headers: { authorization: string };
beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
  headers = await keyOf(server, lagoon.key, { maker: lagoon.member, scopes: ["seals", "read"] });
});
afterAll(() => server.close());

const seal = (digest: string) => ({
  digest,
  measurand: "new-moon",
  until: "2058-01-01T00:00:00Z",
});
const digest = () => randomBytes(32).toString("hex");

async function post(body: unknown, key: string, more: Record<string, string> = {}) {
  const request = new Request(`${ORIGIN}/api/v1/campaigns/${lagoon.key}/seals`, {
    method: "POST",
    headers: { "content-type": "application/json", "idempotency-key": key, ...headers, ...more },
    body: typeof body === "string" ? body : JSON.stringify(body),
  });
  return answerHttp(await server.context(), request);
}

describe("a POST with an Idempotency-Key (draft-ietf-httpapi-idempotency-key-header-07)", () => {
  it("that comes again gets the first answer and enters nothing", async () => {
    const body = seal(digest());
    const first = await post(body, '"once-1"');
    expect(first.status).toBe(201);
    expect(first.headers.get("idempotency-replayed")).toBeNull();
    const again = await post(body, '"once-1"');
    expect(again.status).toBe(201);
    expect(again.headers.get("idempotency-replayed")).toBe("true");
    expect(again.headers.get("content-type")).toBe("application/json");
    expect(await again.text()).toBe(await first.text());
    // Without it the same seal is one too many.
    const twice = await post(body, '"once-2"');
    expect(await twice.json()).toMatchObject({ status: 422, problems: [{ code: "duplicate" }] });
  });

  it("may come with its key in quotes or without", async () => {
    const body = seal(digest());
    expect((await post(body, "bare-1")).status).toBe(201);
    expect((await post(body, '"bare-1"')).headers.get("idempotency-replayed")).toBe("true");
  });

  it("with another body, or elsewhere, is refused", async () => {
    expect((await post(seal(digest()), '"other-1"')).status).toBe(201);
    const other = await post(seal(digest()), '"other-1"');
    expect(other.status).toBe(422);
    expect(await other.json()).toMatchObject({ code: "other-body" });
  });

  it("that was refused may come again, mended", async () => {
    const body = seal(digest());
    const refused = await post({ ...body, measurand: "no-moon" }, '"mended-1"');
    expect(refused.status).toBe(422);
    expect((await post("{", '"mended-1"')).status).toBe(422);
    expect((await post(body, '"mended-1"')).status).toBe(201);
  });

  it("of another member with the same key is another request", async () => {
    expect((await post(seal(digest()), '"mine-1"')).status).toBe(201);
    const rival = await keyOf(server, lagoon.key, { maker: lagoon.rival, scopes: ["seals"] });
    expect((await post(seal(digest()), '"mine-1"', rival)).status).toBe(201);
  });

  it.each(['""', '"a b"', `"${"x".repeat(256)}"`, '"quo"te"', "ümlaut"])(
    "with the key %s is refused",
    async (key) => {
      const refused = await post(seal(digest()), key);
      expect(refused.status).toBe(400);
      expect(await refused.json()).toMatchObject({ code: "bad-request" });
    },
  );

  it("of somebody without a place in the campaign is refused for that", async () => {
    const request = new Request(`${ORIGIN}/api/v1/campaigns/${lagoon.key}/seals`, {
      method: "POST",
      headers: { "content-type": "application/json", "idempotency-key": "k", origin: ORIGIN },
      body: JSON.stringify(seal(digest())),
    });
    const actor = lagoon.stranger;
    expect((await answerHttp({ ...(await server.context()), actor }, request)).status).toBe(403);
  });
});

describe("while the first is worked on", () => {
  const once = (
    key: string,
    body: string | ReadableStream<Uint8Array>,
    answer: (request: Request) => Promise<Response>,
  ) =>
    server.context().then((ctx: Context) => {
      const request = new Request(`${ORIGIN}/api/v1/campaigns/${lagoon.key}/measurements`, {
        method: "POST",
        headers: { "idempotency-key": key, "content-type": "application/x-ndjson" },
        body,
        ...({ duplex: "half" } as object),
      });
      const asked = { request, campaign: lagoon.key, actor: lagoon.member };
      return answerOnce(ctx, asked, answer);
    });

  it("the same key is refused; once it is answered, the answer is given", async () => {
    let finish = () => {};
    const begun = new Promise<void>((resolve) => {
      finish = resolve;
    });
    const slow = once('"slow"', "row\n", async (request) => {
      await request.text();
      await begun;
      return new Response("done\n", { status: 201, headers: { "content-type": "text/plain" } });
    });
    await expect.poll(() => rowsOf("slow")).toBe(1);
    const never = () => Promise.reject(new Error("entered twice"));
    await expect(once('"slow"', "row\n", never)).rejects.toMatchObject({
      code: "in-flight",
      headers: { "retry-after": "1" },
    });
    finish();
    expect(await (await slow).text()).toBe("done\n");
    expect(await (await once('"slow"', "row\n", never)).text()).toBe("done\n");
  });

  it("a body of many pieces is digested as it is read, and told from another by its last byte", async () => {
    const pieces = 200;
    const streamOf = (last: string) =>
      new ReadableStream<Uint8Array>({
        start: (controller) => {
          for (let i = 0; i < pieces; i++) controller.enqueue(Buffer.alloc(50_000, "row\n"));
          controller.enqueue(Buffer.from(last));
          controller.close();
        },
      });
    let read = 0;
    const answer = async (request: Request) => {
      for await (const piece of request.body!) read += (piece as Uint8Array).byteLength;
      return new Response("{}", { status: 201, headers: { "content-type": "application/json" } });
    };
    await once('"large"', streamOf("z"), answer);
    expect(read).toBe(pieces * 50_000 + 1);
    const again = await once('"large"', streamOf("z"), answer);
    expect(again.headers.get("idempotency-replayed")).toBe("true");
    await expect(once('"large"', streamOf("y"), answer)).rejects.toMatchObject({
      code: "other-body",
    });
  });

  it("a body that the route has no use for is digested all the same, also an empty stream", async () => {
    const empty = () =>
      new ReadableStream<Uint8Array>({ start: (controller) => controller.close() });
    const answer = () => Promise.resolve(new Response(null, { status: 204 }));
    const never = () => Promise.reject(new Error("entered twice"));
    for (const [key, body] of [
      ['"unread"', () => "unread\n"],
      ['"empty"', empty],
    ] as const) {
      expect((await once(key, body(), answer)).status).toBe(204);
      const again = await once(key, body(), never);
      expect([again.status, again.headers.get("idempotency-replayed")]).toEqual([204, "true"]);
      await expect(once(key, "other", never)).rejects.toMatchObject({ code: "other-body" });
    }
  });

  it("of an answer by lines the last one is given again; one that ends with a problem isn't kept", async () => {
    const lines = (last: string) => async (request: Request) => {
      await request.text();
      const text = `{"progress":{"rows":1}}\n{"progress":{"rows":2}}\n${last}\n`;
      return new Response(text, { headers: { "content-type": "application/x-ndjson" } });
    };
    const failed = await once('"lines"', "row\n", lines('{"problem":{"status":422}}'));
    expect(await failed.text()).toContain("problem");
    const done = await once('"lines"', "row\n", lines('{"done":{"posted":1}}'));
    expect((await done.text()).split("\n")).toHaveLength(4);
    const again = await once('"lines"', "row\n", lines("never"));
    expect(await again.text()).toBe('{"done":{"posted":1}}\n');
  });

  it("a client that goes stops nothing: what came of it is there when it comes again", async () => {
    const answer = async (request: Request) => {
      await request.text();
      let line = 0;
      const body = new ReadableStream<Uint8Array>({
        async pull(controller) {
          await new Promise((resolve) => setTimeout(resolve, 5));
          line++;
          controller.enqueue(Buffer.from(line < 20 ? `{"progress":${line}}\n` : '{"done":true}\n'));
          if (line === 20) controller.close();
        },
      });
      return new Response(body, { headers: { "content-type": "application/x-ndjson" } });
    };
    const left = await once('"left"', "row\n", answer);
    await left.body!.cancel();
    const never = () => Promise.reject(new Error("entered twice"));
    await expect
      .poll(() => once('"left"', "row\n", never).then((kept) => kept.text(), String), {
        timeout: 5_000,
      })
      .toBe('{"done":true}\n');
  });

  it("a fault of ours gives the key up", async () => {
    const broken = () => Promise.reject(new Error("no database"));
    await expect(once('"broken"', "row\n", broken)).rejects.toThrow("no database");
    expect(await rowsOf("broken")).toBe(0);
  });

  it("a claim whose process died may be taken over once it isn't renewed, and a kept answer dies after a day", async () => {
    const { store } = server.desk;
    const { userId } = lagoon.member;
    const place = await findMembership(store, { campaign: lagoon.key, userId });
    const asked = { campaign: lagoon.key, member: place!.member, key: "dead" };
    const first = await claimAnswer(store, asked);
    expect(first.claim).not.toBeNull();
    expect(await claimAnswer(store, asked)).toEqual({ claim: null, kept: null });
    await store.sql`
      update kept_answers set held_until = clock_timestamp() - interval '1 s' where key = 'dead'`;
    const second = await claimAnswer(store, asked);
    expect(second.claim).not.toBeNull();
    const answer = { digest: Buffer.alloc(32), status: 201, headers: {}, body: Buffer.from("x") };
    // Who lost the claim keeps nothing.
    await keepAnswer(store, first.claim!, asked, answer);
    expect(await claimAnswer(store, asked)).toEqual({ claim: null, kept: null });
    await keepAnswer(store, second.claim!, asked, answer);
    expect(await claimAnswer(store, asked)).toMatchObject({ kept: { status: 201 } });
    await store.sql`
      update kept_answers set begun_at = clock_timestamp() - interval '25 h' where key = 'dead'`;
    expect((await claimAnswer(store, asked)).claim).not.toBeNull();
  });

  async function rowsOf(key: string): Promise<number> {
    const [row] = await server.desk.store.sql<{ rows: number }[]>`
      select count(*)::int as rows from kept_answers where key = ${key}`;
    return row?.rows ?? 0;
  }
});
