import * as z from "zod";
import type { Actor, Desk } from "./desk";
import type { JudgedRow } from "./judge-rows";
import { measurementSource } from "./measurement-source";
import { parseInput } from "./parse-input";
import { previewRows } from "./preview-rows";
import type { PreviewedRows } from "./previewed-rows";
import { readRows } from "./read-rows";
import { inText, piecesOf } from "./row-source";

export const previewMeasurementsInput = z.strictObject({
  key: z.string(),
  source: measurementSource,
});

export type MeasurementsPreview = PreviewedRows & { rows: JudgedRow[] };

/** What posting would do, row by row and to the standings. Enters nothing. */
export async function previewMeasurements(
  desk: Desk,
  actor: Actor,
  input: z.input<typeof previewMeasurementsInput>,
): Promise<MeasurementsPreview> {
  const { key, source } = parseInput(previewMeasurementsInput, input);
  const rows: JudgedRow[] = [];
  const previewed = await previewRows(desk, actor, {
    key,
    source: (document) => {
      const { rows, columns, problems } = readRows(source, document);
      return { pieces: piecesOf(rows, 0), columns, problems, place: inText("") };
    },
    row: (row) => void rows.push(row),
  });
  return { ...previewed, rows };
}
