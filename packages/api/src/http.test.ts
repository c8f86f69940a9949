import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { readSealRequest, sealFile } from "@weighhouse/campaign/sealed-file";
import { answerHttp } from "./http";
import { openTestServer, ORIGIN } from "./testing/test-server";
import type { TestServer } from "./testing/test-server";

let server: TestServer;
let open: Lagoon;
let shut: Lagoon;

beforeAll(async () => {
  server = await openTestServer();
  open = await openLagoon(server);
  shut = await openLagoon(server, { key: "shut-lagoon", visibility: "members" });
  for (const { key, member } of [open, shut]) {
    await registerHypothesis(server.desk, member, { key, hypothesis: hypothesis("algae", 40) });
    const source = { from: "drafts" as const, drafts: [reading("n1", 41)] };
    await postMeasurements(server.desk, member, { key, source });
  }
});
afterAll(() => server.close());

async function get(path: string, options: { actor?: Lagoon["member"]; headers?: object } = {}) {
  const context = { ...(await server.context()), actor: options.actor ?? null };
  const headers = new Headers({ ...options.headers });
  return answerHttp(context, new Request(`${ORIGIN}/api/v1/campaigns/${path}`, { headers }));
}

const paths = [
  "audit.zip",
  "document.json",
  "standings.json",
  "ledger/head",
  "ledger/entries",
  "ledger/entries/0",
  "ledger/consistency?from=3",
  "ledger/time-stamps",
];

describe("a public campaign", () => {
  it.each(paths)("gives %s to everyone", async (path) => {
    expect((await get(`${open.key}/${path}`)).status).toBe(200);
  });

  it("gives its document and standings as of a size", async () => {
    const now = (await (await get(`${open.key}/document.json`)).json()) as { measurements: [] };
    expect(now.measurements).toHaveLength(1);
    const first = (await (await get(`${open.key}/document.json?size=1`)).json()) as object;
    expect(first).toMatchObject({ observables: [], measurements: [] });
    const standings = await (await get(`${open.key}/standings.json?size=9`)).json();
    expect(standings).toMatchObject({ asOf: { size: 9 }, measurements: { counted: 0 } });
  });

  it("gives its newest standings, scored now where the scorer is behind", async () => {
    const standings = await (await get(`${open.key}/standings.json`)).json();
    expect(standings).toMatchObject({ measurements: { counted: 1 } });
  });

  it("gives its head as a signed note: origin, size, root, signature", async () => {
    const response = await get(`${open.key}/ledger/head`);
    const lines = (await response.text()).split("\n");
    expect(lines[1]).toMatch(/^\d+$/);
    expect(lines[4]).toMatch(/^— house\.example /);
  });

  it("names the heads that no authority has time-stamped", async () => {
    const stamps = await (await get(`${open.key}/ledger/time-stamps`)).json();
    expect(stamps).toEqual({ stamped: [], missing: [{ size: 10, because: "daily" }] });
  });

  it("gives its entries a line each, with a link to the rest", async () => {
    const response = await get(`${open.key}/ledger/entries?from=2&to=5`);
    const lines = (await response.text()).trimEnd().split("\n");
    const entries = lines.map((line) => JSON.parse(line) as { entry: { seq: number } });
    expect(entries.map(({ entry }) => entry.seq)).toEqual([2, 3, 4]);
    expect(response.headers.get("content-type")).toBe("application/x-ndjson");
    expect(response.headers.get("link")).toBeNull();
  });

  it("names nobody in what it gives of an entry", async () => {
    const entry = (await (await get(`${open.key}/ledger/entries/1`)).json()) as object;
    expect(entry).not.toHaveProperty("name");
    expect(JSON.stringify(entry)).not.toContain(open.coordinator.name);
  });

  it("sends nothing again to who has it already", async () => {
    const first = await get(`${open.key}/document.json`);
    const headers = { "if-none-match": first.headers.get("etag") ?? "" };
    const again = await get(`${open.key}/document.json`, { headers });
    expect(again.status).toBe(304);
    expect(await again.text()).toBe("");
  });

  it("names the archive for its campaign and size", async () => {
    const response = await get(`${open.key}/audit.zip`);
    const disposition = response.headers.get("content-disposition");
    expect(disposition).toBe(`attachment; filename="${open.key}-audit-10.zip"`);
    const begin = Buffer.from(await response.arrayBuffer()).subarray(0, 4);
    // What a ZIP begins with: PKWARE APPNOTE 4.3.7.
    expect(begin.toString("latin1")).toBe("PK\u0003\u0004");
  });
});

describe("a campaign of members", () => {
  it.each(paths)("says of %s only that nothing is there, but to its members", async (path) => {
    const refused = await get(`${shut.key}/${path}`);
    const unknown = await get(`no-such-lagoon/${path}`);
    expect(refused.status).toBe(404);
    expect((await refused.text()).replaceAll(shut.key, "no-such-lagoon")).toBe(
      await unknown.text(),
    );
    expect((await get(`${shut.key}/${path}`, { actor: shut.stranger })).status).toBe(404);
    expect((await get(`${shut.key}/${path}`, { actor: shut.reader })).status).toBe(200);
  });
});

describe("refusals are problem details (RFC 9457)", () => {
  it("with the desk's code", async () => {
    const response = await get("no-such-lagoon/document.json");
    expect(response.headers.get("content-type")).toBe("application/problem+json");
    expect(await response.json()).toEqual({
      type: "about:blank",
      status: 404,
      title: "Not Found",
      code: "not-found",
      detail: expect.stringContaining("no-such-lagoon"),
    });
  });

  it.each([
    ["lagoon-glow/document.json?size=0", 422],
    ["lagoon-glow/document.json?size=999", 404],
    ["lagoon-glow/document.json?size=two", 422],
    ["lagoon-glow/document.json?from=2", 422],
    ["lagoon-glow/ledger/entries/999", 404],
    ["lagoon-glow/ledger/consistency?from=5&to=3", 404],
    ["lagoon-glow/nothing.json", 404],
  ])("of %s: %i", async (path, status) => {
    const response = await get(path);
    expect(response.status).toBe(status);
    expect(await response.json()).toMatchObject({ status, detail: expect.any(String) });
  });

  it("of a POST: what is allowed", async () => {
    const request = new Request(`${ORIGIN}/api/v1/campaigns/lagoon-glow/document.json`, {
      method: "POST",
    });
    const response = await answerHttp(await server.context(), request);
    expect(response.status).toBe(405);
    expect(response.headers.get("allow")).toBe("GET, HEAD");
  });
});

describe("seals sent by a program", () => {
  /** As `weighhouse seal` makes it. */
  function sealedBy(ledger: string) {
    const prediction = { measurand: "full-moon", expected: 30 };
    const bound = { campaign: open.key, ledger, team: "algae", hypothesis: "algae" };
    const asked = { ...bound, until: "2058-01-01T00:00:00Z", prediction };
    const request = readSealRequest(JSON.stringify(asked));
    if (!request.ok) throw new Error(JSON.stringify(request.problems));
    return sealFile(request.value, "5e".repeat(32));
  }

  async function post(path: string, body: unknown, actor: Lagoon["member"] | null) {
    const context = { ...(await server.context()), actor };
    const headers = { "content-type": "application/json", origin: ORIGIN };
    const url = `${ORIGIN}/api/v1/campaigns/${open.key}/${path}`;
    const text = typeof body === "string" ? body : JSON.stringify(body);
    return answerHttp(context, new Request(url, { method: "POST", headers, body: text }));
  }

  it("are filed and opened by their team, refused to others with the reason", async () => {
    const { ledger } = await readCampaign(server.desk, null, { key: open.key });
    const { digest, hypothesis, measurand, until, nonce, content } = sealedBy(ledger);
    const filed = { digest, hypothesis, measurand, until };
    expect((await post("seals", filed, null)).status).toBe(401);
    expect((await post("seals", filed, open.rival)).status).toBe(403);
    const sealed = await post("seals", filed, open.member);
    expect(sealed.status).toBe(201);
    expect(await sealed.json()).toMatchObject({ digest });
    const opening = { digest, nonce, content };
    const wrong = await post("seals/openings", { ...opening, nonce: "00".repeat(32) }, open.member);
    expect(wrong.status).toBe(422);
    expect(await wrong.json()).toMatchObject({ problems: [{ pointer: "/content" }] });
    expect((await post("seals/openings", opening, open.member)).status).toBe(201);
  });

  it("that are no JSON object are refused", async () => {
    expect((await post("seals/openings", "[1]", open.member)).status).toBe(422);
    expect((await post("seals/openings", "{,}", open.member)).status).toBe(422);
    expect((await post("seals", { measurand: 3 }, open.member)).status).toBe(422);
    expect((await post("nothing", {}, open.member)).status).toBe(404);
  });
});
