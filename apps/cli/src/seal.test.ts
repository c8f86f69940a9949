import { existsSync, mkdtempSync, readFileSync, rmSync, statSync, writeFileSync } from "node:fs";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { afterAll, beforeEach, describe, expect, test } from "vitest";
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { sealDigest } from "@weighhouse/ledger/seal";
import type { SealedFile } from "@weighhouse/campaign/sealed-file";
import { weighhouse } from "./testing/command";

let folder = "";
beforeEach(() => {
  if (folder !== "") rmSync(folder, { recursive: true });
  folder = mkdtempSync(join(tmpdir(), "weighhouse-seal-"));
});
afterAll(() => rmSync(folder, { recursive: true }));

const request = {
  campaign: "marsh",
  ledger: "weighhouse/1",
  team: "reeds",
  hypothesis: "warm-spring",
  until: "2031-06-01T00:00:00Z",
  prediction: { measurand: "vapour", expected: 20, tolerance: { family: "normal", sd: 2 } },
};

function written(name: string, content: unknown): string {
  const path = join(folder, name);
  writeFileSync(path, JSON.stringify(content));
  return path;
}

async function sealed(): Promise<{ path: string; file: SealedFile; out: string; err: string }> {
  const { out, err } = await weighhouse(["seal", written("vapour.json", request)]);
  const path = join(folder, "vapour.sealed.json");
  return { path, file: JSON.parse(readFileSync(path, "utf8")) as SealedFile, out, err };
}

describe("weighhouse seal", () => {
  test("writes a file to keep, readable by its owner alone, and prints what to file", async () => {
    const { path, file, out, err } = await sealed();
    expect(statSync(path).mode & 0o777).toBe(0o600);
    const { team, hypothesis, ledger } = request;
    const bound = { ledger, team, hypothesis, measurand: "vapour" };
    const { digest, nonce, content } = file;
    expect(nonce).toMatch(/^[0-9a-f]{64}$/);
    expect(digest).toBe(sealDigest(nodeHasher, { ...bound, nonce, content }));
    expect(content).toMatchObject(request.prediction);
    const { until } = request;
    expect(JSON.parse(out)).toEqual({ digest, hypothesis, measurand: "vapour", until });
    expect(err).toContain(`Kept ${path}`);
    expect(`${out}${err}`).not.toContain("20,");
  });

  test("makes another seal of the same content, and never writes over a kept file", async () => {
    const { path, file } = await sealed();
    const again = await weighhouse(["seal", join(folder, "vapour.json")]);
    expect(again).toMatchObject({
      code: 2,
      err: expect.stringContaining(`${path} already`) as string,
    });
    const other = join(folder, "other.json");
    await weighhouse(["seal", join(folder, "vapour.json"), "-o", other]);
    const second = JSON.parse(readFileSync(other, "utf8")) as SealedFile;
    expect(second.nonce).not.toBe(file.nonce);
    expect(second.digest).not.toBe(file.digest);
  });

  test.each([
    [{ prediction: null }, "(document): found neither; allowed one of prediction and measurement"],
    [{ hypothesis: null }, "/hypothesis: found nothing"],
    [{ until: "June" }, '/until: found "June"; allowed an RFC 3339 time'],
    [{ prediction: { measurand: "vapour", hoped: 1 } }, '/prediction: found the property "hoped"'],
  ])("ends with 1 and the place where the request is wrong: %j", async (wrong, words) => {
    const { code, err } = await weighhouse(["seal", written("bad.json", { ...request, ...wrong })]);
    expect(code).toBe(1);
    expect(err).toContain(words);
    expect(existsSync(join(folder, "bad.sealed.json"))).toBe(false);
  });
});

describe("weighhouse reveal", () => {
  async function revealed(path: string, status: number, answer: object) {
    const asked: { url: string | undefined; key: string | undefined; body: unknown }[] = [];
    const server = createServer((incoming, response) => {
      let body = "";
      incoming.on("data", (chunk: Buffer) => (body += chunk.toString()));
      incoming.on("end", () => {
        const key = incoming.headers.authorization;
        asked.push({ url: `${incoming.method} ${incoming.url}`, key, body: JSON.parse(body) });
        response.writeHead(status, { "content-type": "application/json" });
        response.end(JSON.stringify(answer));
      });
    });
    await new Promise<void>((resolve) => server.listen(0, "127.0.0.1", resolve));
    const { port } = server.address() as AddressInfo;
    const env = { WEIGHHOUSE_URL: `http://127.0.0.1:${port}`, WEIGHHOUSE_API_KEY: "secret" };
    const ran = await weighhouse(["reveal", path], { env });
    server.close();
    return { ...ran, asked };
  }

  test("sends the kept file's nonce and content to the campaign's server", async () => {
    const { path, file } = await sealed();
    const { digest, nonce, content } = file;
    const { code, out, asked } = await revealed(path, 201, { from: 12, to: 13 });
    expect([code, out]).toEqual([0, `Opened ${digest} in marsh, entry 12\n`]);
    expect(asked).toEqual([
      {
        url: "POST /api/v1/campaigns/marsh/seals/openings",
        key: "Bearer secret",
        body: { digest, nonce, content },
      },
    ]);
  });

  test("ends with 3 and the server's words where it refuses", async () => {
    const { path } = await sealed();
    const detail = "found an opening by team sedge";
    const { code, err } = await revealed(path, 422, { title: "Unprocessable Content", detail });
    expect(code).toBe(3);
    expect(err).toContain(`answered 422: Unprocessable Entity; ${detail}`);
  });

  test("sends nothing where the file was changed since it was sealed", async () => {
    const { file } = await sealed();
    const changed = { ...file, content: { ...file.content, expected: 21 } };
    const { code, err, asked } = await revealed(written("changed.json", changed), 201, { from: 1 });
    expect(code).toBe(1);
    expect(err).toContain("/content: found a content and nonce of digest");
    expect(asked).toEqual([]);
  });
});
