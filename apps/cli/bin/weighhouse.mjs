#!/usr/bin/env node
// Committed so that npm links it at install; the program itself is built from source when it is stale.
import { sep } from "node:path";
import { build, bundle, isStale } from "../build.mjs";

// npx runs from the folder of the workspace that one stands in; paths are meant from where one stands.
const {
  npm_lifecycle_event: event,
  npm_lifecycle_script: script = "",
  INIT_CWD = "",
} = process.env;
const byNpx = event === "npx" && /^["']?weighhouse["']?(\s|$)/.test(script);
if (byNpx && INIT_CWD.startsWith(process.cwd() + sep)) process.chdir(INIT_CWD);

try {
  if (isStale()) await build();
} catch (error) {
  process.stderr.write(`weighhouse could not be built: ${error.message}\n`);
  process.exit(2);
}
await import(bundle);
