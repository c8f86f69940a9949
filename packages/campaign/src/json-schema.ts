import * as z from "zod";
import { candidatesSchema } from "./candidates";
import { campaignDocumentSchema } from "./document";
import { planSchema } from "./plan";
import { sensitivitySchema } from "./sensitivity";
import { simulationSchema } from "./simulation";
import { standingsSchema } from "./standings";

const documents = {
  campaign: campaignDocumentSchema,
  standings: standingsSchema,
  sensitivity: sensitivitySchema,
  candidates: candidatesSchema,
  plan: planSchema,
  simulation: simulationSchema,
};

/**
 * JSON Schemas (draft 2020-12) of all documents by name, made from the Zod schemas: the form of a
 * document as others write it, with its defaults left out or null. What must fit together beyond
 * the form only `readCampaign` and `readCandidatesText` tell.
 */
export function jsonSchemas(): Map<string, Record<string, unknown>> {
  return new Map(
    Object.entries(documents).map(([name, schema]) => [
      name,
      describe(schema, `Weighhouse ${name} document, version 1`),
    ]),
  );
}

function describe(schema: z.ZodType, title: string): Record<string, unknown> {
  const { $schema, ...rest } = z.toJSONSchema(schema, { io: "input", target: "draft-2020-12" });
  // What `toJSONSchema` adds for its own validators isn't part of a schema file.
  const plain = JSON.parse(JSON.stringify(rest)) as Record<string, unknown>;
  delete plain["~standard"];
  return { $schema, title, ...plain };
}

/** The text of a schema file as it is shipped. */
export function schemaText(schema: Record<string, unknown>): string {
  return `${JSON.stringify(schema, null, 2)}\n`;
}
