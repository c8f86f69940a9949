import { execFileSync } from "node:child_process";
import { cpSync, mkdtempSync, readdirSync, rmSync } from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { describe, expect, it } from "vitest";

const store = path.resolve(import.meta.dirname, "..");
const migrations = path.resolve(store, "../../migrations");

describe("the migrations", () => {
  it("are what the schema says: another would change nothing", () => {
    const copy = mkdtempSync(path.join(tmpdir(), "weighhouse-migrations-"));
    cpSync(migrations, copy, { recursive: true });
    const before = readdirSync(copy).sort();
    const said = execFileSync(
      process.execPath,
      [
        path.resolve(store, "../../node_modules/drizzle-kit/bin.cjs"),
        "generate",
        "--dialect=postgresql",
        "--schema=./src/schema/tables.ts",
        `--out=${path.relative(store, copy)}`,
      ],
      { cwd: store, encoding: "utf8" },
    );
    expect(readdirSync(copy).sort()).toEqual(before);
    expect(said).toContain("No schema changes");
    rmSync(copy, { recursive: true, force: true });
  });
});
