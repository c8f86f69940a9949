import { execFile } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { createServer, request as forward } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import path from "node:path";
import { fileURLToPath } from "node:url";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { keyOf, serveApi } from "../testing/serve-api";
import { openTestServer } from "../testing/test-server";
import type { TestServer } from "../testing/test-server";

const command = fileURLToPath(new URL("../../../../apps/cli/bin/weighhouse.mjs", import.meta.url));
const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-post-"));
let server: TestServer;
let lagoon: Lagoon;
let api: Awaited<ReturnType<typeof serveApi>>;
let key: string;

beforeAll(async () => {
  server = await openTestServer();
  lagoon = await openLagoon(server);
  await registerHypothesis(server.desk, lagoon.member, {
    key: lagoon.key,
    hypothesis: hypothesis("algae", 40),
  });
  const source = { from: "drafts" as const, drafts: [reading("there", 41)] };
  await postMeasurements(server.desk, lagoon.member, { key: lagoon.key, source });
  api = await serveApi(server);
  const options = { maker: lagoon.member, scopes: ["measurements:post" as const] };
  const { authorization } = await keyOf(server, lagoon.key, options);
  key = authorization.replace("Bearer ", "");
});
afterAll(async () => {
  await api.close();
  await server.close();
  rmSync(folder, { recursive: true });
});

type Ran = { code: number; out: string; err: string };

/** The real command, as a process of its own. */
function post(file: string, ...args: string[]): Promise<Ran> {
  return postTo(api.url, file, ...args);
}

function postTo(url: string, file: string, ...args: string[]): Promise<Ran> {
  const env = { ...process.env, WEIGHHOUSE_URL: url, WEIGHHOUSE_API_KEY: key, COLUMNS: "80" };
  return new Promise((resolve) => {
    const given = [command, "post", file, "--campaign", lagoon.key, ...args];
    const child = execFile(
      process.execPath,
      given,
      { env, cwd: folder, encoding: "utf8" },
      (error, out, err) => resolve({ code: error === null ? 0 : (child.exitCode ?? -1), out, err }),
    );
  });
}

function file(name: string, text: string): string {
  writeFileSync(path.join(folder, name), text);
  return name;
}

const header = "id,measurand,facility,time,value,error\n";
const row = (id: string, value: number | string) =>
  `${id},new-moon,pier,2026-02-03T22:00:00Z,${value},2\n`;

async function measured(): Promise<string[]> {
  const { document } = await readCampaign(server.desk, null, { key: lagoon.key });
  return document.measurements.map(({ id }) => id);
}

/** Lets so many parts of an upload through, then cuts every line. */
async function breakingProxy(parts: number) {
  const seen: string[] = [];
  const proxy = createServer((incoming, outgoing) => {
    const { method = "", url = "", headers } = incoming;
    if (/\/parts\//.test(url) && seen.filter((one) => /\/parts\//.test(one)).length >= parts) {
      incoming.socket.destroy();
      return;
    }
    seen.push(`${method} ${url}`);
    const on = forward(`${api.url}${url}`, { method, headers }, (answer) => {
      outgoing.writeHead(answer.statusCode ?? 500, answer.headers);
      answer.pipe(outgoing);
    });
    incoming.pipe(on);
  });
  await new Promise<void>((resolve) => proxy.listen(0, "127.0.0.1", () => resolve()));
  const { port } = proxy.address() as AddressInfo;
  return { url: `http://127.0.0.1:${port}`, seen, close: () => proxy.close() };
}

/** Rows of some 20 kB, nearly all of it blank. */
function longRows(name: string, count: number): string {
  const blank = " ".repeat(20_000);
  return Array.from(
    { length: count },
    (_, index) => `${JSON.stringify(reading(`${name}-${index}`, 41)).slice(0, -1)}${blank}}\n`,
  ).join("");
}

describe("weighhouse post", () => {
  it("enters a table, and the same again changes nothing", async () => {
    const table = file("night.csv", header + row("a", 41) + row("b", 42));
    expect(await post(table)).toMatchObject({
      code: 0,
      out: expect.stringMatching(/^night\.csv: posted 2 measurements to lagoon-glow, entry \d+\n$/),
    });
    expect(await measured()).toEqual(expect.arrayContaining(["a", "b"]));
    expect(await post(table)).toMatchObject({
      code: 0,
      out: "night.csv: nothing new for lagoon-glow, 2 there already\n",
    });
  });

  it("sends NDJSON as it is, with what rows leave open", async () => {
    const { facility: _, ...open } = reading("open", 40);
    const rows = file("rows.ndjson", `${JSON.stringify(open)}\n`);
    const { code, out } = await post(rows, "--facility", "pier", "--batch", "night-2", "--json");
    expect(code).toBe(0);
    expect(JSON.parse(out)).toMatchObject({ key: lagoon.key, posted: 1, alreadyThere: 0 });
    const { document } = await readCampaign(server.desk, null, { key: lagoon.key });
    expect(document.measurements.find(({ id }) => id === "open")).toMatchObject({
      facility: "pier",
      batch: "night-2",
    });
  });

  it("tells with --dry-run what would happen, and enters nothing", async () => {
    const before = await measured();
    const rows = [1, 2, 3, 4].map((index) => row(`far-${index}`, 80).replace(",2\n", ",0.5\n"));
    const table = file(
      "far.csv",
      header.replace("error", "value_err") + rows.join("") + row("there", 41),
    );
    const { code, out, err } = await post(table, "--dry-run");
    expect([code, err]).toEqual([0, ""]);
    expect(out).toMatch(/^far\.csv: nothing was entered\n4 new, 1 already there\n/);
    expect(out).toMatch(/^value_err +sd +/m);
    expect(out).toMatch(/^algae +new-moon +pass +fail$/m);
    for (const line of out.split("\n")) expect(line.length).toBeLessThanOrEqual(80);
    const asJson = JSON.parse((await post(table, "--dry-run", "--json")).out) as object;
    expect(asJson).toMatchObject({ counts: { new: 4, alreadyThere: 1 }, postable: true, rows: [] });
    expect(await measured()).toEqual(before);
    expect((await post(table)).code).toBe(0);
  });

  it("tells each row that the server refuses at its line and column, and enters nothing", async () => {
    const before = await measured();
    const text = `${header}${row("fresh", 41)}${row("there", 50)}${row("odd", 41).replace("pier", "raft")}`;
    const table = file("bad.csv", text);
    for (const flags of [[], ["--dry-run"]]) {
      const { code, err } = await post(table, ...flags);
      expect(code).toBe(1);
      expect(err).toMatch(
        /^bad\.csv:3:value: found 50 under the id there, which is there with 41; /m,
      );
      expect(err).toMatch(/^bad\.csv:4:facility: found .*raft.*; allowed /m);
    }
    expect(await measured()).toEqual(before);
  });

  it("goes on where a broken line left off, sending no part twice", async () => {
    const rows = file("long.ndjson", longRows("long", 600));
    const proxy = await breakingProxy(1);
    const broken = await postTo(proxy.url, rows);
    expect(broken.code).toBe(3);
    expect(broken.err).toMatch(/could not be reached/);
    expect(proxy.seen.filter((one) => one.startsWith("PUT "))).toHaveLength(1);
    proxy.close();
    const whole = await breakingProxy(Infinity);
    const again = await postTo(whole.url, rows);
    whole.close();
    expect(again).toMatchObject({ code: 0 });
    expect(again.err).toMatch(
      /^Went on where an earlier run broke off: 1 of its parts was there$/m,
    );
    expect(again.out).toMatch(/posted 600 measurements/);
    expect(whole.seen.filter((one) => one.startsWith("PUT "))).toEqual([
      expect.stringMatching(/\/parts\/2$/),
    ]);
  });

  it("names a row of a later part by its line in the file", async () => {
    const text = longRows("late", 600).split("\n");
    text[499] = text[499]!.replace('"value":41', '"value":"high"');
    const rows = file("late.ndjson", text.join("\n"));
    const { code, err } = await post(rows);
    expect(code).toBe(1);
    expect(err).toMatch(/^late\.ndjson:500:value: found "?high"?; allowed a number/m);
  });

  it("ends with 3 where the key is none", async () => {
    const kept = key;
    key = "whk_none";
    const { code, err } = await post(file("any.ndjson", "{}\n"));
    key = kept;
    expect(code).toBe(3);
    expect(err).toMatch(/answered 401: it asks for an API key \(WEIGHHOUSE_API_KEY\)/);
  });
});
