import { spawnSync } from "node:child_process";
import { readFileSync, writeFileSync } from "node:fs";
import path from "node:path";
import { afterAll, describe, expect, it } from "vitest";
import { coveredArchives, marshArchives, uncoveredArchive } from "./campaigns";
import { removeUnpacked, unpacked } from "./unpacked";

afterAll(removeUnpacked);

/** Debian's Python, without packages, variables and folders of the user's. */
function check(folder: string): { status: number | null; lines: string[] } {
  const run = spawnSync("/usr/bin/python3", ["-I", "-S", "check.py"], { cwd: folder });
  expect(run.stderr.toString()).toBe("");
  return { status: run.status, lines: run.stdout.toString().trim().split("\n") };
}

describe("check.py, another implementation, agrees with the engine to 1e-9", () => {
  it.each(coveredArchives())("on %s", (_, archive) => {
    const folder = unpacked(archive);
    const { status, lines } = check(folder);
    expect(lines.filter((line) => line.startsWith("FAILED"))).toEqual([]);
    expect(status).toBe(0);
    const standings = JSON.parse(readFileSync(path.join(folder, "standings.json"), "utf8"));
    for (const { key } of standings.hypotheses) {
      if (key === "noneOfThese") continue;
      expect(lines.some((line) => line.startsWith(`ok           ${key}: ln Z`))).toBe(true);
    }
    expect(lines.some((line) => line.startsWith("ok           Bayes factors and post"))).toBe(true);
    const left = lines.filter((line) => line.startsWith("not covered"));
    expect(left.map((line) => line.slice(13).split(":")[0])).toEqual(["signatures", "the rest"]);
  });
});

it("names what it doesn't cover, and never says ok of it", () => {
  const { status, lines } = check(unpacked(uncoveredArchive()));
  expect(status).toBe(0);
  expect(lines).toContain("not covered  one: the expression for width");
  expect(lines).toContain("not covered  two: scale event of flash");
  expect(lines.some((line) => line.startsWith("not covered  posteriors and ranks"))).toBe(true);
  expect(lines.filter((line) => /^ok +(one|two|Bayes)/.test(line))).toEqual([]);
});

const lies: [name: string, file: string, change: (text: string) => string, line: string][] = [
  [
    "an evidence",
    "standings.json",
    (t) => t.replace(/"lnEvidence":-4\.\d+/, '"lnEvidence":-4.1'),
    "warm-spring",
  ],
  [
    "a chi-square",
    "standings.json",
    (t) => t.replace(/"chiSquare":2\.6\d+/, '"chiSquare":2.7'),
    "warm-spring",
  ],
  [
    "a posterior",
    "standings.json",
    (t) => t.replace(/"posterior":0\.96\d+/, '"posterior":0.99'),
    "Bayes factors",
  ],
  [
    "a combined value",
    "standings.json",
    (t) => t.replace('"combined":{"value":19.5', '"combined":{"value":19.6'),
    "combined vapour-may",
  ],
  [
    "an order",
    "standings.json",
    (t) => t.replace('"order":"after"', '"order":"before-observation"'),
    "before and after",
  ],
  ["a payload", "payloads.ndjson", (t) => t.replace("19.2", "19.3"), "ledger"],
  ["an entry", "ledger.ndjson", (t) => t.replace("m-1", "m-2"), "tree heads"],
  ["a file", "methods.md", (t) => `${t}More.\n`, "files"],
];

it.each(lies)("%s changed makes it fail and say where", (_, file, change, name) => {
  const [, archive] = marshArchives()[0] as [string, Uint8Array];
  const folder = unpacked(archive);
  const text = readFileSync(path.join(folder, file), "utf8");
  expect(change(text)).not.toBe(text);
  writeFileSync(path.join(folder, file), change(text));
  const { status, lines } = check(folder);
  expect(status).toBe(1);
  expect(lines.some((line) => line.startsWith(`FAILED       ${name}`))).toBe(true);
});
