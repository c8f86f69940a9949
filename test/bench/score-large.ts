import { execFileSync, spawnSync } from "node:child_process";
import { mkdtempSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { fileURLToPath } from "node:url";
import type { Standings } from "@weighhouse/campaign/standings";
import { campaignForm } from "./invented-campaign";

/**
 * `weighhouse score --json` of a large document, start to finish, against a numpy script that
 * reads the same file and scores it by the same algebra (score_baseline.py; Debian's python3-numpy).
 */
const ROUNDS = 5;
const size = { measurements: 200_000, measurands: 40, errors: 12, hypotheses: 20, perBatch: 0 };
const path = (name: string) => fileURLToPath(new URL(name, import.meta.url));

interface Run {
  seconds: number;
  megabytes: number;
  out: string;
}

/** Time and peak memory as the operating system counts them, for both by the same means. */
const measured = `
import json, resource, subprocess, sys, time
start = time.perf_counter()
out = subprocess.run(sys.argv[1:], stdout=subprocess.PIPE, check=True).stdout.decode()
seconds = time.perf_counter() - start
peak = resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss / 1024
json.dump({"seconds": seconds, "megabytes": peak, "out": out}, sys.stdout)
`;

function run(command: readonly string[]): Run {
  const out = execFileSync("python3", ["-c", measured, ...command], {
    encoding: "utf8",
    maxBuffer: 2 ** 28,
  });
  return JSON.parse(out) as Run;
}

/** The run of median time, after one that isn't counted; peak memory is the largest of all. */
function median(runs: readonly Run[]): Run {
  const ordered = runs.toSorted((a, b) => a.seconds - b.seconds);
  const megabytes = Math.max(...runs.map((one) => one.megabytes));
  return { ...ordered[ordered.length >> 1]!, megabytes };
}

if (!hasNumpy()) {
  console.log(
    "\nweighhouse score against numpy NOT RUN: python3-numpy is missing, and wasn't installed",
  );
  process.exit(0);
}
const folder = mkdtempSync(join(tmpdir(), "weighhouse-bench-"));
try {
  const file = join(folder, "campaign.json");
  writeFileSync(file, JSON.stringify(campaignForm(size)));
  const ours = [
    process.execPath,
    path("../../apps/cli/bin/weighhouse.mjs"),
    "score",
    file,
    "--json",
  ];
  const baseline = ["python3", path("score_baseline.py"), file];
  run(ours);
  run(baseline);
  // Alternately, so that what else the machine does falls on both.
  const pairs = Array.from({ length: ROUNDS }, () => ({ ours: run(ours), theirs: run(baseline) }));
  const own = median(pairs.map((pair) => pair.ours));
  const numpy = median(pairs.map((pair) => pair.theirs));
  report(own, numpy);
} finally {
  rmSync(folder, { recursive: true });
}

function report(own: Run, numpy: Run): void {
  const { measurements, measurands, errors, hypotheses } = size;
  console.log(
    `\nweighhouse score --json: ${measurements} measurements, ${measurands} measurands, ${errors} shared errors, ${hypotheses} hypotheses`,
  );
  console.log("                seconds   peak MB");
  const line = (name: string, one: Run) =>
    `  ${name.padEnd(12)} ${one.seconds.toFixed(2).padStart(8)} ${one.megabytes.toFixed(0).padStart(9)}`;
  console.log(line("numpy", numpy));
  console.log(line("weighhouse", own));
  const ratio = (of: (one: Run) => number) => (of(own) / of(numpy)).toFixed(2);
  console.log(
    `  ratio        ${ratio((one) => one.seconds).padStart(8)} ${ratio((one) => one.megabytes).padStart(9)}`,
  );
  console.log(`  largest difference of ln evidences: ${difference(own, numpy).toExponential(1)}`);
}

/** Both compute the same: relative difference of ln evidences. */
function difference(own: Run, numpy: Run): number {
  const standings = JSON.parse(own.out) as Standings;
  const { hypotheses } = JSON.parse(numpy.out) as {
    hypotheses: { key: string; lnEvidence: number }[];
  };
  let most = 0;
  for (const { key, lnEvidence } of hypotheses) {
    const found = standings.hypotheses.find((one) => one.key === key)!.lnEvidence!;
    most = Math.max(most, Math.abs(found - lnEvidence) / Math.abs(lnEvidence));
  }
  return most;
}

/** Debian's numpy, installed with apt-get where it is missing and this is root. */
function hasNumpy(): boolean {
  const there = () => spawnSync("python3", ["-c", "import numpy"]).status === 0;
  if (there()) return true;
  if (process.getuid?.() !== 0) return false;
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
  const apt = (...args: string[]) => spawnSync("apt-get", args, { stdio: "inherit", env });
  apt("update", "-qq");
  apt("install", "-qq", "-y", "--no-install-recommends", "python3-numpy");
  return there();
}
