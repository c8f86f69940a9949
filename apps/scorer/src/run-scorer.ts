import { EventEmitter } from "node:events";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import type { Store } from "@weighhouse/store/open-store";
import { DATES_TASK, queueOverdue } from "@weighhouse/store/dates-queue";
import { queueScoring, queueUnscored, SCORE_TASK } from "@weighhouse/store/scoring-queue";
import { StoreError } from "@weighhouse/store/store-error";
import { queueTimeStamps, TIME_STAMP_TASK } from "@weighhouse/store/time-stamps";
import { workerLogger } from "@weighhouse/store/worker-logger";
import { run } from "graphile-worker";
import type { WorkerEvents } from "graphile-worker";
import { webhookSettings } from "@weighhouse/desk/webhook-settings";
import type { WebhookSettings } from "@weighhouse/desk/webhook-settings";
import { datesTask } from "./dates-task";
import { watchScorers } from "./living-scorers";
import { timeStampTask } from "./time-stamp-task";
import type { TimeStampAuthority } from "./time-stamp-task";
import { scoreCampaign } from "./score-campaign";
import type { ScoreOptions } from "./score-campaign";
import { runDeliveries } from "./webhook-runner";

export type RunningScorer = { stop(): Promise<void>; ended: Promise<void> };

export type ScorerOptions = {
  /** Campaigns scored at once; scoring is computing, so more than one per processor gains nothing. */
  concurrency?: number;
  /** How often lost scorers are looked for; unscored and overdue campaigns are every sixth time. */
  everyMs?: number;
  /** Stamps heads; a scorer without one leaves that to others. */
  authority?: TimeStampAuthority | null;
  /** Where webhooks may lead, and what they are told leads to. */
  webhooks?: WebhookSettings;
};

/** Starts a scorer on a store. Any number of them, on any machines, share the campaigns. */
export async function runScorer(store: Store, options: ScorerOptions = {}): Promise<RunningScorer> {
  const { concurrency = 1, everyMs = 10_000, authority = null } = options;
  const { origin, reach } = webhookSettings(options);
  const watch = await watchScorers(store, { everyMs });
  let stopping = false;
  const events = new EventEmitter() as WorkerEvents;
  const join = (poolId: string) => {
    watch
      .join(poolId)
      .catch((error: unknown) => store.log.warn({ error }, "could not mark this scorer as alive"));
  };
  events.on("pool:create", ({ workerPool }) => join(workerPool.id));
  const runner = await run({
    connectionString: store.url,
    concurrency,
    maxPoolSize: concurrency + 2,
    noHandleSignals: true,
    logger: workerLogger(store.log),
    events,
    taskList: {
      [SCORE_TASK]: (payload) => scoreTask(store, payload, { stopping: () => stopping, origin }),
      // What dates ask for is appended, so only who holds the signing key takes such jobs.
      ...(store.signer === null ? {} : { [DATES_TASK]: (payload) => datesTask(store, payload) }),
      ...(authority === null
        ? {}
        : { [TIME_STAMP_TASK]: (payload) => timeStampTask(store, authority, payload) }),
    },
  });
  // Secrets are encrypted: only who holds the key for them delivers.
  const deliveries = store.sealKey === null ? null : await runDeliveries(store, { reach, join });
  await lookForLost(store, authority !== null);
  const timer = setInterval(() => {
    lookForLost(store, authority !== null).catch((error: unknown) =>
      store.log.warn({ error }, "could not look for unscored and overdue campaigns"),
    );
  }, 6 * everyMs);
  return {
    ended: Promise.race([runner.promise, ...(deliveries === null ? [] : [deliveries.promise])]),
    async stop() {
      stopping = true;
      clearInterval(timer);
      await Promise.all([runner.stop(), deliveries?.stop()]);
      await watch.leave();
    },
  };
}

async function lookForLost(store: Store, stamps: boolean): Promise<void> {
  await queueUnscored(store, ENGINE_VERSION);
  if (store.signer !== null) await queueOverdue(store);
  if (stamps) await queueTimeStamps(store);
}

async function scoreTask(store: Store, payload: unknown, options: ScoreOptions): Promise<void> {
  const { campaign } = payload as { campaign: string };
  const from = performance.now();
  try {
    const done = await scoreCampaign(store, campaign, options);
    if (!done) await queueScoring(store.sql, campaign);
  } catch (error) {
    // A campaign that isn't there won't come: to try again would be for nothing.
    if (error instanceof StoreError && error.code === "no-such-campaign") return;
    throw error;
  }
  const milliseconds = Math.round(performance.now() - from);
  store.log.info({ campaign, milliseconds }, "scored");
}
