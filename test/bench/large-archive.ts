/**
 * Times and sizes of large archives, by hand: `npm run large-archive --workspace test`.
 *
 * On a machine of two cores that others kept busy (load 19, so about eight times the time it takes
 * alone): 10,000 measurements in 104 transactions written in 17 s and verified in 19 s, 0.8 MB
 * (15 MB unpacked); one a transaction, 10,004 of them, written in 41 s and verified in 25 s, 1.7 MB
 * (18 MB unpacked), 1,000 heads of 10,004 kept. 400 MB of memory.
 */
import { nodeHasher } from "@weighhouse/ledger/node-hasher";
import { nodeVerifySignature } from "@weighhouse/ledger/node-keys";
import { scoreCampaign } from "@weighhouse/engine/score";
import { verifyArchive } from "@weighhouse/audit/verify";
import { writeArchive } from "@weighhouse/audit/write";
import { unpackFiles } from "@weighhouse/audit/zip/read";
import { largeInput } from "@weighhouse/audit/testing/large-campaign";

const SIZES = [
  [10_000, 100],
  [10_000, 1],
] as const;

for (const [measurements, perPosting] of SIZES) {
  const input = largeInput(measurements, perPosting);
  const started = performance.now();
  const archive = writeArchive({ ...input, hasher: nodeHasher });
  const written = performance.now();
  const report = verifyArchive(archive, {
    hasher: nodeHasher,
    verifySignature: nodeVerifySignature,
    score: scoreCampaign,
  });
  const verified = performance.now();
  const unpacked = [...unpackFiles(archive).values()].reduce((sum, { length }) => sum + length, 0);
  const seconds = (from: number, to: number) => `${((to - from) / 1000).toFixed(1)} s`;
  console.log(
    [
      `${measurements} measurements in ${input.entries.length} entries, ${input.heads.length} heads`,
      `written in ${seconds(started, written)}, ${(archive.length / 1e6).toFixed(1)} MB (${(unpacked / 1e6).toFixed(1)} MB unpacked)`,
      `verified in ${seconds(written, verified)}, ${report.ok ? "good" : "NOT GOOD"}`,
      `${(process.memoryUsage().rss / 1e6).toFixed(0)} MB of memory`,
    ].join("; "),
  );
  for (const { check, outcome, detail } of report.lines) {
    if (outcome === "failed") console.log(`  ${check}: ${detail}`);
  }
}
