"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { MeasurementsPreview } from "@weighhouse/desk/preview-measurements";
import { formatLog10B } from "@weighhouse/figures/standing-numbers";
import { Table } from "@/look/table";
import { VerdictMark, verdictInk } from "@/look/verdict-mark";
import { verdictWords } from "@/look/verdict-words";
import { hypothesisName, standingsChanges, verdictChanges } from "./changes";

/** Which verdicts would turn and how the beam would move, if these were entered. */
export function ChangesView(props: {
  document: CampaignDocument;
  preview: Pick<MeasurementsPreview, "changes">;
}) {
  const { document, preview } = props;
  if (preview.changes === null) return null;
  const turned = verdictChanges(preview.changes);
  const moved = standingsChanges(preview.changes);
  return (
    <div className="mt-4 grid gap-x-8 gap-y-4 lg:grid-cols-2">
      <div className="min-w-0">
        <h4 className="mb-1 font-serif font-semibold">Verdicts that would turn</h4>
        {turned.length === 0 ? (
          <p className="text-quiet">None.</p>
        ) : (
          <ul className="list-none">
            {turned.map(({ hypothesis, measurand, before, after }) => (
              <li key={`${hypothesis} ${measurand}`} className="mb-1">
                {hypothesisName(document, hypothesis)},{" "}
                {document.measurands.find(({ key }) => key === measurand)?.title ?? measurand}:{" "}
                <span className="text-quiet">
                  {before === null ? "none" : verdictWords[before]} →{" "}
                </span>
                {after === null ? (
                  "none"
                ) : (
                  <span className={verdictInk(after)}>
                    <VerdictMark verdict={after} /> {verdictWords[after]}
                  </span>
                )}
              </li>
            ))}
          </ul>
        )}
      </div>
      <div className="min-w-0">
        <h4 className="mb-1 font-serif font-semibold">The beam, before and after</h4>
        <Table
          caption="Rank and log10 Bayes factor before and after posting"
          head={
            <tr>
              <th scope="col">Hypothesis</th>
              <th scope="col" className="number">
                Rank
              </th>
              <th scope="col" className="number">
                log₁₀ B before
              </th>
              <th scope="col" className="number">
                after
              </th>
            </tr>
          }
        >
          {moved.map((row) => (
            <tr key={row.hypothesis}>
              <th scope="row">{hypothesisName(document, row.hypothesis)}</th>
              <td data-label="Rank" className="number">
                {row.rank.before === row.rank.after
                  ? row.rank.after
                  : `${row.rank.before ?? "–"} → ${row.rank.after ?? "–"}`}
              </td>
              <td data-label="log₁₀ B before" className="number">
                {row.before === undefined ? "–" : formatLog10B(row.before)}
              </td>
              <td data-label="after" className="number">
                {row.after === undefined ? "–" : formatLog10B(row.after)}
              </td>
            </tr>
          ))}
        </Table>
      </div>
    </div>
  );
}
