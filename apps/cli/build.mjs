import { mkdirSync, readdirSync, renameSync, statSync } from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const here = fileURLToPath(new URL(".", import.meta.url));
export const bundle = join(here, "dist/weighhouse.mjs");

/** What the bundle is made from: another package in it is another name here. */
const packages = ["audit", "campaign", "engine", "figures", "ledger", "numerics", "tables"];

/** Whether a source, or a folder that lost or gained one, is newer than the bundle. */
export function isStale() {
  const built = modified(bundle);
  if (built === null) return true;
  const sources = [
    join(here, "build.mjs"),
    join(here, "package.json"),
    join(here, "../../package-lock.json"),
    join(here, "src"),
    ...packages.map((name) => join(here, "../../packages", name, "src")),
  ];
  return sources.some((path) => newerThan(path, built));
}

/** One minified file; a command's parts are evaluated only when it runs. */
export async function build() {
  const { build: bundleWith } = await import("esbuild");
  mkdirSync(join(here, "dist"), { recursive: true });
  // Several commands may build at once: each writes its own file, and the rename is atomic.
  const draft = join(here, `dist/weighhouse.${process.pid}.mjs`);
  await bundleWith({
    absWorkingDir: here,
    entryPoints: ["src/main.ts"],
    outfile: draft,
    bundle: true,
    minify: true,
    platform: "node",
    target: "node20",
    format: "esm",
    legalComments: "none",
    logLevel: "silent",
    banner: {
      js: 'import{createRequire as makeRequire}from"node:module";const require=makeRequire(import.meta.url);',
    },
  });
  renameSync(draft, bundle);
}

function newerThan(path, time) {
  const status = statSync(path, { throwIfNoEntry: false });
  if (status === undefined) return false;
  if (status.mtimeMs > time) return true;
  if (!status.isDirectory()) return false;
  return readdirSync(path, { withFileTypes: true }).some((entry) =>
    newerThan(join(path, entry.name), time),
  );
}

function modified(path) {
  return statSync(path, { throwIfNoEntry: false })?.mtimeMs ?? null;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) await build();
