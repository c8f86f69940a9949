import { routes } from "@weighhouse/api/http";
import { describeApi } from "@weighhouse/api/openapi/describe-api";
import { KEY_PATTERN } from "@weighhouse/campaign/fields";
import type { Metadata } from "next";
import { Section } from "@/look/section";
import { CommonRules, RateTable } from "@/programs/common-rules";
import { MethodMark } from "@/programs/method-mark";
import { OperationView } from "@/programs/operation-view";
import type { ShownOperation } from "@/programs/operation-view";
import { readOrigin } from "@/server/reader";

export const metadata: Metadata = { title: "For programs" };

/** The API as its description (OpenAPI) has it, for people to read. */
export default async function ProgramsPage(props: {
  searchParams: Promise<{ campaign?: string | string[] }>;
}) {
  const asked = (await props.searchParams).campaign;
  const campaign = typeof asked === "string" && KEY_PATTERN.test(asked) ? asked : null;
  const description = describeApi(routes, await readOrigin());
  const server = description.servers[0]!.url;
  const shown = Object.entries(description.paths).flatMap(([path, item]) =>
    Object.entries(item).map(([method, operation]) => ({
      method: method.toUpperCase(),
      path,
      operation,
    })),
  );
  const groups = description.tags.map(({ name }) => ({
    name,
    shown: shown.filter(({ operation }) => operation.tags.includes(name)),
  }));
  return (
    <>
      <h1 className="mt-1 mb-2">For programs</h1>
      <p className="mb-4 text-quiet">
        What programs read from campaigns and send to them, below <code>{server}</code>. The same as
        a description for generators of clients (OpenAPI 3.1):{" "}
        <a className="link" href="/api/v1/openapi.json">
          openapi.json
        </a>
        .
      </p>
      <Section title="What there is">
        <div className="grid gap-x-8 gap-y-3 sm:grid-cols-2 lg:grid-cols-3">
          {groups.map((group) => (
            <Contents key={group.name} {...group} />
          ))}
        </div>
      </Section>
      <Section title="What holds for all">
        <CommonRules campaign={campaign} />
        <div className="mt-4 max-w-[60ch]">
          <RateTable />
        </div>
      </Section>
      {groups.map(({ name, shown }) => (
        <Section key={name} title={name}>
          {shown.map((one) => (
            <OperationView
              key={one.operation.operationId}
              shown={one}
              schemas={description.components.schemas}
              server={server}
              campaign={campaign}
            />
          ))}
        </Section>
      ))}
    </>
  );
}

function Contents({ name, shown }: { name: string; shown: readonly ShownOperation[] }) {
  return (
    <nav aria-label={name}>
      <h3 className="mb-1">{name}</h3>
      <ul className="list-none">
        {shown.map(({ method, operation }) => (
          <li key={operation.operationId} className="mb-0.5">
            <a
              className="flex items-baseline gap-2 no-underline hover:underline"
              href={`#${operation.operationId}`}
            >
              <MethodMark method={method} />
              <span>{operation.summary}</span>
            </a>
          </li>
        ))}
      </ul>
    </nav>
  );
}
