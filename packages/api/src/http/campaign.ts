import * as z from "zod";
import { campaignDocumentSchema } from "@weighhouse/campaign/document";
import { standingsSchema } from "@weighhouse/campaign/standings";
import { exportAuditTrail } from "@weighhouse/desk/export-audit-trail";
import { readCampaign } from "@weighhouse/desk/read-campaign";
import { readStandings } from "@weighhouse/desk/read-standings";
import { readTreeHead } from "@weighhouse/desk/read-tree-head";
import { respond, respondJson } from "./respond";
import { route } from "./route";
import type { Question } from "./route";

const group = "Campaign";
const asOf = z.strictObject({
  size: z.int().min(1).optional().describe("As of this many ledger entries; the newest without."),
});

const { format, engine, campaign, asOf: stated, verdicts } = standingsSchema.shape;
/** The verdicts of a standings document, with what says which standings they are of. */
const verdictsSchema = z.strictObject({ format, engine, campaign, asOf: stated, verdicts });

export const campaignRoutes = [
  route({
    method: "GET",
    path: "document.json",
    group,
    summary: "The campaign document",
    says: "All that is declared, registered and measured, as of a size of the ledger.",
    scope: "read",
    query: asOf,
    gives: {
      status: 200,
      types: { "application/json": { schema: campaignDocumentSchema, says: "The document." } },
    },
    async answer({ desk, actor, request, key, query }) {
      const read = await readCampaign(desk, actor, { key, ...query });
      return respondJson(request, read.document, `${read.size}-${read.treeHead}`);
    },
  }),
  route({
    method: "GET",
    path: "standings.json",
    group,
    summary: "The standings",
    says: "The standings document as of a size of the ledger; the newest are scored when asked for, where the scorer is behind.",
    scope: "read",
    rate: "heavy",
    query: asOf,
    gives: {
      status: 200,
      types: { "application/json": { schema: standingsSchema, says: "The standings." } },
    },
    async answer(question) {
      const standings = await standingsAsked(question);
      return respondJson(question.request, standings, standingsTag(standings));
    },
  }),
  route({
    method: "GET",
    path: "verdicts.json",
    group,
    summary: "The verdicts",
    says: "The verdicts of the standings alone: a row for each hypothesis and measurand.",
    scope: "read",
    rate: "heavy",
    query: asOf,
    gives: {
      status: 200,
      types: { "application/json": { schema: verdictsSchema, says: "The verdicts." } },
    },
    async answer(question) {
      const standings = await standingsAsked(question);
      const { format, engine, campaign, asOf, verdicts } = standings;
      const told = { format, engine, campaign, asOf, verdicts };
      return respondJson(question.request, told, `verdicts-${standingsTag(standings)}`);
    },
  }),
  route({
    method: "GET",
    path: "audit.zip",
    group,
    summary: "The audit trail",
    says: "An archive that proves itself: entries, heads, document, standings, figures.",
    scope: "read",
    rate: "heavy",
    query: asOf,
    gives: {
      status: 200,
      types: { "application/zip": { schema: null, says: "The archive." } },
    },
    async answer({ desk, actor, request, key, query }) {
      const made = await exportAuditTrail(desk, actor, { key, ...query });
      return respond(request, made.bytes as Uint8Array<ArrayBuffer>, {
        type: "application/zip",
        tag: `${made.size}-${made.treeHead}`,
        headers: { "content-disposition": `attachment; filename="${made.name}"` },
      });
    },
  }),
];

/** The newest, scored now where the scorer is behind: a program asks once, it doesn't watch. */
async function standingsAsked({
  desk,
  actor,
  key,
  query,
}: Question<unknown, { size?: number | undefined }>) {
  const size = query.size ?? (await readTreeHead(desk, actor, { key })).size;
  return (await readStandings(desk, actor, { key, size })).standings;
}

function standingsTag({ engine, asOf }: z.output<typeof standingsSchema>): string {
  return `${engine}-${asOf?.size}-${asOf?.treeHead}`;
}
