import { existsSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import { createServer, type IncomingMessage, type ServerResponse } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, afterEach, describe, expect, test } from "vitest";
import { weighhouse } from "./testing/command";

const folder = mkdtempSync(join(tmpdir(), "weighhouse-export-"));
afterAll(() => rmSync(folder, { recursive: true }));
const output = join(folder, "AUDIT.zip");
afterEach(() => rmSync(output, { force: true }));

const archive = Buffer.from("504b0506000000000000000000000000000000000000", "hex");

/** Runs the export against a server that answers as given. */
async function exported(
  answer: (request: IncomingMessage, response: ServerResponse) => void,
  env: Record<string, string> = {},
) {
  const server = createServer(answer);
  await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
  const { port } = server.address() as AddressInfo;
  const url = `http://127.0.0.1:${port}`;
  const ran = await weighhouse(["export", "--campaign", "marsh", "-o", output], {
    env: { WEIGHHOUSE_URL: url, ...env },
  });
  server.close();
  return { ...ran, url };
}

describe("weighhouse export", () => {
  test("saves a public campaign's audit trail", async () => {
    const asked: (string | undefined)[] = [];
    const { code, out, err } = await exported((request, response) => {
      asked.push(request.url, request.headers.authorization);
      response.end(archive);
    });
    expect([code, out, err]).toEqual([0, "", `Saved ${output} (22 bytes)\n`]);
    expect(asked).toEqual(["/api/v1/campaigns/marsh/audit.zip", undefined]);
    expect(readFileSync(output)).toEqual(archive);
  });

  test("sends the API key where one is set", async () => {
    let sent: string | undefined;
    await exported(
      (request, response) => {
        sent = request.headers.authorization;
        response.end(archive);
      },
      { WEIGHHOUSE_API_KEY: "secret" },
    );
    expect(sent).toBe("Bearer secret");
  });

  test("ends with 3 and the server's words where it refuses, and writes nothing", async () => {
    const { code, err, url } = await exported((_, response) => {
      response.writeHead(404, { "content-type": "application/problem+json" });
      response.end(JSON.stringify({ title: "Not Found", detail: "found no campaign marsh" }));
    });
    expect(code).toBe(3);
    expect(err).toBe(
      `${url}/api/v1/campaigns/marsh/audit.zip answered 404: no such campaign, or none that may be read without an account; found no campaign marsh\n`,
    );
    expect(existsSync(output)).toBe(false);
  });

  test("ends with 3 where the answer is no archive", async () => {
    const { code, err } = await exported((_, response) => response.end("<html>"));
    expect(code).toBe(3);
    expect(err).toContain("no ZIP archive");
    expect(existsSync(output)).toBe(false);
  });

  test("ends with 3 where the server breaks off halfway", async () => {
    const { code } = await exported((_, response) => {
      response.writeHead(200, { "content-length": 1000 });
      response.write(archive);
      response.destroy();
    });
    expect(code).toBe(3);
    expect(existsSync(output)).toBe(false);
  });

  test("ends with 3 where nothing listens", async () => {
    const { code, err } = await weighhouse(["export", "--campaign", "marsh", "-o", output], {
      env: { WEIGHHOUSE_URL: "http://127.0.0.1:9" },
    });
    expect(code).toBe(3);
    expect(err).toMatch(/^http:\/\/127\.0\.0\.1:9 could not be reached: .+\n$/);
  });

  test("ends with 2 where WEIGHHOUSE_URL is no address", async () => {
    const { code, err } = await weighhouse(["export", "--campaign", "marsh", "-o", output], {
      env: { WEIGHHOUSE_URL: "localhost:3000" },
    });
    expect(code).toBe(2);
    expect(err).toBe("found WEIGHHOUSE_URL localhost:3000; allowed an http or https address\n");
  });
});
