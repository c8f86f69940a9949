import * as z from "zod";
import { postRows } from "@weighhouse/desk/post-rows";
import type { PostedRows } from "@weighhouse/desk/posted-rows";
import { previewRows } from "@weighhouse/desk/preview-rows";
import type { PreviewedRow } from "@weighhouse/desk/previewed-rows";
import { linesAnswer, someOf } from "./lines-answer";
import type { WriteLine } from "./lines-answer";
import { postedLineSchema, postedSchema, previewLineSchema } from "./measurement-answers";
import { created } from "./respond";
import { route } from "./route";
import { rowBodies, rowDefaultsSchema, rowsOfBody } from "./row-body";

const group = "Measurements";
const scope = "measurements:post";
const LINES = "application/x-ndjson";

export const whichRows = z
  .enum(["all", "faults"])
  .optional()
  .describe("faults leaves out the rows that are good; all unless given.");

export const measurementRoutes = [
  route({
    method: "POST",
    path: "measurements",
    group,
    summary: "Post measurements",
    says: "Enters all of them or none. An id that is there with the same content changes nothing, so that what was broken off can be sent again; one with other content refuses the whole. With Accept: application/x-ndjson the answer tells how far it is, its last line being the answer or the problem.",
    scope,
    once: true,
    query: rowDefaultsSchema,
    takes: rowBodies,
    gives: {
      status: 201,
      types: {
        "application/json": { schema: postedSchema, says: "What was entered." },
        [LINES]: { schema: postedLineSchema, says: "How far it is, then what was entered." },
      },
    },
    async answer({ desk, actor, log, key, answerType, ...question }) {
      const body = await rowsOfBody({ desk, key, ...question });
      if (answerType !== LINES) {
        return created(postedAnswer(await postRows(desk, actor, { key, ...body })));
      }
      return linesAnswer(log, async (write) => {
        const tell = someOf(write, "progress");
        const posted = await postRows(desk, actor, { key, ...body, tell });
        await write({ done: postedAnswer(posted) });
      });
    },
  }),
  route({
    method: "POST",
    path: "measurements/preview",
    group,
    summary: "Try a posting",
    says: "Takes what a posting takes, enters nothing, and tells each row's fate and which verdicts and standings would change.",
    scope,
    rate: "heavy",
    query: rowDefaultsSchema.extend({ rows: whichRows }),
    takes: rowBodies,
    gives: {
      status: 200,
      types: {
        [LINES]: { schema: previewLineSchema, says: "A line for each row, then the whole." },
      },
    },
    async answer({ desk, actor, log, key, query: { rows, ...query }, request, bodyType }) {
      const body = await rowsOfBody({ desk, key, request, bodyType, query });
      return linesAnswer(log, async (write) => {
        const telling = { tell: someOf(write, "progress"), row: rowWriter(write, rows) };
        await write({ preview: await previewRows(desk, actor, { key, ...body, ...telling }) });
      });
    },
  }),
];

/** What a posting answers, in either form. */
export function postedAnswer({ key, posted, alreadyThere, appended, ids }: PostedRows) {
  return {
    key,
    posted,
    alreadyThere,
    entries: appended && { from: appended.from, to: appended.to },
    treeHead: appended && appended.treeHead,
    ids,
  };
}

/** Writes a line for each row, or for each that keeps a posting from being taken. */
export function rowWriter(write: WriteLine, rows: "all" | "faults" = "all") {
  return async ({ measurement: _sent, ...row }: PreviewedRow) => {
    if (rows === "faults" && row.fate !== "refused" && row.fate !== "conflict") return;
    await write({ row });
  };
}
