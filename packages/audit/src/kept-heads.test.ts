import type { LedgerRecord } from "@weighhouse/campaign/changes";
import { expect, it } from "vitest";
import { keptHeads, MOST_HEADS } from "./kept-heads";

const records = (count: number, kinds: Record<number, LedgerRecord["kind"]> = {}): LedgerRecord[] =>
  Array.from({ length: count }, (_, seq) => ({
    seq,
    at: "",
    by: { system: true },
    kind: kinds[seq] ?? "remark.made",
    payload: {},
  }));
const sizes = (count: number) => Array.from({ length: count }, (_, index) => index + 1);

it("up to a thousand heads are all kept", () => {
  expect(keptHeads(sizes(MOST_HEADS), records(MOST_HEADS), []).size).toBe(MOST_HEADS);
});

it("of a hundred thousand, first and last, cited, stamped and closing ones are kept, and a thousand at most", () => {
  const count = 100_000;
  const kinds = { 777: "standings.cited", 4321: "registration.closed" } as const;
  const kept = keptHeads(sizes(count), records(count, kinds), [31_337]);
  for (const size of [1, count, 777, 4322, 31_337]) expect(kept.has(size)).toBe(true);
  expect(kept.size).toBeLessThanOrEqual(MOST_HEADS);
  expect(kept.size).toBeGreaterThan(0.9 * MOST_HEADS);
});

it("where something hangs on too many heads, their number still has its limit", () => {
  const stamped = sizes(5000);
  expect(keptHeads(sizes(100_000), records(10), stamped).size).toBeLessThanOrEqual(MOST_HEADS);
});
