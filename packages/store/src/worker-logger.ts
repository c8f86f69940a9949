import { Logger } from "graphile-worker";
import type { Log } from "./log";
import { silentLog } from "./log";

/** Hands graphile-worker's lines to ours; its debug and info lines stay unsaid. */
export function workerLogger(log: Log): Logger {
  return new Logger((scope) => (level, message) => {
    if (level === "error") log.error(scope, message);
    else if (level === "warning") log.warn(scope, message);
  });
}

export const quietWorkerLogger = workerLogger(silentLog);
