import type { VerifyReport } from "@weighhouse/audit/checks/line";

/** What the page hands to the worker that checks an archive. */
export interface CheckRequest {
  bytes: ArrayBuffer;
  /** A public key that the reader already holds, in its text form. */
  trustedKey: string | null;
  /** A signed head that the reader kept. */
  trustedHead: string | null;
}

export type CheckAnswer =
  { report: VerifyReport; failure: null } | { report: null; failure: string };

/** Larger than any archive of 200,000 measurements; a browser would run out of memory first. */
export const mostBytes = 1024 ** 3;

/** "12.3 MB", in powers of ten (SI). */
export function sizeWords(bytes: number): string {
  if (bytes < 1000) return `${bytes} bytes`;
  const units = ["kB", "MB", "GB"];
  const power = Math.min(units.length, Math.floor(Math.log10(bytes) / 3));
  return `${(bytes / 1000 ** power).toFixed(1)} ${units[power - 1]}`;
}

export function outcomeCounts(report: VerifyReport): string {
  const count = (outcome: VerifyReport["lines"][number]["outcome"]) =>
    report.lines.filter((line) => line.outcome === outcome).length;
  const failed = count("failed");
  const absent = count("not present");
  return [
    `${count("ok")} ok`,
    failed > 0 ? `${failed} failed` : "",
    absent > 0 ? `${absent} not present` : "",
  ]
    .filter((part) => part !== "")
    .join(", ");
}
