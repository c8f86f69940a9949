import {
  mkdirSync,
  readdirSync,
  renameSync,
  rmSync,
  statSync,
  utimesSync,
  writeFileSync,
} from "node:fs";
import { join } from "node:path";
import { fileURLToPath } from "node:url";

const here = fileURLToPath(new URL(".", import.meta.url));
export const bundle = join(here, "dist/weighhouse.mjs");

/** What the bundle is made from: another package in it is another name here. */
const packages = [
  "audit",
  "campaign",
  "engine",
  "figures",
  "ledger",
  "numerics",
  "tables",
  "timestamps",
];

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

/**
 * A minified entry and chunks named for their content, so that a command reads only what it needs
 * (one file would evaluate three times as much for `score`).
 */
export async function build() {
  const { build: bundleWith } = await import("esbuild");
  const started = new Date();
  const { outputFiles } = await bundleWith({
    absWorkingDir: here,
    entryPoints: { weighhouse: "src/main.ts" },
    outdir: "dist",
    outExtension: { ".js": ".mjs" },
    write: false,
    bundle: true,
    splitting: true,
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
  mkdirSync(join(here, "dist"), { recursive: true });
  // Several commands may build at once: each file appears whole, the entry after all its chunks.
  const entryLast = outputFiles.toSorted((a, b) => (a.path === bundle) - (b.path === bundle));
  for (const { path, contents } of entryLast) {
    const draft = `${path}.${process.pid}.part`;
    writeFileSync(draft, contents);
    // A source saved during the build is newer than this.
    utimesSync(draft, started, started);
    renameSync(draft, path);
  }
  removeOldChunks(new Set(outputFiles.map(({ path }) => path)));
}

/** Chunks of earlier builds, but for those that a command still running may yet read. */
function removeOldChunks(current) {
  const hourAgo = Date.now() - 3_600_000;
  for (const name of readdirSync(join(here, "dist"))) {
    const path = join(here, "dist", name);
    if (!current.has(path) && (modified(path) ?? hourAgo) < hourAgo) rmSync(path, { force: true });
  }
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
