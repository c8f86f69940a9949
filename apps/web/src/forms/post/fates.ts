import { unitOf } from "@/campaign/plain-words";
import type { MeasurementsPreview } from "@weighhouse/desk/preview-measurements";
import type { ShownRow } from "./table/protocol";
import { formatCount } from "@weighhouse/figures/numbers";
import { formatWithUncertainty } from "@weighhouse/figures/numbers";
import { problemWords } from "../form-schema";

export type PreviewedRow = MeasurementsPreview["rows"][number];
export type Fate = PreviewedRow["fate"];

export const fateWords: Record<Fate, string> = {
  new: "new",
  alreadyThere: "already there",
  conflict: "conflict",
  refused: "refused",
};

export const fateInk: Record<Fate, string> = {
  new: "text-fir",
  alreadyThere: "text-quiet",
  conflict: "text-rust font-medium",
  refused: "text-rust font-medium",
};

/** The rows to show: those that stop the posting first, then the first of the others, in order. */
export function rowsToShow(
  rows: readonly PreviewedRow[],
  most: { stopping: number; others: number },
): PreviewedRow[] {
  const stops = (row: PreviewedRow) => row.fate === "refused" || row.fate === "conflict";
  return [
    ...rows.filter(stops).slice(0, most.stopping),
    ...rows.filter((row) => !stops(row)).slice(0, most.others),
  ];
}

/** "3 new, 1 already there, 2 refused". */
export function countWords(counts: Record<Fate, number>): string {
  const fates: Fate[] = ["new", "alreadyThere", "conflict", "refused"];
  const said = fates.filter((fate) => counts[fate] > 0);
  if (said.length === 0) return "no rows";
  return said
    .map(
      (fate) =>
        `${formatCount(counts[fate])} ${fate === "conflict" ? "in conflict" : fateWords[fate]}`,
    )
    .join(", ");
}

/** Why a row will not be entered as it stands; nothing for a new one. */
export function reasonsOf(row: Pick<ShownRow, "fate" | "conflict" | "problems">): string[] {
  if (row.fate === "alreadyThere") return ["The same measurement is on record; nothing to enter."];
  if (row.conflict !== null) {
    const { field, there, posted } = row.conflict;
    return [
      `On record with another ${field}: ${JSON.stringify(there)} there, ${JSON.stringify(posted)} here. Give it an id of its own, or post the same content.`,
    ];
  }
  return row.problems.map(
    ({ column, found, allowed }) =>
      `${column === null ? "" : `${column}: `}${problemWords({ found, allowed })}`,
  );
}

/** "1.98 ± 0.18 arcsec", as it would be entered. */
export function valueWords(row: PreviewedRow, unit: string | null): string {
  const { measurement } = row;
  if (measurement === null || measurement.value === null) return "";
  const shownUnit = measurement.unit ?? unit;
  return `${formatWithUncertainty(measurement.value, measurement.sd)}${unitOf({ unit: shownUnit })}`;
}

/** The button's name: what it will enter. */
export function postLabel(count: number): string {
  return count === 1 ? "Post 1 measurement" : `Post ${formatCount(count)} measurements`;
}
