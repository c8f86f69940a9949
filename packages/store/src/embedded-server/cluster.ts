import { spawn } from "node:child_process";
import type { SpawnOptions } from "node:child_process";
import {
  chmodSync,
  chownSync,
  closeSync,
  existsSync,
  openSync,
  renameSync,
  rmSync,
  writeFileSync,
} from "node:fs";
import { createServer } from "node:net";
import path from "node:path";
import { setTimeout as sleep } from "node:timers/promises";
import { StoreError } from "../store-error";
import { isAlive, readServerFile } from "./postmaster-file";
import type { ServerUser } from "./server-user";

/** A data folder and the programs that serve it. */
export type Cluster = {
  /** `initdb` and `postgres` lie in it. */
  bin: string;
  data: string;
  logFile: string;
  user: ServerUser;
};

export const OWNER = "weighhouse_owner";

/** Makes the data folder whole or not at all. Takes about a second. */
export async function initialise(cluster: Cluster, password: string): Promise<void> {
  const making = `${cluster.data}.making`;
  const passwordFile = `${cluster.data}.password`;
  rmSync(making, { recursive: true, force: true });
  writeFileSync(passwordFile, password, { mode: 0o600 });
  try {
    if (cluster.user !== null) chownSync(passwordFile, cluster.user.uid, cluster.user.gid);
    await run(cluster, "initdb", [
      `--pgdata=${making}`,
      `--username=${OWNER}`,
      `--pwfile=${passwordFile}`,
      "--auth=scram-sha-256",
      "--encoding=UTF8",
      "--locale=C",
    ]);
    renameSync(making, cluster.data);
  } finally {
    rmSync(passwordFile, { force: true });
  }
}

/** Starts the server on loopback alone and returns once it takes connections. */
export async function start(
  cluster: Cluster,
  options: { port: number; settings?: Record<string, string> },
): Promise<void> {
  const settings = {
    listen_addresses: "127.0.0.1",
    port: String(options.port),
    unix_socket_directories: "",
    ...options.settings,
  };
  const args = Object.entries(settings).flatMap(([name, value]) => ["-c", `${name}=${value}`]);
  const log = openSync(cluster.logFile, "a", 0o600);
  // A session of its own: Ctrl-C in the terminal must reach the launcher, not the database under it.
  const child = spawn(path.join(cluster.bin, "postgres"), ["-D", cluster.data, ...args], {
    ...asUser(cluster.user),
    detached: true,
    stdio: ["ignore", log, log],
  });
  closeSync(log);
  let ended: string | null = null;
  child.on("error", (error) => (ended = error.message));
  child.on("exit", (code, signal) => (ended = `it ended with ${code ?? signal}`));
  child.unref();
  for (let waited = 0; waited < 60_000; waited += 20) {
    if (ended !== null) throw failed(cluster, ended);
    const file = readServerFile(cluster.data);
    if (file?.pid === child.pid && file?.status === "ready") return;
    await sleep(20);
  }
  throw failed(cluster, "it took no connections within a minute");
}

/** PostgreSQL's fast shutdown: SIGINT rolls back what runs and writes everything down. */
export async function stop(pid: number): Promise<void> {
  if (!isAlive(pid)) return;
  process.kill(pid, "SIGINT");
  for (let waited = 0; waited < 60_000; waited += 20) {
    if (!isAlive(pid)) return;
    await sleep(20);
  }
  throw new StoreError("embedded-failed", `PostgreSQL (process ${pid}) did not stop in a minute`);
}

/** The first port from `from` on loopback that nobody holds. */
export async function freePort(from: number): Promise<number> {
  for (let port = from; port < from + 1000; port += 1) {
    if (await isFree(port)) return port;
  }
  throw new StoreError("embedded-failed", `found no free port from ${from} to ${from + 999}`);
}

async function isFree(port: number): Promise<boolean> {
  return new Promise((resolve) => {
    const probe = createServer();
    probe.once("error", () => resolve(false));
    probe.listen(port, "127.0.0.1", () => probe.close(() => resolve(true)));
  });
}

async function run(cluster: Cluster, program: string, args: string[]): Promise<void> {
  const child = spawn(path.join(cluster.bin, program), args, {
    ...asUser(cluster.user),
    stdio: ["ignore", "pipe", "pipe"],
  });
  let said = "";
  child.stdout?.on("data", (chunk: Buffer) => (said += chunk.toString()));
  child.stderr?.on("data", (chunk: Buffer) => (said += chunk.toString()));
  const code = await new Promise<number | null>((resolve, reject) => {
    child.once("error", reject);
    child.once("close", resolve);
  });
  if (code !== 0) throw new StoreError("embedded-failed", `${program} failed: ${said.trim()}`);
}

function asUser(user: ServerUser): SpawnOptions {
  // The working folder may be one that the server's user can't enter.
  const env = { PATH: process.env["PATH"] ?? "", LC_ALL: "C", TZ: "UTC" };
  return { cwd: "/", env, ...(user === null ? {} : user) };
}

function failed(cluster: Cluster, why: string): StoreError {
  return new StoreError(
    "embedded-failed",
    `PostgreSQL did not start on ${cluster.data}: ${why}. Its log is ${cluster.logFile}`,
  );
}

/** The parent must be there before, and passable; the data folder itself is made 0700 by initdb. */
export function prepareFolder(folder: string, user: ServerUser): void {
  if (!existsSync(folder)) throw new StoreError("embedded-failed", `found no folder ${folder}`);
  if (user !== null) {
    chownSync(folder, user.uid, user.gid);
    chmodSync(folder, 0o755);
  }
}
