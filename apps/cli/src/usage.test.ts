import { execFileSync } from "node:child_process";
import { readFileSync, statSync } from "node:fs";
import { relative } from "node:path";
import { fileURLToPath } from "node:url";
import { describe, expect, test } from "vitest";
import { bin, eclipse, weighhouse } from "./testing/command";

describe("wrong usage ends with 2 and says what is allowed", () => {
  test.each([
    [
      ["bogus"],
      "found the command bogus; allowed score, check, sensitivity, plan, simulate, chance, verify, seal, reveal, watch, post, export\n",
    ],
    [["score", eclipse, "--jsno"], "found --jsno; allowed --json, --include-after\n"],
    [["score", eclipse, "other.json"], "found a further argument other.json; allowed 1\n"],
    [["score", eclipse, "--json=yes"], "found --json=yes; allowed --json without a value\n"],
    [["score"], "Missing required positional argument: CAMPAIGN\n"],
    [["verify", "a.zip", "--key"], "found --key without a value; allowed --key FILE\n"],
    [
      ["score", "no-such-file.json"],
      "found no readable file no-such-file.json (ENOENT); allowed the path of a file\n",
    ],
    [["export", "-o", "a.zip"], "Missing required argument: --campaign\n"],
    [
      ["export", "--campaign", "../x", "-o", "a.zip"],
      "found --campaign ../x; allowed a key: 1 to 64 of a-z, 0-9 and -, starting with a letter or digit\n",
    ],
  ])("%j", async (args, message) => {
    const { code, out, err } = await weighhouse(args);
    expect([code, out, err]).toEqual([2, "", message]);
  });

  test("no command at all shows the usage on stderr", async () => {
    const { code, out, err } = await weighhouse([]);
    expect([code, out]).toEqual([2, ""]);
    expect(err).toContain(
      "USAGE weighhouse score|check|sensitivity|plan|simulate|chance|verify|seal|reveal|watch|post|export",
    );
  });
});

test("--help is on stdout, plain in a pipe", async () => {
  const whole = await weighhouse(["--help"]);
  expect(whole).toMatchObject({ code: 0, err: "" });
  expect(whole.out).toContain(
    "USAGE weighhouse score|check|sensitivity|plan|simulate|chance|verify|seal|reveal|watch|post|export",
  );
  const one = await weighhouse(["score", "--help"]);
  expect(one.code).toBe(0);
  expect(one.out).toContain("--include-after");
  expect(whole.out + one.out).not.toContain("\u001b");
});

test("--version is the engine's", async () => {
  const { version } = JSON.parse(
    readFileSync(new URL("../package.json", import.meta.url), "utf8"),
  ) as { version: string };
  expect(await weighhouse(["--version"])).toEqual({ code: 0, out: `${version}\n`, err: "" });
});

test("the program is committed as executable, so that npm links it", () => {
  expect(statSync(bin).mode & 0o111).toBe(0o111);
});

test("npx runs it from any folder of a checkout, paths meant from there", () => {
  const folder = fileURLToPath(new URL("commands", import.meta.url));
  // The npx that runs these tests has left its own folder in the environment.
  const env = Object.fromEntries(
    Object.entries(process.env).filter(([name]) => !/^npm_|^INIT_CWD$/.test(name)),
  );
  const out = execFileSync("npx", ["weighhouse", "check", relative(folder, eclipse)], {
    cwd: folder,
    env,
    encoding: "utf8",
  });
  expect(out).toMatch(/^Valid: /);
});

test("a reader that closes the pipe early ends it quietly", () => {
  const shell = `"${process.execPath}" "${bin}" score "${eclipse}" --json | head -1`;
  expect(execFileSync("sh", ["-c", shell], { encoding: "utf8", stdio: "pipe" })).toBe("{\n");
});
