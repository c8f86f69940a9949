import { chmodSync, mkdtempSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { startEmbeddedPostgres } from "@weighhouse/store/embedded";
import { silentLog } from "@weighhouse/store/log";
import type { Store } from "@weighhouse/store/open-store";
import { openTestStore } from "@weighhouse/store/testing/sample-campaign";
import { createTestDatabase, makeTemplate } from "@weighhouse/store/testing/test-database";

/** Runs on a store of its own, on an embedded PostgreSQL that writes to disk as in service. */
export async function onBenchStore(run: (store: Store) => Promise<void>): Promise<void> {
  const home = mkdtempSync(path.join(tmpdir(), "weighhouse-bench-"));
  // The server's user must be able to pass, where that is another than ours.
  chmodSync(home, 0o755);
  const server = await startEmbeddedPostgres({ home, log: silentLog, firstPort: 55_620 });
  try {
    process.env["WEIGHHOUSE_TEST_DATABASE_ADMIN_URL"] = server.adminUrl;
    await makeTemplate(server.adminUrl);
    const { url } = await createTestDatabase();
    const store = await openTestStore(url);
    await run(store).finally(() => store.close());
  } finally {
    await server.stop();
    rmSync(home, { recursive: true, force: true });
  }
}
