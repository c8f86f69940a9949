import * as z from "zod";
import { campaignDocumentSchema } from "./document";
import { standingsSchema } from "./standings";

/**
 * JSON Schemas (draft 2020-12) of both documents, made from the Zod schemas: the form of a document
 * as others write it, with its defaults left out or null. What must fit together beyond the form
 * only `readCampaign` tells.
 */
export function campaignJsonSchema(): Record<string, unknown> {
  return describe(campaignDocumentSchema, "Weighhouse campaign document, version 1");
}

export function standingsJsonSchema(): Record<string, unknown> {
  return describe(standingsSchema, "Weighhouse standings document, version 1");
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
