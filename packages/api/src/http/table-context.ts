import * as z from "zod";
import { campaignDocumentSchema } from "@weighhouse/campaign/document";
import { sha256 } from "@weighhouse/campaign/seals";
import { readTableContext } from "@weighhouse/desk/read-table-context";
import { tableChoicesSchema } from "@weighhouse/tables/table-match";
import { nameBasedId } from "./atom";
import { respondJson } from "./respond";
import { route } from "./route";

const { observables, measurands, facilities } = campaignDocumentSchema.shape;

const contextSchema = z.strictObject({
  observables,
  measurands,
  facilities,
  remembered: z
    .array(
      z.strictObject({
        facility: z.string(),
        choices: tableChoicesSchema,
        rememberedAt: z.iso.datetime(),
      }),
    )
    .describe("What was chosen for tables of that layout, by facility."),
});

export const tableContextRoutes = [
  route({
    method: "GET",
    path: "tables.json",
    group: "Measurements",
    summary: "What tables are read by",
    says: "The declarations that a table's columns are matched to, without measurements, and what is remembered of tables of a layout.",
    scope: "measurements:post",
    query: z.strictObject({
      layout: sha256
        .optional()
        .describe("SHA-256 of the lines of JSON [name, unit] of a table's columns, sorted."),
    }),
    gives: {
      status: 200,
      types: { "application/json": { schema: contextSchema, says: "The declarations." } },
    },
    async answer({ desk, actor, request, key, query }) {
      const context = await readTableContext(desk, actor, { key, ...query });
      return respondJson(request, context, `tables-${nameBasedId(JSON.stringify(context))}`);
    },
  }),
];
