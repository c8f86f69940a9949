import { key, optional } from "@weighhouse/campaign/fields";
import { measurementFields } from "@weighhouse/campaign/measurement";
import type { TableChoices } from "@weighhouse/tables/table-match";
import { z } from "zod";
import { numberFromText, textOrNull } from "../../entered-text";
import { formSchema } from "../../form-schema";
import type { RowDefaults } from "./protocol";

/** What the form holds for a whole table: text as typed. */
export interface TableDraft {
  text: string;
  measurand: string;
  facility: string;
  batch: string;
  status: RowDefaults["status"];
  /** What a limit is stated at where the table doesn't say: nothing, a confidence, or sigmas. */
  limitsAt: "" | "confidence" | "sigmas";
  limitsNumber: string;
  decimal: "" | "point" | "comma";
}

export const emptyTable: TableDraft = {
  text: "",
  measurand: "",
  facility: "",
  batch: "",
  status: "final",
  limitsAt: "",
  limitsNumber: "",
  decimal: "",
};

const wholeSchema = z.strictObject({
  measurand: optional(key),
  facility: optional(key),
  batch: measurementFields.batch,
  status: z.enum(["final", "provisional"]),
  confidence: measurementFields.confidence,
  sigmas: measurementFields.sigmas,
  decimal: z.enum(["point", "comma"]).nullable(),
});
type Whole = z.output<typeof wholeSchema>;

/** What is said for all rows of a table, by the schema of a measurement's own fields. */
export const tableSchema = formSchema<TableDraft, Whole>({
  schema: wholeSchema,
  content: (draft) => ({
    measurand: textOrNull(draft.measurand),
    facility: textOrNull(draft.facility),
    batch: textOrNull(draft.batch),
    status: draft.status,
    confidence: draft.limitsAt === "confidence" ? (numberFromText(draft.limitsNumber) ?? "") : null,
    sigmas: draft.limitsAt === "sigmas" ? (numberFromText(draft.limitsNumber) ?? "") : null,
    decimal: draft.decimal === "" ? null : draft.decimal,
  }),
  field: (_, path) =>
    ["confidence", "sigmas"].includes(String(path[0])) ? "limitsNumber" : path.join("."),
});

export function defaultsOf({ measurand, facility, batch, status }: Whole): RowDefaults {
  return { measurand, facility, batch, status };
}

/** The choices made column by column, with those made for the whole table. */
export function choicesOf(
  columns: TableChoices,
  { confidence, sigmas, decimal }: Whole,
): TableChoices {
  const limits = confidence !== null ? { confidence } : sigmas !== null ? { sigmas } : null;
  return { ...columns, decimal, limits };
}
