import type { Payload } from "@weighhouse/campaign/entries";
import { problemLine } from "@weighhouse/campaign/problem";
import type { Conflict } from "@weighhouse/store/post-measurements";
import type { Appended } from "./appended";
import { DeskError } from "./desk-error";
import type { Place } from "./row-source";

export type Correlations = Payload<"measurements.posted">["correlations"];

/** What a posting of many rows is doing, told now and then. */
export type RowProgress = { stage: "read" | "check" | "enter"; rows: number; bytes: number };
export type TellProgress = (progress: RowProgress) => void;

export type PostedRows = {
  key: string;
  /** How many were entered, and how many were there already with the same content. */
  posted: number;
  alreadyThere: number;
  appended: Appended | null;
  /** Ids of those entered, where they are few. */
  ids: string[] | null;
};

/** A row in conflict is found by the store, under its lock. */
export function inConflict(conflicts: Conflict[], place: Place): DeskError {
  const problems = conflicts.map(({ id, field, there, posted }) => ({
    pointer: place.text({ column: null, found: "", allowed: "" }, null).pointer,
    code: "duplicate" as const,
    found: `${id} with ${field} ${JSON.stringify(posted)}`,
    allowed: `${field} ${JSON.stringify(there)}, as it is there, or another id`,
  }));
  return new DeskError("conflict", problems.map(problemLine).join("\n"), { problems });
}
