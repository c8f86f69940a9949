import "server-only";
import { createAuth } from "@weighhouse/api/auth";
import type { Auth } from "@weighhouse/api/auth";
import type { Desk } from "@weighhouse/desk/desk";
import { openKeys } from "@weighhouse/store/keys";
import { openStore } from "@weighhouse/store/open-store";
import type { Log } from "@weighhouse/store/open-store";
import { readSettings } from "@weighhouse/store/settings";

export interface Services {
  desk: Desk;
  auth: Auth;
  log: Log;
}

// On the global object: the bundler may give pages and route handlers a copy each of this module.
const place = globalThis as { weighhouse?: Promise<Services> };

/** What every request of this process shares: the store, the desk over it, accounts. */
export function services(): Promise<Services> {
  place.weighhouse ??= openServices().catch((error: unknown) => {
    // A database that is not up yet is tried again by the next request.
    delete place.weighhouse;
    throw error;
  });
  return place.weighhouse;
}

async function openServices(): Promise<Services> {
  const settings = readSettings(process.env);
  const origin = settings.WEIGHHOUSE_ORIGIN ?? `http://localhost:${settings.PORT}`;
  const { DATABASE_URL, WEIGHHOUSE_KEYS, WEIGHHOUSE_SECRET } = settings;
  if (!DATABASE_URL || !WEIGHHOUSE_KEYS || !WEIGHHOUSE_SECRET) {
    throw new Error(
      "DATABASE_URL, WEIGHHOUSE_KEYS and WEIGHHOUSE_SECRET are needed to serve pages",
    );
  }
  const log = consoleLog;
  const signer = await openKeys({
    folder: WEIGHHOUSE_KEYS,
    name: new URL(origin).host,
    make: false,
  });
  const store = await openStore({
    url: DATABASE_URL,
    readUrl: settings.DATABASE_READ_URL,
    signer,
    log,
  });
  const auth = createAuth({ store, origin, secret: WEIGHHOUSE_SECRET });
  return { desk: { store }, auth, log };
}

/** One JSON object a line, as log collectors read it. */
const consoleLog: Log = {
  info: (fields, message) => console.info(JSON.stringify({ level: "info", message, ...fields })),
  warn: (fields, message) => console.warn(JSON.stringify({ level: "warn", message, ...fields })),
  error: (fields, message) => console.error(JSON.stringify({ level: "error", message, ...fields })),
};
