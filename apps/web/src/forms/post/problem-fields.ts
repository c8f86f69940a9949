import type { Path } from "react-hook-form";
import { problemWords } from "../form-schema";
import type { PreviewedRow } from "./fates";
import type { MeasurementDraft } from "./measurement-draft";

const fields = [
  "measurand",
  "facility",
  "observedAt",
  "value",
  "sd",
  "unit",
  "batch",
  "status",
  "source",
  "sameData",
  "id",
] as const satisfies (keyof MeasurementDraft)[];

/** Where in the form each of a row's problems stands; the rest is shown in the preview alone. */
export function problemFields(
  row: PreviewedRow,
): { field: Path<MeasurementDraft>; message: string }[] {
  return row.problems.flatMap(({ column, found, allowed }) => {
    const field = fields.find((name) => name === column);
    return field === undefined ? [] : [{ field, message: problemWords({ found, allowed }) }];
  });
}
