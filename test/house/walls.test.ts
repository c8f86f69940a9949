import { spawnSync } from "node:child_process";
import {
  copyFileSync,
  mkdirSync,
  mkdtempSync,
  readdirSync,
  readFileSync,
  rmSync,
  writeFileSync,
} from "node:fs";
import { tmpdir } from "node:os";
import path from "node:path";
import { afterEach, beforeEach, describe, expect, test } from "vitest";

const root = path.resolve(import.meta.dirname, "../..");
let house: string;

/** A house with one room too many: the rules are the project's own, the files are the test's. */
beforeEach(() => {
  house = mkdtempSync(path.join(tmpdir(), "weighhouse-walls-"));
});
afterEach(() => rmSync(house, { recursive: true }));

function put(file: string, text: string) {
  const place = path.join(house, file);
  mkdirSync(path.dirname(place), { recursive: true });
  writeFileSync(place, text);
}

function program(name: string, args: string[]) {
  const outcome = spawnSync(path.join(root, "node_modules/.bin", name), args, {
    cwd: house,
    encoding: "utf8",
  });
  return { code: outcome.status, text: outcome.stdout + outcome.stderr };
}

const walls = () =>
  program("depcruise", ["packages", "--config", path.join(root, ".dependency-cruiser.cjs")]);
const lint = () => program("oxlint", ["-c", path.join(house, ".oxlintrc.json"), "--deny-warnings"]);

describe("walls", () => {
  test("an import down is let through", () => {
    put("packages/campaign/src/fold.ts", "export const fold = 1;\n");
    put(
      "packages/engine/src/score.ts",
      'import { fold } from "../../campaign/src/fold";\nexport const score = fold;\n',
    );
    expect(walls()).toMatchObject({ code: 0 });
  });

  test("an import up is caught, with the reason", () => {
    put("packages/store/src/append.ts", "export const append = 1;\n");
    put(
      "packages/engine/src/score.ts",
      'import { append } from "../../store/src/append";\nexport const score = append;\n',
    );
    const { code, text } = walls();
    expect(code).toBeGreaterThan(0);
    expect(text).toContain("engine-imports-down-only");
  });

  test("a type imported up is caught too", () => {
    put("packages/store/src/append.ts", "export type Append = number;\n");
    put(
      "packages/campaign/src/fold.ts",
      'import type { Append } from "../../store/src/append";\nexport const fold: Append = 1;\n',
    );
    expect(walls().text).toContain("campaign-imports-down-only");
  });

  test("a pure package that reads a file is caught", () => {
    put(
      "packages/engine/src/score.ts",
      'import { readFileSync } from "node:fs";\nexport const score = readFileSync;\n',
    );
    expect(walls().text).toContain("pure-packages-touch-nothing");
  });

  test("node:crypto is let in at the ledger's node-* files only", () => {
    const source = 'import { createHash } from "node:crypto";\nexport const hash = createHash;\n';
    put("packages/ledger/src/node-hasher.ts", source);
    expect(walls()).toMatchObject({ code: 0 });
    put("packages/ledger/src/tree.ts", source);
    expect(walls().text).toContain("pure-packages-touch-nothing");
  });
});

describe("purity", () => {
  const cases = {
    "Math.random": "export const roll = () => Math.random();\n",
    "Date.now": "export const now = () => Date.now();\n",
    environment: "export const home = () => process.env.HOME;\n",
    performance: "export const now = () => performance.now();\n",
    randomness: "export const id = () => crypto.randomUUID();\n",
    network: 'export const get = () => fetch("http://localhost");\n',
  };

  beforeEach(() => {
    copyFileSync(path.join(root, ".oxlintrc.json"), path.join(house, ".oxlintrc.json"));
  });

  for (const [name, source] of Object.entries(cases)) {
    test(`a pure package that uses ${name} is caught`, () => {
      put("packages/engine/src/score.ts", source);
      const { code, text } = lint();
      expect(code).toBeGreaterThan(0);
      expect(text).toMatch(/Pure packages/);
    });
  }

  test("the same lines in a package with I/O are let through", () => {
    put("packages/store/src/clock.ts", cases["Date.now"]);
    expect(lint()).toMatchObject({ code: 0 });
  });

  // The linter has no rule for a constructor without arguments, so the sources are searched.
  const readsClock = /new Date\(\s*\)/;

  test("no pure source asks what time it is by new Date()", () => {
    expect(readsClock.test("const now = new Date();")).toBe(true);
    const pure = ["numerics", "campaign", "engine", "ledger", "tables", "figures", "audit"];
    const found = pure
      .flatMap((name) =>
        readdirSync(path.join(root, "packages", name, "src"), { recursive: true })
          .map((file) => path.join("packages", name, "src", String(file)))
          .filter((file) => file.endsWith(".ts") && !file.endsWith(".test.ts")),
      )
      .filter((file) => readsClock.test(readFileSync(path.join(root, file), "utf8")));
    expect(found).toEqual([]);
  });
});
