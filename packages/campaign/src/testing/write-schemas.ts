/** Writes the shipped JSON Schemas. Run `npm run schemas` in this package after changing a schema. */
import { writeFileSync } from "node:fs";
import { jsonSchemas, schemaText } from "../json-schema";

const folder = new URL("../../schemas/", import.meta.url);
for (const [name, schema] of jsonSchemas()) {
  writeFileSync(new URL(`${name}.json`, folder), schemaText(schema));
}
