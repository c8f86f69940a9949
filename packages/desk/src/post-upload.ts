import type { Problem } from "@weighhouse/campaign/problem";
import { compareStaged } from "@weighhouse/store/compare-staged";
import type { FateCounts } from "@weighhouse/store/compare-staged";
import { enterStaged } from "@weighhouse/store/enter-staged";
import { countStaged, stagedRows } from "@weighhouse/store/read-staged";
import type { StagedRow } from "@weighhouse/store/read-staged";
import type { Upload } from "@weighhouse/store/uploads";
import type { Access } from "./access";
import { appended } from "./appended";
import type { Desk } from "./desk";
import { DeskError, invalid } from "./desk-error";
import { inConflict } from "./posted-rows";
import type { PostedRows, TellProgress } from "./posted-rows";
import type { RowProblem } from "./read-rows";
import { authorOf } from "./record-entries";
import type { Place } from "./row-source";
import { onStore } from "./store-refusals";

/** So many faults are told; of a file with more, their number. */
const MOST_FAULTS = 100;

/** How often it is compared again when others post the same ids meanwhile. */
const ATTEMPTS = 5;

/**
 * Enters what is staged, all of it or nothing: what is refused, repeated or in conflict keeps the
 * whole out.
 */
export async function postUpload(
  desk: Desk,
  access: Access,
  input: {
    upload: Upload;
    together: Together;
    place: PartPlace;
    bytes: number;
    tell: TellProgress;
  },
): Promise<PostedRows> {
  const { upload, place, bytes, tell } = input;
  const { store, clock } = desk;
  const { key } = access.campaign;
  for (let attempt = 0; attempt < ATTEMPTS; attempt += 1) {
    tell({ stage: "check", rows: 0, bytes });
    const { size, counts } = await onStore(() => compareStaged(store, upload));
    const { rows, refused } = await countStaged(store, upload);
    const together = await input.together();
    if (refused + counts.repeated > 0 || together.length > 0) {
      throw invalid([...(await faultsOf(desk, { upload, place, refused, counts })), ...together]);
    }
    if (counts.conflict > 0) throw await conflictsOf(desk, upload, place);
    const posted = rows - counts.alreadyThere;
    const outcome = { key, posted, alreadyThere: counts.alreadyThere, ids: null };
    if (posted === 0) return { ...outcome, appended: null };
    tell({ stage: "enter", rows: posted, bytes });
    const by = authorOf(access);
    const entered = await onStore(() =>
      enterStaged(store, { upload, by, comparedAt: size, clock }),
    );
    if (entered !== null) return { ...outcome, appended: appended(key, entered) };
  }
  throw new DeskError("busy", "others kept posting measurements of the same ids; try again");
}

/** What is wrong with the rows taken together; asked once it is known which are new. */
export type Together = () => Promise<Problem[]>;

/** Where a row of a part lies in what was sent. */
export type PartPlace = (part: number) => Place;

async function faultsOf(
  desk: Desk,
  of: { upload: Upload; place: PartPlace; refused: number; counts: FateCounts },
): Promise<Problem[]> {
  const faults: Problem[] = [];
  let rows = 0;
  for await (const some of stagedRows(desk.store, of.upload, "faults")) {
    for (const row of some) {
      if (row.fate === "conflict" || rows === MOST_FAULTS) continue;
      rows += 1;
      const place = of.place(row.part);
      faults.push(...rowProblems(row).map((problem) => place.row(problem, row.line)));
    }
    if (rows === MOST_FAULTS) break;
  }
  const more = of.refused + of.counts.repeated - rows;
  if (more > 0) {
    const found = `${more} more rows that are refused`;
    faults.push({ pointer: "", code: "bad-format", found, allowed: "rows without a fault" });
  }
  return faults;
}

/** Why a row is refused, in words. */
export function rowProblems(row: StagedRow): RowProblem[] {
  if (row.fate !== "repeated") return row.problems as RowProblem[];
  const { part, line } = row.about;
  const where = part === row.part ? `line ${line}` : `part ${part}, line ${line}`;
  const found = `${row.id}, which ${where} has already`;
  return [{ column: "id", found, allowed: "each id once" }];
}

async function conflictsOf(desk: Desk, upload: Upload, place: PartPlace): Promise<DeskError> {
  const conflicts = [];
  for await (const rows of stagedRows(desk.store, upload, "faults")) {
    for (const row of rows) if (row.fate === "conflict") conflicts.push(row.about);
    if (conflicts.length >= MOST_FAULTS) break;
  }
  return inConflict(conflicts.slice(0, MOST_FAULTS), place(0));
}
