// Starts the embedded PostgreSQL in the home that the first argument names, says where, and holds it.
import { startEmbeddedPostgres } from "../embedded";
import { silentLog } from "../log";

const server = await startEmbeddedPostgres({
  home: process.argv[2] ?? "",
  log: silentLog,
  firstPort: 56_320,
  settings: { fsync: "off" },
});
process.stdout.write(JSON.stringify({ pid: server.pid, port: server.port }));
setInterval(() => {}, 60_000);
