import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { weighhouse } from "./testing/command";

// What the command says by itself; packages/api has its tests against a server with a database.

const folder = mkdtempSync(join(tmpdir(), "weighhouse-post-"));
const asked: string[] = [];
const server = createServer((request, response) => {
  asked.push(`${request.method} ${request.url?.replace(/=[0-9a-f]{64}$/, "=DIGEST")}`);
  if (request.url?.includes("/tables.json") !== true) {
    response.writeHead(403, { "content-type": "application/problem+json" });
    response.end(
      JSON.stringify({ status: 403, title: "Forbidden", detail: "found no such right" }),
    );
    return;
  }
  response.writeHead(200, { "content-type": "application/json" });
  response.end(JSON.stringify(context));
});
const observable = { key: "glow", title: "Glow", unit: "nW", scale: "linear", conditions: [] };
const context = {
  observables: [{ ...observable, period: null, combine: null }],
  measurands: [
    {
      key: "new-moon",
      observable: "glow",
      title: "At new moon",
      shape: "constant",
      window: null,
      where: {},
    },
  ],
  facilities: [{ key: "pier", title: "Pier" }],
  remembered: [],
};
let url: string;

beforeAll(async () => {
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", () => resolve()));
  url = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
});
afterAll(() => {
  server.close();
  rmSync(folder, { recursive: true });
});

function file(name: string, text: string): string {
  const path = join(folder, name);
  writeFileSync(path, text);
  return path;
}

function post(path: string, ...args: string[]) {
  asked.length = 0;
  const env = { WEIGHHOUSE_URL: url };
  return weighhouse(["post", path, "--campaign", "lagoon-glow", ...args], { env, cwd: folder });
}

const header = "id,measurand,facility,time,value,error\n";

describe("weighhouse post", () => {
  test("tells every row that it can't read, with line and column, and sends nothing", async () => {
    const rows = ["a,new-moon,pier,2026-02-03T22:00:00Z,41,2", "b,new-moon,pier,yesterday,high,2"];
    const path = file("night.csv", `${header}${rows.join("\n")}\n`);
    const { code, out, err } = await post(path);
    expect([code, out]).toEqual([1, ""]);
    const lines = err.trimEnd().split("\n");
    expect(lines[0]).toMatch(/night\.csv:3:time: found .*yesterday.*; allowed /);
    expect(lines[1]).toMatch(/night\.csv:3:value: found .*high.*; allowed /);
    expect(lines.at(-1)).toBe("Nothing was sent; 1 other rows can be read.");
    expect(asked).toEqual(["GET /api/v1/campaigns/lagoon-glow/tables.json?layout=DIGEST"]);
  });

  test("reads columns as they are chosen, and names one that isn't there", async () => {
    const table =
      "name,quantity,site,when,strength,spread\na,new-moon,pier,2026-02-03T22:00:00Z,41,2\n";
    const path = file("odd.csv", table);
    const chosen = ["name=id", "quantity=measurand", "site=facility", "when=observedAt"];
    const flags = chosen.flatMap((one) => ["--match", one]);
    const bad = await post(path, ...flags, "--match=strength=value", "--match", "width=sd");
    expect(bad.code).toBe(1);
    expect(bad.err).toMatch(
      /odd\.csv:width: found no such column; allowed one of name, quantity, site, when, strength, spread\n/,
    );
    // With all of them chosen it is read, and it is the server that refuses.
    const good = await post(path, ...flags, "--match=strength=value", "--match=spread=sd");
    expect(good.code).toBe(3);
    expect(asked.at(-1)).toMatch(/^POST .*\/uploads/);
    expect(good.err).toContain("answered 403: not allowed; found no such right\n");
  });

  test("sends NDJSON as it is, asking nothing of its columns", async () => {
    const { code } = await post(file("rows.ndjson", '{"id":"a"}\n'));
    expect(code).toBe(3);
    expect(asked).toEqual([expect.stringMatching(/^POST .*\/uploads/)]);
  });

  test.each([
    [["--match", "value"], "found --match value; allowed --match COLUMN=FIELD\n"],
    [["--match", "=value"], "found --match =value; allowed --match COLUMN=FIELD\n"],
    [["--dry"], /^found --dry; allowed --campaign, /],
  ])("refuses %j as wrong usage", async (args, words) => {
    const { code, err } = await post(file("any.ndjson", "{}\n"), ...args);
    expect(code).toBe(2);
    expect(err).toMatch(words);
  });

  test("refuses what is no file with 2, and one without rows with 1", async () => {
    expect(await post(join(folder, "none.csv"))).toMatchObject({
      code: 2,
      err: expect.stringContaining("(ENOENT); allowed the path of a file") as string,
    });
    expect(await post(folder)).toMatchObject({ code: 2 });
    expect(await post(file("empty.ndjson", ""))).toMatchObject({ code: 1 });
    expect(await post(file("header.csv", header))).toMatchObject({ code: 1 });
  });
});
