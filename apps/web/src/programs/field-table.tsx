import { Table } from "@/look/table";
import { schemaFields } from "./schema-fields";
import type { JsonSchema } from "./schema-fields";

/** More than this is a document of its own, told by its schema. */
const MOST = 60;

/** The fields of a JSON body or answer, behind a line that opens. */
export function FieldTable(props: {
  type: string;
  schema: JsonSchema;
  schemas: Record<string, JsonSchema>;
}) {
  const fields = schemaFields(props.schema, props.schemas);
  if (fields.length === 0) return null;
  if (fields.length > MOST) {
    return (
      <p className="text-[14px] text-quiet">
        A document of {fields.length} fields and more: its schema is in the description.
      </p>
    );
  }
  return (
    <details className="mt-0.5">
      <summary className="cursor-pointer text-[14px] text-quiet">
        {fields.length} {fields.length === 1 ? "field" : "fields"}
      </summary>
      <Table
        caption={`Fields, ${props.type}`}
        head={
          <tr>
            <th scope="col">Field</th>
            <th scope="col">Type</th>
            <th scope="col">What it is</th>
          </tr>
        }
      >
        {fields.map((field) => (
          <tr key={field.name}>
            <th scope="row">
              <code>{field.name}</code>
            </th>
            <td data-label="Type">
              {field.type}
              {field.required ? "" : ", may be left out"}
            </td>
            <td data-label="What it is">{field.says}</td>
          </tr>
        ))}
      </Table>
    </details>
  );
}
