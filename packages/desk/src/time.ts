import { instantOfMicros, microsOfInstant } from "@weighhouse/store/instant";
import type { Desk } from "./desk";

/**
 * The time to judge dates by before anything is appended, as an entry's `at`. An entry itself takes
 * the database's clock; the two differ by seconds at most.
 */
export function timeAt(desk: Desk): string {
  return desk.clock?.() ?? new Date().toISOString().replace(/Z$/, "000Z");
}

/** Whether a date lies at or before a time; no date never does. */
export function isPast(date: string | null, time: string): boolean {
  return date !== null && Date.parse(date) <= Date.parse(time);
}

/** The instant that many microseconds later, as entries of one transaction follow one another. */
export function instantAfter(at: string, micros: number): string {
  return instantOfMicros(microsOfInstant(at) + BigInt(micros));
}
