import { spawn } from "node:child_process";
import { chmodSync, mkdirSync, mkdtempSync, readFileSync, rmSync, statSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import postgres from "postgres";
import { afterAll, describe, expect, it } from "vitest";
import { startEmbeddedPostgres } from "./embedded";
import { isAlive } from "./embedded-server/postmaster-file";
import { silentLog } from "./log";
import { migrate } from "./migrate";
import { openStore } from "./open-store";

const root = path.resolve(import.meta.dirname, "../../..");
const settings = { fsync: "off" };
// One home for all: each test leaves it stopped.
const home = mkdtempSync(path.join(tmpdir(), "weighhouse-embedded-"));
chmodSync(home, 0o755);
afterAll(() => rmSync(home, { recursive: true, force: true }));

const start = (log = silentLog) =>
  startEmbeddedPostgres({ home, log, firstPort: 56_320, settings });

/** A process that starts the server and is killed without a chance to stop it. */
async function startAndKill(): Promise<{ pid: number; port: number }> {
  const child = spawn(
    process.execPath,
    ["--import", "tsx", "packages/store/src/testing/hold-embedded.ts", home],
    { cwd: root, stdio: ["ignore", "pipe", "inherit"] },
  );
  const said = await new Promise<string>((resolve, reject) => {
    child.stdout.once("data", (chunk: Buffer) => resolve(chunk.toString()));
    child.once("exit", () => reject(new Error("it ended before it said anything")));
  });
  child.kill("SIGKILL");
  await new Promise((resolve) => child.once("close", resolve));
  return JSON.parse(said) as { pid: number; port: number };
}

describe("the embedded PostgreSQL", () => {
  it("listens on loopback alone, with passwords that only the owner of the home can read", async () => {
    const server = await start();
    const owner = postgres(server.adminUrl, { max: 1 });
    const [said] = await owner<{ listen: string; version: string; sockets: string }[]>`
      select current_setting('listen_addresses') as listen,
        current_setting('server_version_num') as version,
        current_setting('unix_socket_directories') as sockets`;
    await owner.end();
    expect(said).toMatchObject({ listen: "127.0.0.1", sockets: "" });
    expect(Number(said?.version)).toBeGreaterThanOrEqual(180_000);
    const passwords = path.join(home, "database-passwords.json");
    expect(statSync(passwords).mode & 0o777).toBe(0o600);
    const wrong = new URL(server.url);
    wrong.password = "guess";
    await expect(postgres(wrong.href, { max: 1 })`select 1`).rejects.toThrow(/password/);
    await server.stop();
    expect(isAlive(server.pid)).toBe(false);
  });

  it("keeps its data over a stop, and its running role can run", async () => {
    const first = await start();
    await migrate(first);
    await first.stop();
    const second = await start();
    await migrate(second);
    const store = await openStore({ url: second.url, signer: null });
    expect(await store.sql`select count(*)::int as n from campaigns`).toEqual([{ n: 0 }]);
    await store.close();
    await second.stop();
  });

  it("is adopted when its starter was killed", async () => {
    const left = await startAndKill();
    expect(isAlive(left.pid)).toBe(true);
    const server = await start();
    expect(server.pid).toBe(left.pid);
    const sql = postgres(server.url, { max: 1 });
    expect(await sql`select 1 as one`).toEqual([{ one: 1 }]);
    await sql.end();
    await server.stop();
    expect(isAlive(left.pid)).toBe(false);
  });

  it("recovers where the server was killed too, leaving the stale file to PostgreSQL", async () => {
    const left = await startAndKill();
    process.kill(left.pid, "SIGKILL");
    while (isAlive(left.pid)) await new Promise((resolve) => setTimeout(resolve, 10));
    expect(readFileSync(path.join(home, "database/data/postmaster.pid"), "utf8")).toContain(
      String(left.pid),
    );
    const server = await start();
    expect(server.pid).not.toBe(left.pid);
    await server.stop();
  });

  it("refuses a home that another process is using", async () => {
    const server = await start();
    await expect(start()).rejects.toMatchObject({ code: "embedded-failed" });
    expect(isAlive(server.pid)).toBe(true);
    await server.stop();
  });

  it("takes the next port where one is taken", async () => {
    const first = await start();
    const other = path.join(home, "other");
    mkdirSync(other);
    const second = await startEmbeddedPostgres({
      home: other,
      log: silentLog,
      firstPort: first.port,
      settings,
    });
    expect(second.port).toBeGreaterThan(first.port);
    await Promise.all([first.stop(), second.stop()]);
  });
});
