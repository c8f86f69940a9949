export type Outcome = "ok" | "failed" | "not present";

/** The checks, in the order in which they are reported. */
export const CHECKS = [
  "container",
  "files against the manifest",
  "signature of the manifest",
  "entries: hash and order",
  "payloads",
  "root against the signed tree head",
  "manifest against the ledger",
  "signatures of the tree heads",
  "consistency of the tree heads",
  "keys you hold",
  "tree head you hold",
  "time-stamps",
  "clock",
  "rules of the entries",
  "seals",
  "campaign document",
  "before and after data",
  "standings",
  "timeline",
  "sensitivity",
  "tables",
  "figures",
  "texts",
] as const;
export type CheckName = (typeof CHECKS)[number];

/** One line of a report: what was checked, how it came out, and where it failed. */
export type CheckLine = { check: CheckName; outcome: Outcome; detail: string };

/** `ok` is true where no line failed. */
export type VerifyReport = { ok: boolean; lines: CheckLine[] };

/** What a check says, and what it read for the checks after it (null where it can't be had). */
export type Checked<T> = { line: CheckLine; value: T | null };

/** Places named in a line; the rest are counted. */
const MAX_PLACES = 5;

export function ok(check: CheckName, detail: string): CheckLine {
  return { check, outcome: "ok", detail };
}

export function notPresent(check: CheckName, detail: string): CheckLine {
  return { check, outcome: "not present", detail };
}

export function failed(check: CheckName, places: string | readonly string[]): CheckLine {
  const list = typeof places === "string" ? [places] : places;
  const more = list.length > MAX_PLACES ? [`and ${list.length - MAX_PLACES} more`] : [];
  return { check, outcome: "failed", detail: [...list.slice(0, MAX_PLACES), ...more].join("; ") };
}

/** `ok` with its detail where there are no faults, else `failed` with their places. */
export function judged(check: CheckName, faults: readonly string[], detail: string): CheckLine {
  return faults.length === 0 ? ok(check, detail) : failed(check, faults);
}

export function notChecked(check: CheckName, because: CheckName): CheckLine {
  return failed(check, `not checked, because "${because}" failed`);
}

/** 1 file, 2 files. */
export function counted(count: number, noun: string, plural = `${noun}s`): string {
  return `${count} ${count === 1 ? noun : plural}`;
}
