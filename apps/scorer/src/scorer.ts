/** The scorer's process: takes scoring jobs until SIGTERM or SIGINT, then ends cleanly. */
import { readFileSync } from "node:fs";
import { KeptHeads } from "@weighhouse/store/kept-heads";
import { openKeys, openSealKey } from "@weighhouse/store/keys";
import { isWriteAfterClose } from "@weighhouse/store/lost-connection";
import { openStore } from "@weighhouse/store/open-store";
import { readSettings } from "@weighhouse/store/settings";
import type { Settings } from "@weighhouse/store/settings";
import { StoreError } from "@weighhouse/store/store-error";
import { certificatesOf } from "@weighhouse/timestamps/verify-token";
import { pino } from "pino";
import { runScorer } from "./run-scorer";

async function main(): Promise<number> {
  const settings = readSettings(process.env);
  const log = pino({ name: "scorer", level: settings.LOG_LEVEL });
  if (settings.DATABASE_URL === undefined) {
    throw new StoreError(
      "bad-settings",
      "DATABASE_URL: found none; allowed is a postgres:// address",
    );
  }
  process.on("uncaughtException", (error) => {
    if (!isWriteAfterClose(error)) throw error;
    log.warn({ error: error.message }, "a connection closed while it was written to");
  });
  const store = await openStore({
    url: settings.DATABASE_URL,
    ...(await keysOf(settings)),
    log,
    connections: 3,
  });
  const scorer = await runScorer(store, {
    authority: authorityOf(settings),
    webhooks: { reach: settings.WEIGHHOUSE_WEBHOOKS, origin: originOf(settings) },
  });
  log.info({}, "scoring");
  await Promise.race([scorer.ended, signalled()]);
  await scorer.stop();
  await store.close();
  return 0;
}

/** With keys it does what dates ask for and sends deliveries, too; without, it scores and signs nothing. */
async function keysOf(settings: Settings) {
  const folder = settings.WEIGHHOUSE_KEYS;
  if (folder === undefined) return { signer: null, sealKey: null, keptHeads: null };
  const name = new URL(originOf(settings)).hostname;
  return {
    signer: await openKeys({ folder, name, make: false }),
    sealKey: openSealKey({ folder, make: false }),
    keptHeads: new KeptHeads(folder),
  };
}

function originOf({ WEIGHHOUSE_ORIGIN: origin, PORT }: Settings): string {
  return origin ?? `http://localhost:${PORT}`;
}

/** Read now: a wrong file is found at the start, not at the first time-stamp. */
function authorityOf({ WEIGHHOUSE_TSA_URL: url, WEIGHHOUSE_TSA_CA: file }: Settings) {
  if (url === undefined) return null;
  if (file === undefined) return { url, trusted: undefined };
  try {
    const trusted = readFileSync(file, "utf8");
    certificatesOf(trusted);
    return { url, trusted };
  } catch (cause) {
    throw new StoreError(
      "bad-settings",
      `WEIGHHOUSE_TSA_CA: found no certificates in ${file}; allowed is a file of PEM certificates`,
      { cause },
    );
  }
}

async function signalled(): Promise<void> {
  return new Promise((resolve) => {
    process.once("SIGTERM", () => resolve());
    process.once("SIGINT", () => resolve());
  });
}

try {
  process.exit(await main());
} catch (error) {
  if (!(error instanceof StoreError)) throw error;
  process.stderr.write(`${error.message}\n`);
  process.exit(1);
}
