import { clocks } from "@weighhouse/campaign/entries";
import { readLines } from "./archive-text";
import type { Files } from "./container";
import { notChecked, notPresent, ok } from "./line";
import type { CheckLine } from "./line";
import { PAYLOADS } from "../layout";

/** What entry 0 says of the ledger. */
export type Opening = { ledger: string; clock: (typeof clocks)[number] };

/** Reads entry 0's payload by itself, so that a fault in another leaves the ledger its name. */
export function openingOf(files: Files): Opening | null {
  const read = readLines(files, PAYLOADS);
  if (!read.ok) return null;
  let payload: unknown;
  try {
    payload = JSON.parse(read.lines[0] as string);
  } catch {
    return null;
  }
  if (typeof payload !== "object" || payload === null) return null;
  const { ledger, clock } = payload as Record<string, unknown>;
  if (typeof ledger !== "string") return null;
  const known = clocks.find((one) => one === clock);
  return known === undefined ? null : { ledger, clock: known };
}

/** A simulated clock is said aloud: its ledger's times prove nothing. */
export function checkClock(opening: Opening | null): CheckLine {
  if (opening === null) return notChecked("clock", "payloads");
  if (opening.clock === "real") return ok("clock", "times are the database's, by entry 0");
  return notPresent(
    "clock",
    "simulated, by entry 0: the times were given by a program (a demonstration or a test), not read from a clock",
  );
}
