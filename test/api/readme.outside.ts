import { spawn } from "node:child_process";
import type { ChildProcess } from "node:child_process";
import { once } from "node:events";
import { mkdtempSync, readFileSync, rmSync } from "node:fs";
import { createServer } from "node:net";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { keyOf, serveApi } from "@weighhouse/api/testing/serve-api";
import { openTestServer } from "@weighhouse/api/testing/test-server";
import type { TestServer } from "@weighhouse/api/testing/test-server";
import { testWebhook } from "@weighhouse/desk/change-webhook";
import { listWebhooks } from "@weighhouse/desk/list-webhooks";
import { makeWebhook } from "@weighhouse/desk/make-webhook";
import { postMeasurements } from "@weighhouse/desk/post-measurements";
import { appendEntries } from "@weighhouse/store/append";
import { registerHypothesis } from "@weighhouse/desk/register-hypothesis";
import { hypothesis, openLagoon, reading } from "@weighhouse/desk/testing/lagoon";
import type { Lagoon } from "@weighhouse/desk/testing/lagoon";
import { runScorer } from "../../apps/scorer/src/run-scorer";

// The examples of the API's README as printed, by Debian's own curl and python3, against a server on
// a real socket and a real PostgreSQL.

const readme = readFileSync(
  path.resolve(import.meta.dirname, "../../packages/api/README.md"),
  "utf8",
);
const folder = mkdtempSync(path.join(tmpdir(), "weighhouse-readme-"));
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

/** A block of the README by the name after its language. */
function example(name: string): { command: string; text: string } {
  const found = new RegExp("```(sh|python) " + name + "\\n(.*?)```", "s").exec(readme);
  if (found === null) throw new Error(`the README has no example ${name}`);
  const [, language, text] = found;
  return { command: language === "sh" ? "/bin/bash" : "/usr/bin/python3", text: text! };
}

function start(name: string, env: Record<string, string> = {}): ChildProcess {
  const { command, text } = example(name);
  return spawn(command, [...(command === "/bin/bash" ? ["-euo", "pipefail"] : []), "-c", text], {
    cwd: folder,
    env: {
      PATH: "/usr/bin:/bin",
      WEIGHHOUSE_URL: api.url,
      WEIGHHOUSE_API_KEY: key,
      PYTHONWARNINGS: "error",
      ...env,
    },
    stdio: ["ignore", "pipe", "pipe"],
  });
}

async function run(name: string): Promise<string> {
  const child = start(name);
  let [out, err] = ["", ""];
  child.stdout!.setEncoding("utf8").on("data", (text: string) => (out += text));
  child.stderr!.setEncoding("utf8").on("data", (text: string) => (err += text));
  const [code] = (await once(child, "close")) as [number | null];
  expect([code, err]).toEqual([0, ""]);
  return out;
}

it("every example that names itself is run here", () => {
  const named = [...readme.matchAll(/^```(?:sh|python) (\S+)$/gm)].map(([, name]) => name);
  expect(named).toEqual([
    "curl-post",
    "python-post",
    "python-refused",
    "python-retry",
    "curl-standings",
    "curl-conditional",
    "python-ledger",
    "python-receiver",
  ]);
});

describe("the README's examples", () => {
  it("post with curl, and the same again changes nothing", async () => {
    expect(JSON.parse(await run("curl-post"))).toMatchObject({ posted: 2, alreadyThere: 0 });
    expect(JSON.parse(await run("curl-post"))).toMatchObject({ posted: 0, alreadyThere: 2 });
  });

  it("post with Python's standard library", async () => {
    expect(await run("python-post")).toBe("1 posted\n");
  });

  it("tell what is refused, where", async () => {
    const said = await run("python-refused");
    expect(said).toMatch(/^\/0\/sd: found -1; allowed .*\n/m);
  });

  it("try again with an Idempotency-Key", async () => {
    expect(await run("python-retry")).toMatch(/'posted': 1/);
  });

  it("read standings as of a size", async () => {
    const standings = JSON.parse(await run("curl-standings")) as object;
    expect(standings).toMatchObject({ asOf: { size: 9 }, measurements: { counted: 0 } });
  });

  it("ask again only for what changed", async () => {
    expect(await run("curl-conditional")).toBe("304\n");
    const standings = JSON.parse(
      readFileSync(path.join(folder, "standings.json"), "utf8"),
    ) as object;
    expect(standings).toMatchObject({ measurements: { counted: 4 } });
  });

  it("read the ledger to its end, past one page of 1,000 entries", async () => {
    const remark = {
      kind: "remark.made" as const,
      payload: { on: 0, kind: "question", text: "?" },
    };
    const entries = Array.from({ length: 1000 }, () => remark);
    const by = { system: true } as const;
    const { to } = await appendEntries(server.desk.store, { campaign: lagoon.key, by, entries });
    const lines = (await run("python-ledger")).trimEnd().split("\n");
    expect(lines.map((line) => Number(line.split(" ")[0]))).toEqual([...Array(to).keys()]);
    expect(lines[0]).toMatch(/^0 \S+Z campaign\.opened$/);
    expect(lines.at(-1)).toMatch(/ remark\.made$/);
  });
});

describe("the README's receiver of webhooks", () => {
  it("takes what the scorer sends, and refuses what was altered, is old or is another's", async () => {
    const port = await freePort();
    const url = `http://127.0.0.1:${port}/told?by=weighhouse`;
    const webhooks = { reach: "private" as const, origin: "https://weighhouse.example" };
    const desk = { ...server.desk, webhooks };
    const { coordinator } = lagoon;
    const made = { key: lagoon.key, url, movedBy: 0.1, turned: true };
    const { webhook, secret } = await makeWebhook(desk, coordinator, made);
    const receiver = start("python-receiver", {
      WEBHOOK_SECRET: secret,
      WEBHOOK_ADDRESS: url,
      PORT: String(port),
    });
    let told = "";
    receiver.stdout!.setEncoding("utf8").on("data", (text: string) => (told += text));
    const scorer = await runScorer(server.desk.store, { webhooks });
    try {
      await until(() => answers(port), "the receiver to listen");
      await testWebhook(desk, coordinator, { key: lagoon.key, id: webhook.id });
      await until(() => told.includes("'what': 'test'"), "the test");
      const drafts = [reading("told", 10, { sd: 0.5 }), reading("told-2", 10, { sd: 0.5 })];
      const source = { from: "drafts" as const, drafts };
      await postMeasurements(desk, lagoon.member, { key: lagoon.key, source });
      await until(() => told.includes("'verdict': {'from': 'pass'"), "the turn of the verdict");
      await until(async () => {
        const [listed] = await listWebhooks(desk, coordinator, { key: lagoon.key });
        return listed!.deliveries.every(({ lastStatus }) => lastStatus === 204);
      }, "both to be on record as arrived");

      const forged = { format: "weighhouse-webhook/1", what: "standings" };
      const answer = await fetch(url, {
        method: "POST",
        body: JSON.stringify(forged),
        headers: { "content-type": "application/json", signature: "sig=:AAAA:" },
      });
      expect(answer.status).toBe(401);

      await desk.store.sql`update webhooks set url = ${url.replace("told", "other")}`;
      await testWebhook(desk, coordinator, { key: lagoon.key, id: webhook.id });
      await until(async () => {
        const [listed] = await listWebhooks(desk, coordinator, { key: lagoon.key });
        return listed!.deliveries[0]!.lastStatus === 401;
      }, "what was signed for another address to be refused");
    } finally {
      await scorer.stop();
      receiver.kill();
      await once(receiver, "close");
    }
  });
});

async function freePort(): Promise<number> {
  const probe = createServer().listen(0, "127.0.0.1");
  await once(probe, "listening");
  const { port } = probe.address() as AddressInfo;
  probe.close();
  await once(probe, "close");
  return port;
}

async function answers(port: number): Promise<boolean> {
  try {
    await fetch(`http://127.0.0.1:${port}/`);
    return true;
  } catch {
    return false;
  }
}

async function until(condition: () => Promise<boolean> | boolean, what: string): Promise<void> {
  for (let tries = 0; tries < 600; tries += 1) {
    if (await condition()) return;
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  throw new Error(`waited in vain: ${what}`);
}
