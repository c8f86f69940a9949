import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { appendEntries } from "@weighhouse/store/append";
import { openLagoon } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { answerHttp } from "../http";
import { keyOf } from "../testing/serve-api";
import { openTestServer, ORIGIN } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";
import { chooseType } from "./media-types";
import { isKnown } from "./respond";

let server: TestServer;
let lagoon: Lagoon;
beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
});
afterAll(() => server.close());

async function ask(path: string, init: RequestInit = {}) {
  const url = `${ORIGIN}/api/v1/campaigns/${lagoon.key}/${path}`;
  return answerHttp(await server.context(), new Request(url, init));
}

describe("Accept", () => {
  const given = ["application/json", "application/x-ndjson", "text/csv"];

  // The second and third lines are the worked examples of RFC 9110, 12.5.1, on other types.
  it.each([
    [null, "application/json"],
    ["text/csv;q=0.2, application/json", "application/json"],
    ["application/json;q=0.5, text/csv, application/x-ndjson;q=0.8", "text/csv"],
    ["*/*", "application/json"],
    ["text/*", "text/csv"],
    ["application/*;q=0.1, text/csv;q=0.05", "application/json"],
    ["*/*, application/json;q=0", "application/x-ndjson"],
    ["TEXT/CSV; charset=utf-8", "text/csv"],
    ["text/csv;q=two, */*;q=0.1", "application/json"],
  ])("%s gets %s", (accept, type) => {
    expect(chooseType(accept, given)).toBe(type);
  });

  it("of nothing that is given is refused with what is", async () => {
    const refused = await ask("document.json", { headers: { accept: "text/html" } });
    expect(refused.status).toBe(406);
    expect(await refused.json()).toMatchObject({
      code: "not-acceptable",
      detail: "found Accept: text/html; allowed application/json",
    });
  });
});

describe("If-None-Match", () => {
  // RFC 9110, 13.1.2 and 8.8.3.2: a list, compared weakly; * fits whatever there is.
  it.each([
    ['"a"', true],
    ['W/"a"', true],
    ['"b", W/"a" , "c"', true],
    ["*", true],
    ['"b"', false],
    ["a", false],
    ["", false],
    [null, false],
  ])("%s of the tag a: %s", (field, known) => {
    expect(isKnown(field, "a")).toBe(known);
  });

  const paths = [
    "document.json",
    "standings.json",
    "verdicts.json",
    "ledger/head",
    "ledger/entries",
    "ledger/entries/0",
    "ledger/consistency",
    "ledger/time-stamps",
    "audit.zip",
  ];

  it.each(paths)("%s has a tag, and is not sent to who has it", async (path) => {
    const first = await ask(path);
    expect(first.status).toBe(200);
    const etag = first.headers.get("etag") ?? "";
    expect(etag).toMatch(/^"[!#-~]+"$/);
    expect(first.headers.get("vary")).toContain("Authorization");
    const again = await ask(path, { headers: { "if-none-match": `"other", W/${etag}` } });
    expect(again.status).toBe(304);
    expect(again.headers.get("etag")).toBe(etag);
    expect(again.body).toBeNull();
    const head = await ask(path, { method: "HEAD" });
    expect(head.status).toBe(200);
    expect(head.headers.get("etag")).toBe(etag);
    expect(head.headers.get("content-type")).toBe(first.headers.get("content-type"));
    expect(head.body).toBeNull();
  });
});

describe("what a route doesn't take", () => {
  it("is refused by method, with those allowed", async () => {
    const refused = await ask("seals", { method: "DELETE" });
    expect([refused.status, refused.headers.get("allow")]).toEqual([405, "POST"]);
  });

  it("is refused by type, with those taken", async () => {
    const key = await keyOf(server, lagoon.key, { maker: lagoon.member, scopes: ["seals"] });
    const send = (headers: Record<string, string>, body = "{}") =>
      ask("seals", { method: "POST", body, headers: { ...key, ...headers } });
    const csv = await send({ "content-type": "text/csv" });
    expect([csv.status, csv.headers.get("accept-post")]).toEqual([415, "application/json"]);
    const json = { "content-type": "application/json" };
    const coded = await send({ ...json, "content-encoding": "gzip" });
    expect([coded.status, coded.headers.get("accept-encoding")]).toEqual([415, "identity"]);
    expect((await send({ "content-type": "application/json; charset=utf-8" })).status).toBe(422);
  });

  it("is refused by size: by what it says of itself, and once more comes than it says", async () => {
    const key = await keyOf(server, lagoon.key, { maker: lagoon.member, scopes: ["seals"] });
    const headers = { "content-type": "application/json", ...key };
    const large = " ".repeat(3 * 1024 * 1024);
    const said = await ask("seals", {
      method: "POST",
      body: large,
      headers: { ...headers, "content-length": String(large.length) },
    });
    expect(said.status).toBe(413);
    let pulled = 0;
    const endless = new ReadableStream<Uint8Array>({
      pull(controller) {
        pulled++;
        controller.enqueue(Buffer.alloc(65_536, " "));
      },
    });
    const came = await ask("seals", {
      method: "POST",
      body: endless,
      headers,
      ...({ duplex: "half" } as object),
    });
    expect(came.status).toBe(413);
    expect(await came.json()).toMatchObject({ code: "too-large" });
    expect(pulled).toBeLessThan(60);
  });
});

it("pages of the ledger lead on to the last one, each entry once", async () => {
  const { store } = server.desk;
  const teams = Array.from({ length: 2000 }, (_, i) => ({
    kind: "team.joined" as const,
    payload: { key: `crew-${i}`, title: `Crew ${i}` },
  }));
  const { to } = await appendEntries(store, {
    campaign: lagoon.key,
    by: { system: true },
    entries: teams,
  });
  const seen: number[] = [];
  const pages: number[] = [];
  let next: string | undefined = "ledger/entries?from=1";
  while (next !== undefined) {
    const page: Response = await ask(next);
    const lines = (await page.text()).trimEnd().split("\n");
    pages.push(lines.length);
    for (const line of lines) seen.push((JSON.parse(line) as { entry: { seq: number } }).entry.seq);
    // RFC 8288.
    next = /^<\/api\/v1\/campaigns\/lagoon-glow\/([^>]+)>; rel="next"$/.exec(
      page.headers.get("link") ?? "",
    )?.[1];
  }
  expect(seen).toEqual(Array.from({ length: to - 1 }, (_, i) => i + 1));
  expect(pages).toEqual([1000, 1000, to - 2001]);
  expect(await (await ask(`ledger/entries?from=${to}`)).text()).toBe("");
});
