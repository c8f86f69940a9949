/**
 * What every top-level command begins with, in plain Node: nothing is installed yet when it runs.
 */
import { spawn, spawnSync } from "node:child_process";
import { existsSync, readFileSync, writeFileSync } from "node:fs";
import { createHash } from "node:crypto";
import path from "node:path";
import { fileURLToPath } from "node:url";

export const root = path.resolve(path.dirname(fileURLToPath(import.meta.url)), "../../..");

/** No program we start reports home. */
const quiet = {
  TURBO_TELEMETRY_DISABLED: "1",
  NEXT_TELEMETRY_DISABLED: "1",
  DO_NOT_TRACK: "1",
  npm_config_update_notifier: "false",
};

export const say = (text) => process.stdout.write(`weighhouse: ${text}\n`);

function fail(text) {
  process.stderr.write(`weighhouse: ${text}\n`);
  process.exit(1);
}

/** Runs a command from the root with its output shown; resolves to its exit code. */
export function run(command, args, options = {}) {
  return new Promise((resolve) => {
    const child = spawn(command, args, {
      cwd: root,
      stdio: options.stdio ?? "inherit",
      env: { ...process.env, ...quiet, ...options.env },
    });
    child.on("error", (error) => {
      process.stderr.write(`weighhouse: ${command} could not be started: ${error.message}\n`);
      resolve(127);
    });
    child.on("exit", (code, signal) => resolve(code ?? (signal ? 1 : 0)));
  });
}

/** A program that a dependency brought, by its name in node_modules/.bin. */
export const bin = (name) =>
  path.join(root, "node_modules/.bin", process.platform === "win32" ? `${name}.cmd` : name);

export function requireNode() {
  const [major = 0, minor = 0] = process.versions.node.split(".").map(Number);
  if (major < 20 || (major === 20 && minor < 19)) {
    fail(`Node ${process.versions.node} found; Node 20.19 or later is needed.`);
  }
}

/**
 * npm ci, unless node_modules was installed from this very lock file. The stamp is a digest, not a
 * time: a checkout of another commit has new times and may have the same lock.
 */
export async function install() {
  const lock = readFileSync(path.join(root, "package-lock.json"));
  const digest = createHash("sha256").update(lock).digest("hex");
  const stamp = path.join(root, "node_modules/.weighhouse-lock");
  if (existsSync(stamp) && readFileSync(stamp, "utf8") === digest) return;
  say("installing dependencies (npm ci)");
  const code = await run("npm", ["ci", "--no-audit", "--no-fund", "--loglevel=error"]);
  if (code !== 0) fail(`npm ci ended with code ${code}; its message stands above.`);
  writeFileSync(stamp, digest);
}

/** Builds what is stale: turbo knows by the content of the sources. */
export async function build() {
  say("building what is stale (turbo run build)");
  const code = await run(bin("turbo"), ["run", "build", "--output-logs=errors-only"]);
  if (code !== 0) fail(`the build ended with code ${code}; its message stands above.`);
}

export function has(command) {
  return spawnSync("sh", ["-c", `command -v ${command}`], { stdio: "ignore" }).status === 0;
}
