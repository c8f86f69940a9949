import { defineConfig } from "vitest/config";
import webAlias from "./apps/web/import-alias.cjs";

const excluded = ["**/node_modules/**", "**/dist/**", "**/.next/**", "test/e2e/**"];

/**
 * Two projects: `pure` needs nothing but Node; `database` talks to a real PostgreSQL, started once
 * for the run (WEIGHHOUSE_TEST_DATABASE_ADMIN_URL names another server, such as Debian's 15).
 */
export default defineConfig({
  test: {
    projects: [
      {
        resolve: webAlias.resolve,
        test: {
          name: "pure",
          include: [
            "packages/{numerics,campaign,engine,ledger,tables,figures,audit,timestamps}/**/*.test.ts",
            "apps/{cli,web}/src/**/*.test.ts",
            "test/{reference,house}/**/*.test.ts",
          ],
          exclude: excluded,
          testTimeout: 60_000,
        },
      },
      {
        test: {
          name: "database",
          include: [
            "packages/{store,desk,api}/**/*.test.ts",
            "apps/{scorer,launch}/src/**/*.test.ts",
            "test/{fault,load,security}/**/*.test.ts",
          ],
          exclude: excluded,
          globalSetup: ["packages/store/src/testing/global-setup.ts"],
          testTimeout: 120_000,
          hookTimeout: 120_000,
        },
      },
    ],
  },
});
