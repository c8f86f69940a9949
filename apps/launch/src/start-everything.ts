import { randomBytes } from "node:crypto";
import { accessSync, constants, existsSync, mkdirSync, readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { defaultHome, startEmbeddedPostgres } from "@weighhouse/store/embedded";
import type { EmbeddedPostgres } from "@weighhouse/store/embedded";
import { openKeys, openSealKey } from "@weighhouse/store/keys";
import { migrate } from "@weighhouse/store/migrate";
import type { Settings } from "@weighhouse/store/settings";
import { StoreError } from "@weighhouse/store/store-error";
import { forgetAddress, writeAddress } from "./address";
import { demoKey } from "./demo/scenario";
import { makeDemo } from "./demo/make-demo";
import { readDemoAccounts } from "./demo/accounts";
import { freePort } from "./free-port";
import { scorerProgram, startProgram, webProgram } from "./programs";
import type { Running } from "./programs";
import { say } from "./say";

/** Loopback: the demo's accounts are for whoever sits at this machine. */
const host = "127.0.0.1";

/** Starts it all on one machine and runs until it is told to stop or a part ends. */
export async function startEverything(settings: Settings): Promise<number> {
  const stopping = stopSignal();
  const home = settings.WEIGHHOUSE_HOME ?? defaultHome();
  requireDatabasePair(settings);
  requireWritable(home);
  const parts: Running[] = [];
  let database: EmbeddedPostgres | null = null;
  let answering = false;
  try {
    database = settings.DATABASE_URL ? null : await embedded(home);
    const url = settings.DATABASE_URL ?? database?.url ?? "";
    const adminUrl = settings.DATABASE_ADMIN_URL ?? database?.adminUrl;
    const keys = settings.WEIGHHOUSE_KEYS ?? path.join(home, "keys");
    const secret = settings.WEIGHHOUSE_SECRET ?? ownSecret(home);

    const port = await freePort(settings.PORT, host);
    if (port !== settings.PORT) say(`port ${settings.PORT} is taken; using ${port}`);
    const origin = settings.WEIGHHOUSE_ORIGIN ?? `http://localhost:${port}`;
    await openKeys({ folder: keys, name: new URL(origin).hostname, make: database !== null });
    openSealKey({ folder: keys, make: database !== null });

    if (adminUrl) {
      say("migrating the database");
      await migrate({ adminUrl, url });
    }
    const environment = {
      ...process.env,
      DATABASE_URL: url,
      WEIGHHOUSE_HOME: home,
      WEIGHHOUSE_KEYS: keys,
      WEIGHHOUSE_ORIGIN: origin,
      WEIGHHOUSE_SECRET: secret,
      PORT: String(port),
    };
    if (database) await makeDemo({ home, url, keys, origin, secret, stopping });
    if (stopping.aborted) return 0;

    say("starting web and scorer");
    parts.push(startProgram(scorerProgram(), environment));
    parts.push(startProgram(webProgram({ port, host }), environment));
    const ended = Promise.race(
      parts.map(async ({ name, exited }) => ({ name, code: await exited })),
    );
    const answers = await Promise.race([untilAnswers(`http://${host}:${port}/`, stopping), ended]);
    if (answers === true) {
      writeAddress(home, origin);
      answering = true;
      announce(origin, home, database !== null);
    }

    const first = await Promise.race([aborted(stopping), ended]);
    if (first === "stop") {
      say("stopping");
      return 0;
    }
    say(`${first.name} ended by itself with code ${first.code}; stopping the rest`);
    return 1;
  } finally {
    // Not that of another launcher, on whose home this one was refused.
    if (answering) forgetAddress(home);
    await Promise.all(parts.map((part) => part.stop()));
    await database?.stop();
    say("stopped");
  }
}

/** Migrating one database and running on another would be found out late. */
function requireDatabasePair({ DATABASE_URL: url, DATABASE_ADMIN_URL: adminUrl }: Settings): void {
  if (url !== undefined || adminUrl === undefined) return;
  throw new StoreError(
    "bad-settings",
    "DATABASE_URL: found none beside DATABASE_ADMIN_URL; allowed are both, or neither for the embedded PostgreSQL",
  );
}

function requireWritable(home: string): void {
  try {
    mkdirSync(home, { recursive: true });
    accessSync(home, constants.W_OK | constants.X_OK);
  } catch (cause) {
    const { code = "no folder" } = cause as NodeJS.ErrnoException;
    throw new StoreError(
      "bad-settings",
      `WEIGHHOUSE_HOME: found ${home}, which can't be written to (${code}); allowed is a folder of this user's`,
      { cause },
    );
  }
}

async function embedded(home: string): Promise<EmbeddedPostgres> {
  say(`starting the embedded PostgreSQL (data under ${home})`);
  return startEmbeddedPostgres({ home, log: quietLog });
}

const quietLog = {
  info: () => {},
  warn: (fields: object, message: string) => say(`${message} ${JSON.stringify(fields)}`),
  error: (fields: object, message: string) => say(`${message} ${JSON.stringify(fields)}`),
};

/** Signs sessions; made once, readable by this user alone. */
function ownSecret(home: string): string {
  const file = path.join(home, "session-secret");
  if (!existsSync(file)) writeFileSync(file, randomBytes(32).toString("hex"), { mode: 0o600 });
  return readFileSync(file, "utf8").trim();
}

function stopSignal(): AbortSignal {
  const controller = new AbortController();
  for (const signal of ["SIGINT", "SIGTERM", "SIGHUP"] as const) {
    process.on(signal, () => controller.abort());
  }
  return controller.signal;
}

function aborted(signal: AbortSignal): Promise<"stop"> {
  return new Promise((resolve) => {
    if (signal.aborted) resolve("stop");
    signal.addEventListener("abort", () => resolve("stop"));
  });
}

/** True once the page is there; false when told to stop before. */
async function untilAnswers(address: string, stopping: AbortSignal): Promise<boolean> {
  while (!stopping.aborted) {
    const answer = await fetch(address, { redirect: "manual" }).catch(() => null);
    if (answer && answer.status < 500) return true;
    await new Promise((resolve) => setTimeout(resolve, 150));
  }
  return false;
}

function announce(origin: string, home: string, withDemo: boolean): void {
  say(`ready at ${origin}`);
  const accounts = withDemo ? readDemoAccounts(home) : null;
  if (!accounts) return;
  say(`the demo campaign: ${origin}/campaigns/${demoKey}`);
  say(`demo accounts, all with the password ${accounts.password} (kept in ${home}):`);
  for (const { email, what } of accounts.people) say(`  ${email.padEnd(30)} ${what}`);
  say("npm run demo:stream, in another terminal, posts further measurements live");
  say("Ctrl-C stops everything");
}
