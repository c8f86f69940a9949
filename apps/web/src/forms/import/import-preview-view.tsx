"use client";

import type { AppRouter } from "@weighhouse/api/router";
import type { inferRouterOutputs } from "@trpc/server";
import { formatCount } from "@weighhouse/figures/numbers";
import { formatLog10B } from "@weighhouse/figures/standing-numbers";
import { useMemo } from "react";
import { Notice } from "@/look/notice";
import { Table } from "@/look/table";
import { Time } from "@/look/time";
import { orderWords } from "@/look/verdict-words";
import { problemWords } from "../form-schema";
import { documentTitles, type DocumentTitles } from "./document-titles";

type ImportPreview = inferRouterOutputs<AppRouter>["campaigns"]["previewImport"];
type Plan = NonNullable<ImportPreview["plan"]>;

/** What the import would make, and what its own dates lose by it. */
export function ImportPreviewView({ preview, text }: { preview: ImportPreview; text: string }) {
  const titles = useMemo(() => documentTitles(text), [text]);
  return (
    <section aria-label="Preview of the import" className="mt-5 border-t border-rule pt-4">
      <h3 className="mb-2">
        Preview <span className="gloss">nothing is imported yet</span>
      </h3>
      {preview.plan === null ? (
        <Problems preview={preview} />
      ) : (
        <>
          <Counts plan={preview.plan} />
          <OwnDates plan={preview.plan} titles={titles} />
          <Standings plan={preview.plan} titles={titles} />
        </>
      )}
    </section>
  );
}

function Problems({ preview }: { preview: ImportPreview }) {
  const count = preview.problems.length;
  return (
    <Notice role="alert" tone="bad" label="Can’t be imported.">
      {count === 1 ? "One thing is" : `${formatCount(count)} things are`} wrong with the document:
      <ul className="mt-1 list-disc pl-5">
        {preview.problems.map((problem) => (
          <li key={`${problem.pointer} ${problem.found} ${problem.allowed}`}>
            <code>{problem.pointer || "the document"}</code> {problemWords(problem)}
          </li>
        ))}
      </ul>
    </Notice>
  );
}

function Counts({ plan }: { plan: Plan }) {
  const { counts } = plan;
  const said = [
    [counts.observables, "observable", "observables"],
    [counts.measurands, "quantity", "quantities"],
    [counts.hypotheses, "hypothesis", "hypotheses"],
    [counts.predictions, "prediction", "predictions"],
    [counts.measurements, "measurement", "measurements"],
  ] as const;
  return (
    <p className="mb-2">
      “{plan.title}” becomes <code>/campaigns/{plan.key}</code> with{" "}
      {said
        .map(([count, one, many]) => `${formatCount(count)} ${count === 1 ? one : many}`)
        .join(", ")}
      : {formatCount(counts.entries)} ledger entries. You become its coordinator.
    </p>
  );
}

/** The ledger dates everything anew; the document's own dates are kept as claimed. */
function OwnDates({ plan, titles }: { plan: Plan; titles: DocumentTitles }) {
  return (
    <>
      <Notice label="Its own dates are kept as claimed.">
        They are shown and count for nothing: this ledger can only vouch for the moment of the
        import.
        {plan.registrationClosed === null ? null : (
          <>
            {" "}
            Registration closed on <Time at={plan.registrationClosed} /> by the document; here it is
            closed by an entry of the import.
          </>
        )}
      </Notice>
      {plan.orders.length === 0 ? (
        <p className="mb-2 text-quiet">No prediction changes its standing by that.</p>
      ) : (
        <>
          <h4 className="mt-3 mb-1 font-serif font-semibold">Predictions that are dated anew</h4>
          <Table
            caption="Predictions whose order changes by the import"
            head={
              <tr>
                <th scope="col">Hypothesis</th>
                <th scope="col">Quantity</th>
                <th scope="col">By the document</th>
                <th scope="col">Here</th>
              </tr>
            }
          >
            {plan.orders.map(({ hypothesis, measurand, claimed, here }) => (
              <tr key={`${hypothesis} ${measurand}`}>
                <th scope="row">{titles.hypotheses.get(hypothesis) ?? hypothesis}</th>
                <td data-label="Quantity">{titles.measurands.get(measurand) ?? measurand}</td>
                <td data-label="By the document">{orderWords[claimed]}</td>
                <td data-label="Here">{orderWords[here]}</td>
              </tr>
            ))}
          </Table>
        </>
      )}
    </>
  );
}

function Standings({ plan, titles }: { plan: Plan; titles: DocumentTitles }) {
  const { claimed, here } = plan.standings;
  const there = new Map(claimed.hypotheses.map((each) => [each.key, each]));
  if (here.hypotheses.length === 0) return null;
  return (
    <>
      <h4 className="mt-4 mb-1 font-serif font-semibold">The beam by the document and here</h4>
      <Table
        caption="Standings by the document and as they would be here"
        head={
          <tr>
            <th scope="col">Hypothesis</th>
            <th scope="col" className="number">
              log₁₀ B by the document
            </th>
            <th scope="col" className="number">
              log₁₀ B here
            </th>
          </tr>
        }
      >
        {here.hypotheses.map(({ key, log10BayesFactor }) => (
          <tr key={key}>
            <th scope="row">{titles.hypotheses.get(key) ?? key}</th>
            <td data-label="log₁₀ B by the document" className="number">
              {formatLog10B(there.get(key)?.log10BayesFactor ?? null)}
            </td>
            <td data-label="log₁₀ B here" className="number">
              {formatLog10B(log10BayesFactor)}
            </td>
          </tr>
        ))}
      </Table>
    </>
  );
}
