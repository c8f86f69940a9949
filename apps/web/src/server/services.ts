import "server-only";
import { server } from "@weighhouse/api/server";
import type { Server } from "@weighhouse/api/server";
import type { Log } from "@weighhouse/store/open-store";

/** What every request of this process shares: the store, the desk over it, accounts. */
export function services(): Promise<Server> {
  return server(process.env, consoleLog);
}

/** One JSON object a line, as log collectors read it. */
const consoleLog: Log = {
  info: (fields, message) => console.info(JSON.stringify({ level: "info", message, ...fields })),
  warn: (fields, message) => console.warn(JSON.stringify({ level: "warn", message, ...fields })),
  error: (fields, message) => console.error(JSON.stringify({ level: "error", message, ...fields })),
};
