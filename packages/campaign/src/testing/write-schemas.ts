/** Writes the shipped JSON Schemas. Run `npm run schemas` in this package after changing a schema. */
import { writeFileSync } from "node:fs";
import { campaignJsonSchema, schemaText, standingsJsonSchema } from "../json-schema";

const folder = new URL("../../schemas/", import.meta.url);
writeFileSync(new URL("campaign.json", folder), schemaText(campaignJsonSchema()));
writeFileSync(new URL("standings.json", folder), schemaText(standingsJsonSchema()));
