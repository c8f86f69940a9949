import * as z from "zod";
import { measurementId } from "@weighhouse/campaign/fields";
import { measurementSchema } from "@weighhouse/campaign/measurement";
import { readMeasurementHistory } from "@weighhouse/desk/read-measurement-history";
import { MOST_PER_PAGE, readMeasurements } from "@weighhouse/desk/read-measurements";
import { formats } from "@weighhouse/desk/write-measurements";
import { historySchema } from "./measurement-answers";
import { respond, respondJson } from "./respond";
import { route } from "./route";

const group = "Measurements";
const scope = "read";

export const readMeasurementRoutes = [
  route({
    method: "GET",
    path: "measurements",
    group,
    summary: "Measurements by page",
    says: "In the document's order, withdrawn ones left out; where there are more, a Link header names the next page, as of the same size. They are given as they were posted.",
    scope,
    query: z.strictObject({
      from: z.int().min(0).optional().describe("The first one's place; 0 without."),
      limit: z.int().min(1).max(MOST_PER_PAGE).optional().describe("1,000 unless given."),
      size: z.int().min(1).optional().describe("As of this many entries; the newest without."),
      format: z
        .enum(["ndjson", "csv", "ecsv", "votable"])
        .optional()
        .describe("Instead of Accept, for links."),
    }),
    gives: {
      status: 200,
      types: Object.fromEntries(
        Object.entries(formats).map(([name, { type, says }]) => [
          type,
          { schema: name === "ndjson" ? measurementSchema.in : null, says },
        ]),
      ),
    },
    async answer({ desk, actor, key, request, query, answerType }) {
      const { format: asked, ...page } = query;
      const chosen =
        asked === undefined
          ? Object.entries(formats).find(([, { type }]) => type === answerType)!
          : ([asked, formats[asked]] as const);
      const [name, { type, write }] = chosen;
      const read = await readMeasurements(desk, actor, { key, ...page });
      const next = new URLSearchParams(new URL(request.url).searchParams);
      next.set("size", String(read.size));
      next.set("from", String(read.from + read.measurements.length));
      const link = `</api/v1/campaigns/${key}/measurements?${next.toString()}>; rel="next"`;
      return respond(request, write(read), {
        type: name === "ndjson" ? type : `${type}; charset=utf-8`,
        tag: `measurements-${name}-${read.size}-${read.from}-${read.measurements.length}`,
        headers: read.more ? { link } : {},
      });
    },
  }),
  route({
    method: "GET",
    path: "measurements/{id}",
    group,
    summary: "A measurement and its history",
    says: "Every version that entries made of it, oldest first.",
    scope,
    parameters: z.strictObject({ id: measurementId }),
    gives: {
      status: 200,
      types: { "application/json": { schema: historySchema, says: "Its versions." } },
    },
    async answer({ desk, actor, key, request, parameters: { id } }) {
      const versions = await readMeasurementHistory(desk, actor, { key, id });
      // A name is no part of the ledger: it is shown on pages, and forgotten with the person.
      const told = versions.map(({ seq, at, kind, team, reason, withdrawn, measurement }) => {
        return { seq, at, kind, team, reason, withdrawn, measurement };
      });
      const last = versions.at(-1)!;
      return respondJson(request, { id, versions: told }, `measurement-${last.seq}`);
    },
  }),
];
