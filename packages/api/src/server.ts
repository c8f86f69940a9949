import type { Desk } from "@weighhouse/desk/desk";
import { KeptHeads } from "@weighhouse/store/kept-heads";
import { openKeys, openSealKey } from "@weighhouse/store/keys";
import { openStore } from "@weighhouse/store/open-store";
import type { Log } from "@weighhouse/store/open-store";
import { readSettings } from "@weighhouse/store/settings";
import { StoreError } from "@weighhouse/store/store-error";
import { createAuth } from "./auth";
import type { Auth } from "./auth";

/** What all requests of a process share. */
export type Server = { desk: Desk; auth: Auth; log: Log };

// On the global object: a bundler may give pages and route handlers a copy each of this module.
const place = globalThis as { weighhouseServer?: Promise<Server> };

/** The process's store, desk and accounts, opened from its settings when first asked for. */
export function server(environment: NodeJS.ProcessEnv, log: Log): Promise<Server> {
  place.weighhouseServer ??= openServer(environment, log).catch((error: unknown) => {
    // A database that isn't up yet is tried again by the next request.
    delete place.weighhouseServer;
    throw error;
  });
  return place.weighhouseServer;
}

async function openServer(environment: NodeJS.ProcessEnv, log: Log): Promise<Server> {
  const settings = readSettings(environment);
  const { DATABASE_URL, WEIGHHOUSE_KEYS, WEIGHHOUSE_SECRET } = settings;
  const missing = Object.entries({ DATABASE_URL, WEIGHHOUSE_KEYS, WEIGHHOUSE_SECRET })
    .filter(([, value]) => value === undefined)
    .map(([name]) => name);
  if (!DATABASE_URL || !WEIGHHOUSE_KEYS || !WEIGHHOUSE_SECRET) {
    const found = `found ${missing.join(" and ")} not set`;
    throw new StoreError("bad-settings", `${found}; npm start sets them, others must`);
  }
  const origin = settings.WEIGHHOUSE_ORIGIN ?? `http://localhost:${settings.PORT}`;
  const name = new URL(origin).hostname;
  const store = await openStore({
    url: DATABASE_URL,
    readUrl: settings.DATABASE_READ_URL,
    signer: await openKeys({ folder: WEIGHHOUSE_KEYS, name, make: false }),
    sealKey: openSealKey({ folder: WEIGHHOUSE_KEYS, make: false }),
    keptHeads: new KeptHeads(WEIGHHOUSE_KEYS),
    log,
  });
  const desk: Desk = { store, webhooks: { reach: settings.WEIGHHOUSE_WEBHOOKS, origin } };
  const auth = createAuth({ store, origin, secret: WEIGHHOUSE_SECRET });
  return { desk, auth, log };
}
