import { chmodSync, mkdtempSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { defineConfig } from "@playwright/test";

const port = Number(process.env.WEIGHHOUSE_TEST_PORT ?? 3311);
const chromium = process.env.WEIGHHOUSE_CHROMIUM ?? "/usr/bin/chromium";

// The workers load this file again: only the first process makes the folder.
process.env.WEIGHHOUSE_TEST_HOME ??= makeHome();

/** Browser tests drive the real program, as npm start starts it, in a home of their own. */
export default defineConfig({
  testDir: "e2e",
  outputDir: "../test-results/e2e",
  fullyParallel: false,
  workers: 1,
  forbidOnly: true,
  timeout: 180_000,
  expect: { timeout: 15_000 },
  reporter: [["list"], ["json"]],
  use: {
    baseURL: `http://localhost:${port}`,
    viewport: { width: 1440, height: 900 },
    trace: "retain-on-failure",
    launchOptions: {
      ...(chromium === "playwright" ? {} : { executablePath: chromium }),
      chromiumSandbox: process.getuid?.() !== 0,
      // No chatter with hosts that a closed network does not reach.
      args: [
        "--disable-quic",
        "--disable-background-networking",
        "--disable-component-update",
        "--disable-sync",
        "--no-first-run",
        "--disable-gpu",
      ],
    },
  },
  webServer: {
    command: "node apps/launch/dist/launch.mjs",
    cwd: path.resolve(import.meta.dirname, ".."),
    url: `http://localhost:${port}/`,
    // Naming a port means: test the program that already answers there.
    reuseExistingServer: process.env.WEIGHHOUSE_TEST_PORT !== undefined,
    timeout: 180_000,
    stdout: "pipe",
    gracefulShutdown: { signal: "SIGTERM", timeout: 20_000 },
    env: {
      PORT: String(port),
      WEIGHHOUSE_HOME: process.env.WEIGHHOUSE_TEST_HOME,
      LOG_LEVEL: "warn",
    },
  },
});

/** As root, PostgreSQL runs as another user, who must be able to pass the folder. */
function makeHome(): string {
  const home = mkdtempSync(path.join(tmpdir(), "weighhouse-e2e-"));
  chmodSync(home, 0o755);
  return home;
}
