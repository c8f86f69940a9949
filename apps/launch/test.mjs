/**
 * npm test: everything CI runs. Checks, unit and property tests, the tests on PostgreSQL (the
 * embedded one, and Debian's where it can be had), and the browser tests against the real program.
 */
import { chmodSync, existsSync, mkdtempSync, readFileSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { bin, build, install, requireNode, root, run, say } from "./scripts/steps.mjs";
import { findOpenssl } from "./scripts/openssl.mjs";
import { findChromium, installChromium } from "./scripts/chromium.mjs";

const started = Date.now();
const reports = path.join(root, "test-results");

requireNode();
await install();
rmSync(reports, { recursive: true, force: true });

const NOT_RUN = 3;
const words = { 0: "ok     ", [NOT_RUN]: "NOT RUN" };
const steps = [];
const step = async (name, work) => {
  const from = Date.now();
  say(`test: ${name}`);
  const code = await work();
  steps.push({ name, code, seconds: Math.round((Date.now() - from) / 1000) });
};

await step("checks", () => run(process.execPath, ["apps/launch/check.mjs"]));
await step("build", async () => (await build(), 0));
await step("openssl for the tests' time-stamp authority", async () => findOpenssl());
await step("unit, property and database tests", () =>
  run(bin("vitest"), [
    "run",
    "--reporter=default",
    "--reporter=json",
    `--outputFile.json=${path.join(reports, "vitest.json")}`,
  ]),
);
await step("store's tests on Debian's PostgreSQL 15", () =>
  run(process.execPath, ["test/debian-postgres.mjs", path.join(reports, "postgres15.json")]),
);
await step(
  "archives and the API's README checked with Debian's python3, curl, jq, openssl and LaTeX",
  () => run(process.execPath, ["test/debian-tools.mjs", path.join(reports, "archive.json")]),
);
await step("browser tests", async () => {
  const chromium = (await findChromium()) ?? (await installChromium());
  if (chromium === null) {
    say("browser tests NOT RUN: no Chromium here, and none could be installed");
    return 1;
  }
  const home = mkdtempSync(path.join(tmpdir(), "weighhouse-e2e-"));
  // As root, PostgreSQL runs as another user, who must be able to pass the folder.
  chmodSync(home, 0o755);
  const code = await run(bin("playwright"), ["test", "--config", "test/playwright.config.ts"], {
    env: {
      WEIGHHOUSE_TEST_HOME: home,
      WEIGHHOUSE_CHROMIUM: chromium,
      PLAYWRIGHT_JSON_OUTPUT_NAME: path.join(reports, "playwright.json"),
    },
  });
  rmSync(home, { recursive: true, force: true });
  return code;
});

const counts = countTests();
for (const { name, code, seconds } of steps) {
  say(`${words[code] ?? "FAILED "} ${name} (${seconds} s)`);
}
say(`in all ${Math.round((Date.now() - started) / 1000)} s`);
process.stdout.write(`${counts.passed} passed, ${counts.failed} failed\n`);
const good = counts.failed === 0 && counts.passed > 0 && steps.every(isGood);
process.exit(good ? 0 : 1);

/** Debian's PostgreSQL and tools are an extra where they can be had; CI must have them. */
function isGood({ code }) {
  return code === 0 || (code === NOT_RUN && !process.env.CI);
}

function countTests() {
  const total = { passed: 0, failed: 0 };
  for (const name of ["vitest.json", "postgres15.json", "archive.json"]) {
    const report = read(name);
    total.passed += report?.numPassedTests ?? 0;
    total.failed += report?.numFailedTests ?? 0;
  }
  const browser = read("playwright.json")?.stats;
  total.passed += (browser?.expected ?? 0) + (browser?.flaky ?? 0);
  total.failed += browser?.unexpected ?? 0;
  return total;
}

function read(name) {
  const file = path.join(reports, name);
  return existsSync(file) ? JSON.parse(readFileSync(file, "utf8")) : null;
}
