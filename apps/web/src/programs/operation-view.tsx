import type { Operation } from "@weighhouse/api/openapi/describe-operation";
import { Table } from "@/look/table";
import { curlExample } from "./curl-example";
import { FieldTable } from "./field-table";
import { MethodMark } from "./method-mark";
import { typeWords } from "./schema-fields";
import type { JsonSchema } from "./schema-fields";

export interface ShownOperation {
  method: string;
  path: string;
  operation: Operation;
}

/** What an operation is asked with and what it answers, with how one asks it. */
export function OperationView(props: {
  shown: ShownOperation;
  schemas: Record<string, JsonSchema>;
  server: string;
  campaign: string | null;
}) {
  const { method, path, operation } = props.shown;
  const scope = scopeOf(operation);
  const body = operation.requestBody;
  const [status = "", success] =
    Object.entries(operation.responses).find(([code]) => code.startsWith("2")) ?? [];
  const [says] = operation.description.split("\n\n");
  return (
    <article
      id={operation.operationId}
      aria-labelledby={`${operation.operationId}-name`}
      className="scroll-mt-4 border-b border-rule py-4 first:pt-0 last:border-b-0 last:pb-0"
    >
      <h3 id={`${operation.operationId}-name`} className="mb-1">
        {operation.summary}
      </h3>
      <p className="mb-1.5 flex max-w-none flex-wrap items-baseline gap-x-2.5">
        <MethodMark method={method} />
        <code className="[overflow-wrap:anywhere]">{path}</code>
        <span className="gloss">
          scope <code>{scope}</code>
          {isOpen(operation) ? ", none where the campaign is public" : ""}
        </span>
      </p>
      {says === operation.summary ? null : <p className="mb-2">{says}</p>}
      <Parameters operation={operation} schemas={props.schemas} />
      {body === undefined ? null : (
        <>
          <h4 className="mt-2 font-medium">Body</h4>
          <Types content={body.content} schemas={props.schemas} />
        </>
      )}
      <h4 className="mt-2 font-medium">
        Answer <span className="gloss">{status}</span>
      </h4>
      {success?.content ? (
        <Types content={success.content} schemas={props.schemas} />
      ) : (
        <p className="text-quiet">{success?.description}</p>
      )}
      <pre className="mt-3 overflow-x-auto whitespace-pre-wrap rounded-sheet bg-well px-3 py-2 [overflow-wrap:anywhere]">
        <code>
          {curlExample(
            {
              method,
              path,
              open: isOpen(operation),
              bodyType: Object.keys(body?.content ?? {})[0] ?? null,
              once: operation.parameters.some(({ name }) => name === "Idempotency-Key"),
              answerType: Object.keys(success?.content ?? {})[0] ?? null,
            },
            props.server,
            props.campaign,
          )}
        </code>
      </pre>
    </article>
  );
}

/** The campaign's key and the conditional fields are alike everywhere, and said once. */
function Parameters(props: { operation: Operation; schemas: Record<string, JsonSchema> }) {
  const own = props.operation.parameters.filter(
    (parameter) => parameter.name !== "key" && parameter.in !== "header",
  );
  if (own.length === 0) return null;
  return (
    <Table
      caption={`Parameters of ${props.operation.summary}`}
      head={
        <tr>
          <th scope="col">Parameter</th>
          <th scope="col">Type</th>
          <th scope="col">What it is</th>
        </tr>
      }
    >
      {own.map((parameter) => (
        <tr key={parameter.name}>
          <th scope="row">
            <code>{parameter.name}</code> <span className="gloss">{parameter.in}</span>
          </th>
          <td data-label="Type">
            {typeWords(parameter.schema)}
            {parameter.required ? "" : ", may be left out"}
          </td>
          <td data-label="What it is">{parameter.description ?? ""}</td>
        </tr>
      ))}
    </Table>
  );
}

function Types(props: {
  content: Record<string, { schema: JsonSchema }>;
  schemas: Record<string, JsonSchema>;
}) {
  return (
    <ul className="list-none">
      {Object.entries(props.content).map(([type, { schema }]) => {
        const line = schema["x-line"] as JsonSchema | undefined;
        const shown = line ?? schema;
        return (
          <li key={type} className="mb-1.5">
            <code>{type}</code> <span className="text-quiet">{saysOf(schema)}</span>
            <FieldTable type={type} schema={shown} schemas={props.schemas} />
          </li>
        );
      })}
    </ul>
  );
}

/** Without what the description adds for programs about the lines of an answer. */
function saysOf(schema: JsonSchema): string {
  const says = schema["description"];
  return typeof says === "string" ? says.split(" Each line is JSON by ")[0]! : "";
}

function scopeOf({ security }: Operation): string {
  return security.find((one) => one["key"] !== undefined)?.["key"]?.[0] ?? "";
}

function isOpen({ security }: Operation): boolean {
  return security.some((one) => Object.keys(one).length === 0);
}
