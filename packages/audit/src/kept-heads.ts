import type { LedgerRecord } from "@weighhouse/campaign/changes";
import { thinned } from "./timeline";

/**
 * Heads in an archive, at most. A head proves what the entries up to its size prove again; a million
 * of them would be a gigabyte, a quarter of an hour of signatures to check, and more files than a ZIP
 * without its 64-bit extension holds (65,535).
 */
export const MOST_HEADS = 1000;

/**
 * Which of the signed heads an archive keeps, by their sizes: all up to MOST_HEADS; else the first and
 * last, those that something hangs on (a citation, a time-stamp, registration's close), and others
 * evenly.
 *
 * @param sizes of all signed heads, increasing
 * @param stamped sizes of heads that have a time-stamp
 */
export function keptHeads(
  sizes: readonly number[],
  records: readonly LedgerRecord[],
  stamped: readonly number[],
): Set<number> {
  if (sizes.length <= MOST_HEADS) return new Set(sizes);
  const wanted = new Set<number>(stamped);
  for (const { kind, seq } of records) {
    // A citation is as of the size before it.
    if (kind === "standings.cited") wanted.add(seq);
    if (kind === "registration.closed") wanted.add(seq + 1);
  }
  const needed = thinned(
    sizes.filter((size) => wanted.has(size)),
    MOST_HEADS / 2,
  );
  return new Set([...thinned(sizes, MOST_HEADS - needed.length), ...needed]);
}
