/**
 * Runs the store's tests on Debian's PostgreSQL 15: installs it with apt-get where it is missing and
 * this is root, starts one on a free port with its data in a temporary folder, and stops it again.
 *
 *   node test/debian-postgres.mjs [REPORT.json]
 *
 * Ends with 3 where there is no PostgreSQL 15 and none could be installed.
 */
import { spawnSync } from "node:child_process";
import { existsSync, mkdirSync, readdirSync, writeFileSync } from "node:fs";
import path from "node:path";

const root = path.resolve(import.meta.dirname, "..");
const bin = "/usr/lib/postgresql/15/bin";
const report = process.argv[2];
/** Tells the caller that nothing was tested, as opposed to a test that failed. */
const NOT_RUN = 3;

if (!existsSync(path.join(bin, "initdb")) && !installed()) {
  console.error(
    `store's tests on PostgreSQL 15 NOT RUN: there is no ${bin}, and none was installed`,
  );
  process.exit(NOT_RUN);
}

spawnSync(path.join(bin, "postgres"), ["--version"], { stdio: "inherit" });
const tests = spawnSync(
  process.execPath,
  [
    path.join(root, "node_modules/vitest/vitest.mjs"),
    "run",
    "--project",
    "database",
    ...testsOfStore(),
    ...(report === undefined
      ? []
      : ["--reporter=default", "--reporter=json", `--outputFile.json=${path.resolve(report)}`]),
  ],
  { cwd: root, stdio: "inherit", env: { ...process.env, WEIGHHOUSE_TEST_POSTGRES_BIN: bin } },
);
process.exit(tests.status ?? 1);

/** All but the one about the embedded PostgreSQL itself. */
function testsOfStore() {
  const folder = path.join(root, "packages/store/src");
  return readdirSync(folder, { recursive: true })
    .filter((file) => file.endsWith(".test.ts") && file !== "embedded.test.ts")
    .map((file) => path.join(folder, file));
}

/** Without Debian's own cluster, which the package would start on port 5432. */
function installed() {
  if (process.getuid?.() !== 0 || !existsSync("/usr/bin/apt-get")) return false;
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
  const apt = (...args) => spawnSync("apt-get", args, { stdio: "inherit", env }).status === 0;
  mkdirSync("/etc/postgresql-common", { recursive: true });
  const clusters = "/etc/postgresql-common/createcluster.conf";
  if (!existsSync(clusters)) writeFileSync(clusters, "create_main_cluster = false\n");
  return (
    apt("update", "-qq") &&
    apt("install", "-qq", "-y", "--no-install-recommends", "postgresql-15") &&
    existsSync(path.join(bin, "initdb"))
  );
}
