import * as z from "zod";
import { correlationSchema } from "@weighhouse/campaign/measurement";
import { key, line, measurementId } from "@weighhouse/campaign/fields";
import { readForm } from "@weighhouse/campaign/form";
import { parseJson } from "@weighhouse/campaign/json-text";
import { measurementContentSchema } from "@weighhouse/campaign/entries";
import { DeskError, invalid } from "@weighhouse/desk/desk-error";
import type { Correlations } from "@weighhouse/desk/posted-rows";
import { inDraft, inDrafts, inText, piecesOf, withDefaults } from "@weighhouse/desk/row-source";
import type { Place, RowDefaults, RowSource } from "@weighhouse/desk/row-source";
import { linePieces } from "@weighhouse/desk/stage-lines";
import { tableRows } from "@weighhouse/desk/table-rows";
import type { Piece } from "@weighhouse/desk/stage-lines";
import type { BodyType, Question } from "./route";

const MAX_BYTES = 32 * 1024 * 1024;

/** A measurement as it may be sent: without an id it gets one, without a measurand it falls in one. */
export const sentMeasurementSchema = measurementContentSchema.in
  .extend({
    id: measurementId.nullish(),
    measurand: key.nullish(),
    observable: key
      .nullish()
      .describe("Where the measurand isn't named: it is found by time and conditions."),
  })
  .omit({ claimed: true });

const sentJsonSchema = z.union([
  sentMeasurementSchema,
  z.array(sentMeasurementSchema),
  z.strictObject({
    measurements: z.array(sentMeasurementSchema),
    correlations: z.array(correlationSchema).nullish(),
  }),
]);

/** The bodies that measurements come in, for posting and for its preview. */
export const rowBodies: Record<string, BodyType> = {
  "application/json": {
    schema: sentJsonSchema,
    says: "One measurement, a list, or a list with correlations.",
    maxBytes: MAX_BYTES,
  },
  "application/x-ndjson": {
    schema: sentMeasurementSchema,
    says: "A measurement a line, as a stream of any length.",
    maxBytes: null,
  },
  "text/csv": {
    schema: null,
    says: "A table whose header names the columns (RFC 4180), read as is remembered for its facility.",
    maxBytes: MAX_BYTES,
  },
  "text/ecsv": { schema: null, says: "An ECSV table, as astropy writes it.", maxBytes: MAX_BYTES },
  "application/x-ecsv": { schema: null, says: "The same.", maxBytes: MAX_BYTES },
  "application/x-votable+xml": {
    schema: null,
    says: "A VOTable (IVOA, 1.4), TABLEDATA or BINARY2.",
    maxBytes: MAX_BYTES,
  },
};

/** What rows without the field have. */
export const rowDefaultsSchema = z.strictObject({
  facility: key.optional().describe("The facility of rows that name none."),
  team: key.optional().describe("The team of rows that name none."),
  measurand: key.optional().describe("The measurand of rows that name none."),
  batch: line.optional().describe("The batch of rows that name none."),
});

/** The rows that a request brings. A stream is read as it is worked on. */
export async function rowsOfBody({
  desk,
  key: campaign,
  request,
  bodyType,
  query,
}: Pick<
  Question<unknown, RowDefaults>,
  "desk" | "key" | "request" | "bodyType" | "query"
>): Promise<{ source: RowSource; correlations: Correlations }> {
  const { facility, team, measurand, batch } = query;
  const defaults = present({ facility, team, measurand, batch });
  if (bodyType === "application/x-ndjson") {
    const pieces = filled(linePieces(chunksOf(request)), defaults);
    return { source: rowsOf(pieces, inText("")), correlations: [] };
  }
  if (bodyType === "application/json") return rowsOfJson(await request.text(), defaults);
  const bytes = new Uint8Array(await request.arrayBuffer());
  const fields = {
    measurand: measurand ?? null,
    facility: facility ?? null,
    team: team ?? null,
    batch: batch ?? null,
  };
  const read = await tableRows(desk, campaign, { name: "", bytes, defaults: fields });
  return {
    source: (document) => {
      const { rows, columns, problems } = read(document);
      return { pieces: piecesOf(rows, bytes.length), columns, problems, place: inText("") };
    },
    correlations: [],
  };
}

function rowsOfJson(text: string, defaults: RowDefaults) {
  const parsed = parseJson(text);
  if (parsed.problems.length > 0) throw invalid(parsed.problems);
  const { value } = parsed;
  const given = (drafts: unknown[], place: Place, correlations: Correlations = []) => {
    const rows = withDefaults(drafts.map(draftRow), defaults);
    return { source: rowsOf(piecesOf(rows, text.length), place), correlations };
  };
  if (Array.isArray(value)) return given(value, inDrafts(""));
  if (typeof value !== "object" || value === null) {
    throw new DeskError("invalid", "found no object in the body; allowed is a JSON object or list");
  }
  if (!("measurements" in value)) return given([value], inDraft());
  const { measurements, correlations, ...others } = value as Record<string, unknown>;
  const [other] = Object.keys(others);
  if (other !== undefined || !Array.isArray(measurements)) {
    const found = other === undefined ? "no list of measurements" : `the property ${other}`;
    throw new DeskError("invalid", `found ${found}; allowed measurements, correlations`);
  }
  const pairs = readForm(z.array(correlationSchema), correlations ?? [], "/correlations");
  if (pairs.problems.length > 0) throw invalid(pairs.problems);
  return given(measurements, inDrafts("/measurements"), pairs.value as Correlations);
}

function rowsOf(pieces: AsyncIterable<Piece>, place: Place): RowSource {
  return () => ({ pieces, columns: [], problems: [], place });
}

function draftRow(draft: unknown, index: number): Piece["rows"][number] {
  const row = index + 1;
  if (typeof draft === "object" && draft !== null && !Array.isArray(draft)) {
    return { line: row, draft: draft as Record<string, unknown>, problems: [] };
  }
  const found = draft === null ? "null" : Array.isArray(draft) ? "a list" : `a ${typeof draft}`;
  const allowed = "an object with a measurement's fields";
  return { line: row, draft: null, problems: [{ column: null, found, allowed }] };
}

async function* filled(pieces: AsyncIterable<Piece>, defaults: RowDefaults): AsyncGenerator<Piece> {
  for await (const { rows, bytes } of pieces) yield { rows: withDefaults(rows, defaults), bytes };
}

async function* chunksOf(request: Request): AsyncGenerator<Uint8Array> {
  for await (const chunk of request.body ?? []) yield chunk as Uint8Array;
}

/** Without what isn't given. */
export function present(fields: { [K in keyof RowDefaults]: string | undefined }): RowDefaults {
  return Object.fromEntries(Object.entries(fields).filter(([, value]) => value !== undefined));
}
