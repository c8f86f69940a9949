#!/usr/bin/env node
// Committed so that npm links it at install; the program itself is built from source when it is stale.
import { build, bundle, isStale } from "../build.mjs";

try {
  if (isStale()) await build();
} catch (error) {
  process.stderr.write(`weighhouse could not be built: ${error.message}\n`);
  process.exit(2);
}
await import(bundle);
