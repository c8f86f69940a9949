import { EventEmitter } from "node:events";
import type { WebhookReach } from "@weighhouse/desk/webhook-address";
import type { Store } from "@weighhouse/store/open-store";
import { DELIVER_TASK } from "@weighhouse/store/webhook-deliveries";
import { workerLogger } from "@weighhouse/store/worker-logger";
import { run } from "graphile-worker";
import type { Runner, WorkerEvents } from "graphile-worker";
import { webhookTask } from "./webhook-task";

/** Deliveries under way at once: each waits for somebody else's server. */
const CONCURRENCY = 4;

/** Sends deliveries apart from scoring, which a slow receiver must not hold up. */
export async function runDeliveries(
  store: Store,
  { reach, join }: { reach: WebhookReach; join: (poolId: string) => void },
): Promise<Runner> {
  const events = new EventEmitter() as WorkerEvents;
  events.on("pool:create", ({ workerPool }) => join(workerPool.id));
  return run({
    connectionString: store.url,
    concurrency: CONCURRENCY,
    maxPoolSize: CONCURRENCY + 1,
    noHandleSignals: true,
    // A delivery that didn't arrive stands in its own log, and is no fault of this process.
    logger: workerLogger({ ...store.log, error: store.log.warn.bind(store.log) }),
    events,
    taskList: {
      [DELIVER_TASK]: (payload, { job }) =>
        webhookTask(store, payload, { reach, last: job.attempts >= job.max_attempts }),
    },
  });
}
