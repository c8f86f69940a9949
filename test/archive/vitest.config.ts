import path from "node:path";
import { defineConfig } from "vitest/config";

/** Needs Debian's tools, so it is no project of the root's: `node test/debian-tools.mjs` runs it. */
export default defineConfig({
  root: path.resolve(import.meta.dirname, "../.."),
  test: {
    name: "archive",
    include: ["test/{archive,api}/**/*.outside.ts"],
    // A PostgreSQL, for what is asked of a server.
    globalSetup: ["packages/store/src/testing/global-setup.ts"],
    testTimeout: 120_000,
    hookTimeout: 120_000,
  },
});
