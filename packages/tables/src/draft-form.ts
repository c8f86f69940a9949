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
  if (isQuicklyGood(draft)) return [];
  if (!hasHidden(draft) && draftSchema.safeParse(draft).success) return [];
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

/** Zod passes over a member `__proto__`; the form's reader refuses it. */
function hasHidden(draft: Record<string, unknown>): boolean {
  return [draft, draft["extra"], draft["conditions"]].some(
    (part) => typeof part === "object" && part !== null && Object.hasOwn(part, "__proto__"),
  );
}

/** The quick reading knows no extras, which most tables have: their few rules are looked at here. */
function isQuicklyGood({ extra, ...draft }: Record<string, unknown>): boolean {
  if (!Object.entries(extra ?? {}).every(isExtra) || Array.isArray(extra)) return false;
  if (typeof (extra ?? {}) !== "object") return false;
  draft["id"] ??= "-";
  return quickContent(draft) !== null;
}

function isExtra([name, value]: [string, unknown]): boolean {
  if (name === "" || name === "__proto__" || name.length > 200) return false;
  if (typeof value === "string") return value.length <= 2000;
  return value === null || typeof value === "boolean" || Number.isFinite(value);
}
