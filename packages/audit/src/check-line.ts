export type Outcome = "ok" | "failed" | "not present";

/** One line of a report: what was checked, how it came out, and where it failed. */
export type CheckLine = { check: string; outcome: Outcome; detail: string };

/** `ok` is true where no line failed. */
export type VerifyReport = { ok: boolean; lines: CheckLine[] };
