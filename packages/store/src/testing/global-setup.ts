import { chmodSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { startEmbeddedPostgres } from "../embedded";
import { silentLog } from "../log";
import { makeTemplate } from "./test-database";

const ADMIN_URL = "WEIGHHOUSE_TEST_DATABASE_ADMIN_URL";

/**
 * One PostgreSQL for the whole run: the embedded one in a folder of its own, or with the programs
 * that WEIGHHOUSE_TEST_POSTGRES_BIN names, or the server that WEIGHHOUSE_TEST_DATABASE_ADMIN_URL names.
 */
export default async function setup(): Promise<() => Promise<void>> {
  const given = process.env[ADMIN_URL];
  if (given !== undefined) return makeTemplate(given);
  const home = mkdtempSync(path.join(tmpdir(), "weighhouse-test-"));
  // The server's user must be able to pass, where that is another than ours.
  chmodSync(home, 0o755);
  const server = await startEmbeddedPostgres({
    home,
    log: silentLog,
    firstPort: 55_320,
    bin: process.env["WEIGHHOUSE_TEST_POSTGRES_BIN"],
    // A test's data needs to outlive no power cut.
    settings: { fsync: "off", full_page_writes: "off", max_connections: "300" },
  });
  process.env[ADMIN_URL] = server.adminUrl;
  await makeTemplate(server.adminUrl);
  return async () => {
    await server.stop();
    rmSync(home, { recursive: true, force: true });
    delete process.env[ADMIN_URL];
  };
}
