import type { measurandFinder } from "@weighhouse/campaign/measurand-of";
import type { RowProblem } from "./table";

/** Fills in the measurand that a draft falls in, where it names none. */
export function placeDraft(
  draft: Record<string, unknown>,
  { observable, find }: { observable: unknown; find: ReturnType<typeof measurandFinder> },
): { problem: RowProblem | null; notes: string[] } {
  if ((draft["measurand"] ?? null) !== null) return { problem: null, notes: [] };
  const falling = find({ ...draft, observable });
  if (!("measurand" in falling)) return { problem: { column: "measurand", ...falling }, notes: [] };
  draft["measurand"] = falling.measurand;
  return { problem: null, notes: [`falls in the measurand ${falling.measurand}`] };
}
