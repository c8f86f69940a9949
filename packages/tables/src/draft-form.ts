import { measurementId, optional } from "@weighhouse/campaign/fields";
import { readForm } from "@weighhouse/campaign/form";
import { measurementFields } from "@weighhouse/campaign/measurement";
import { quickContent } from "@weighhouse/campaign/quick-measurement";
import * as z from "zod";
import type { RowProblem } from "./table";

/** A measurement's form, the id optional: posting makes one from the row's content. */
const draftSchema = z.strictObject({ ...measurementFields, id: optional(measurementId) });

/**
 * What the schema refuses, told by column where a field was read from one. The quick check comes
 * first: most rows are good.
 */
export function formProblems(
  draft: Record<string, unknown>,
  columnOf: (field: string) => string | null,
): RowProblem[] {
  const withId = draft["id"] === undefined ? { ...draft, id: "-" } : draft;
  if (quickContent(withId) !== null || draftSchema.safeParse(draft).success) return [];
  return readForm(draftSchema, draft, "").problems.map(({ pointer, found, allowed }) => {
    const steps = pointer
      .split("/")
      .slice(1)
      .map((step) => step.replaceAll("~1", "/").replaceAll("~0", "~"));
    const [field = "", within = ""] = steps;
    const column = columnOf(`${field}.${within}`) ?? columnOf(field) ?? (field || null);
    return { column, found, allowed };
  });
}
