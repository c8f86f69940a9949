import { execFile } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { readSealRequest, sealFile } from "@weighhouse/campaign/sealed-file";
import { revokeApiKey } from "@weighhouse/desk/revoke-api-key";
import { listApiKeys } from "@weighhouse/desk/list-api-keys";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import type { Scope } from "@weighhouse/desk/scopes";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { answerHttp } from "../http";
import { keyOf, serveApi } from "../testing/serve-api";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";

const command = fileURLToPath(new URL("../../../../apps/cli/bin/weighhouse.mjs", import.meta.url));
const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-keys-"));
const DIGEST = "5e".repeat(32);
let server: TestServer;
let open: Lagoon;
let shut: Lagoon;
let api: Awaited<ReturnType<typeof serveApi>>;

beforeAll(async () => {
  server = await openTestServer();
  open = await openLagoon(server);
  shut = await openLagoon(server, { key: "shut-lagoon", visibility: "members" });
  await registerHypothesis(server.desk, open.member, {
    key: open.key,
    hypothesis: hypothesis("algae", 40),
  });
  api = await serveApi(server);
});
afterAll(async () => {
  await api.close();
  await server.close();
  rmSync(folder, { recursive: true, force: true });
});

type Sent = { headers?: Record<string, string>; body?: unknown; actor?: Lagoon["member"] };

async function ask(method: string, path: string, { headers, body, actor }: Sent = {}) {
  const type: Record<string, string> = body ? { "content-type": "application/json" } : {};
  const request = new Request(`${ORIGIN}/api/v1/campaigns/${path}`, {
    method,
    ...(body ? { body: JSON.stringify(body) } : {}),
    headers: { ...type, ...headers },
  });
  return answerHttp({ ...(await server.context()), actor: actor ?? null }, request);
}

describe("a key in Authorization: Bearer (RFC 6750)", () => {
  it("reads a campaign of members", async () => {
    const headers = await keyOf(server, shut.key, { maker: shut.member, scopes: ["read"] });
    expect((await ask("GET", `${shut.key}/document.json`)).status).toBe(404);
    expect((await ask("GET", `${shut.key}/document.json`, { headers })).status).toBe(200);
  });

  it.each([
    ["cut short", "weighhouse_abc", "cut short or mistyped"],
    ["of nothing", "", "cut short or mistyped"],
  ])("%s is refused with invalid_token", async (_, text, why) => {
    const headers = { authorization: `Bearer ${text}` };
    const refused = await ask("GET", `${open.key}/document.json`, { headers });
    expect(refused.status).toBe(401);
    expect(refused.headers.get("www-authenticate")).toMatch(/^Bearer error="invalid_token"/);
    expect(await refused.json()).toMatchObject({
      status: 401,
      code: "bad-key",
      detail: expect.stringContaining(why) as string,
    });
  });

  it("of another campaign is refused, also where everyone may read", async () => {
    const headers = await keyOf(server, shut.key, { maker: shut.member, scopes: ["read"] });
    expect((await ask("GET", `${open.key}/document.json`, { headers })).status).toBe(401);
    expect((await ask("GET", "no-such-lagoon/document.json", { headers })).status).toBe(401);
  });

  it("that was revoked is refused from then on", async () => {
    const headers = await keyOf(server, open.key, { maker: open.member, scopes: ["read"] });
    expect((await ask("GET", `${open.key}/document.json`, { headers })).status).toBe(200);
    const [newest] = await listApiKeys(server.desk, open.member, { key: open.key });
    await revokeApiKey(server.desk, open.member, { key: open.key, id: newest!.id });
    const refused = await ask("GET", `${open.key}/document.json`, { headers });
    expect(await refused.json()).toMatchObject({ status: 401, detail: /revoked/ });
  });

  it("without the scope is refused with insufficient_scope, whatever its maker may do", async () => {
    const headers = await keyOf(server, open.key, { maker: open.coordinator, scopes: ["read"] });
    const body = { digest: DIGEST, measurand: "new-moon", until: "2058-01-01T00:00:00Z" };
    const refused = await ask("POST", `${open.key}/seals`, { headers, body });
    expect(refused.status).toBe(403);
    expect(refused.headers.get("www-authenticate")).toBe(
      'Bearer error="insufficient_scope", scope="seals"',
    );
    expect(await refused.json()).toMatchObject({ code: "insufficient-scope" });
    const others = await keyOf(server, open.key, { maker: open.coordinator, scopes: ["seals"] });
    expect((await ask("GET", `${open.key}/document.json`, { headers: others })).status).toBe(403);
  });

  it("counts before the session's cookie, which is left aside", async () => {
    const headers = { authorization: `Bearer ${"x".repeat(51)}` };
    const refused = await ask("GET", `${open.key}/document.json`, { headers, actor: open.member });
    expect(refused.status).toBe(401);
  });

  it("who isn't signed in is told how to ask", async () => {
    const body = { digest: DIGEST, measurand: "new-moon", until: "2058-01-01T00:00:00Z" };
    const refused = await ask("POST", `${open.key}/seals`, { body });
    expect(refused.status).toBe(401);
    expect(refused.headers.get("www-authenticate")).toBe("Bearer");
  });
});

it("no key is in the log, whatever becomes of its request", async () => {
  const lines: string[] = [];
  const note = (fields: object, message: string) =>
    void lines.push(JSON.stringify(fields) + message);
  const log = { info: note, warn: note, error: note };
  const good = await keyOf(server, open.key, { maker: open.member, scopes: ["read"] });
  const bad = { authorization: `${good.authorization}a` };
  const context = { ...(await server.context()), log };
  const broken = { ...context, desk: { ...context.desk, store: null as never } };
  const statuses: number[] = [];
  for (const [ctx, headers] of [
    [context, good],
    [context, bad],
    [broken, good],
  ] as const) {
    const url = `${ORIGIN}/api/v1/campaigns/${open.key}/document.json`;
    const answer = await answerHttp(ctx, new Request(url, { headers }));
    statuses.push(answer.status);
    expect(await answer.text()).not.toContain(good.authorization.slice(-40));
  }
  expect(statuses).toEqual([200, 401, 500]);
  expect(lines.length).toBeGreaterThan(0);
  expect(lines.join("\n")).not.toContain(good.authorization.slice(-40));
});

describe("one scope is enough for what it is for", () => {
  const row = { ...reading("by-scope", 41), batch: "one" };
  const id = "by-scope";
  const correction = { reason: "read off again", measurement: { ...row, value: 42 } };
  const until = "2058-01-01T00:00:00Z";

  it.each<[Scope, string, string, object | undefined, number]>([
    ["read", "GET", "document.json", undefined, 200],
    ["read", "GET", "audit.zip", undefined, 200],
    ["measurements:post", "POST", "measurements/preview", row, 200],
    ["measurements:post", "POST", "measurements", row, 201],
    ["measurements:correct", "POST", "corrections/preview", { corrections: [correction] }, 200],
    ["measurements:correct", "POST", "corrections", { corrections: [correction] }, 201],
    [
      "measurements:correct",
      "POST",
      "withdrawals/preview",
      { selection: { by: "ids", ids: [id] } },
      200,
    ],
    ["measurements:correct", "POST", "set-asides", { id, reason: "clouds" }, 201],
    ["seals", "POST", "seals", { digest: "7a".repeat(32), measurand: "new-moon", until }, 201],
    ["webhooks", "GET", "webhooks", undefined, 200],
  ])("%s: %s %s", async (scope, method, path, body, status) => {
    const headers = await keyOf(server, open.key, { maker: open.coordinator, scopes: [scope] });
    const answer = await ask(method, `${open.key}/${path}`, { headers, body });
    const said = answer.status === status ? "" : await answer.text();
    expect([answer.status, said]).toEqual([status, ""]);
  });
});

describe("a session's cookie", () => {
  const body = { digest: DIGEST };
  const post = (headers: Record<string, string>) =>
    ask("POST", "lagoon-glow/seals/openings", { headers, body, actor: open.member });

  it.each([
    ["from a page of another origin", { origin: "http://elsewhere.example" }],
    ["from another port of this host", { origin: "http://localhost:8080" }],
    ["from a page that hides its origin", { origin: "null" }],
    ["from another site's page, by Fetch Metadata", { "sec-fetch-site": "cross-site" }],
    ["from a sibling's page", { origin: ORIGIN, "sec-fetch-site": "same-site" }],
    ["from what names no origin at all", {}],
  ])("opens nothing %s", async (_, headers: Record<string, string>) => {
    const refused = await post(headers);
    expect(refused.status).toBe(403);
    expect(await refused.json()).toMatchObject({ code: "other-origin" });
  });

  it.each([
    ["of this origin", { origin: ORIGIN }],
    ["of this origin, by Fetch Metadata too", { origin: ORIGIN, "sec-fetch-site": "same-origin" }],
    ["by the address that it calls", { origin: "http://10.1.2.3:80", host: "10.1.2.3:80" }],
  ])("is enough for a page %s", async (_, headers: Record<string, string>) => {
    // Let through to the use-case, which finds no such seal or no such nonce.
    expect((await post(headers)).status).toBe(422);
  });

  it("reads from wherever: an answer can't be seen by another origin's page", async () => {
    const headers = { origin: "http://elsewhere.example" };
    const read = await ask("GET", `${shut.key}/document.json`, { headers, actor: shut.reader });
    expect(read.status).toBe(200);
    expect(read.headers.get("access-control-allow-origin")).toBeNull();
  });
});

describe("weighhouse reveal", () => {
  /** The command as its users run it, in a process of its own. */
  function reveal(file: string, key: string | undefined) {
    const env = { ...process.env, WEIGHHOUSE_URL: api.url, WEIGHHOUSE_API_KEY: key ?? "" };
    return new Promise<{ code: number; out: string; err: string }>((resolve) => {
      execFile(process.execPath, [command, "reveal", file], { env }, (error, out, err) =>
        resolve({ code: (error?.code as number | undefined) ?? 0, out, err }),
      );
    });
  }

  it("opens a seal with a key for seals, and says why where it has none", async () => {
    const { ledger } = await readCampaign(server.desk, null, { key: open.key });
    const prediction = { measurand: "full-moon", expected: 30 };
    const bound = { campaign: open.key, ledger, team: "algae", hypothesis: "algae" };
    const asked = readSealRequest(
      JSON.stringify({ ...bound, until: "2058-01-01T00:00:00Z", prediction }),
    );
    if (!asked.ok) throw new Error(JSON.stringify(asked.problems));
    const file = path.join(folder, "sealed.json");
    const sealed = sealFile(asked.value, "5e".repeat(32));
    writeFileSync(file, JSON.stringify(sealed));
    const headers = await keyOf(server, open.key, { maker: open.member, scopes: ["seals"] });
    const { digest, hypothesis, measurand, until } = sealed;
    const body = { digest, hypothesis, measurand, until };
    expect((await ask("POST", `${open.key}/seals`, { headers, body })).status).toBe(201);
    const key = headers.authorization.slice("Bearer ".length);

    expect(await reveal(file, undefined)).toMatchObject({
      code: 3,
      err: expect.stringContaining("it asks for an API key (WEIGHHOUSE_API_KEY)") as string,
    });
    const reader = await keyOf(server, open.key, { maker: open.member, scopes: ["read"] });
    const refused = await reveal(file, reader.authorization.slice("Bearer ".length));
    expect(refused.code).toBe(3);
    expect(refused.err).toContain("allowed with the scope seals");
    expect(refused.err).not.toContain(reader.authorization.slice(-20));
    const opened = await reveal(file, key);
    expect(opened).toMatchObject({ code: 0, err: "" });
    expect(opened.out).toContain(`Opened ${digest} in ${open.key}, entry`);
    expect((await reveal(file, key)).code).toBe(3);
  }, 30_000);
});
