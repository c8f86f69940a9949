"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { MeasurementsPreview } from "@weighhouse/desk/preview-measurements";
import { formatCount } from "@weighhouse/figures/numbers";
import { Notice } from "@/look/notice";
import { Table } from "@/look/table";
import { problemWords } from "../form-schema";
import { ChangesView } from "./changes-view";
import {
  countWords,
  fateInk,
  fateWords,
  reasonsOf,
  rowsToShow,
  valueWords,
  type PreviewedRow,
} from "./fates";

const mostRows = { stopping: 200, others: 20 };

/** Each row's fate and what posting would change, before anything is entered. */
export function PreviewView(props: { document: CampaignDocument; preview: MeasurementsPreview }) {
  const { document, preview } = props;
  const shown = rowsToShow(preview.rows, mostRows);
  const reasons = shown.some((row) => reasonsOf(row).length > 0);
  return (
    <section aria-label="Preview" className="mt-5 border-t border-rule pt-4">
      <h3 className="mb-2">
        Preview <span className="gloss">nothing is entered yet</span>
      </h3>
      <p className="mb-2">
        {countWords(preview.counts)}.{" "}
        {preview.postable ? "All can be entered." : <NotPostable preview={preview} />}
      </p>
      {preview.problems.map((problem) => (
        <Notice key={problemWords(problem)} role="alert" tone="bad" label="The table.">
          {problemWords(problem)}
        </Notice>
      ))}
      <Columns preview={preview} />
      {shown.length > 0 ? (
        <Table
          caption="Rows and what becomes of each"
          head={
            <tr>
              <th scope="col">Line</th>
              <th scope="col">Fate</th>
              <th scope="col">Id</th>
              <th scope="col">Quantity</th>
              <th scope="col">Facility</th>
              <th scope="col" className="number">
                Value
              </th>
              {reasons ? <th scope="col">Why</th> : null}
            </tr>
          }
        >
          {shown.map((row) => (
            <Row key={row.line} row={row} document={document} reasons={reasons} />
          ))}
        </Table>
      ) : null}
      {preview.rows.length > shown.length ? (
        <p className="mt-1 text-[14px] text-quiet">
          {formatCount(preview.rows.length - shown.length)} more rows, not shown; those that stop
          the posting stand first.
        </p>
      ) : null}
      <ChangesView document={document} preview={preview} />
    </section>
  );
}

function NotPostable({ preview }: { preview: MeasurementsPreview }) {
  const { new: fresh, conflict, refused } = preview.counts;
  if (refused + conflict > 0)
    return "Nothing will be entered until every row can be: correct the rows below and preview again.";
  return fresh === 0 ? "There is nothing new to enter." : "";
}

function Row(props: { row: PreviewedRow; document: CampaignDocument; reasons: boolean }) {
  const { row, document, reasons } = props;
  const { measurement } = row;
  const measurand = document.measurands.find(({ key }) => key === measurement?.measurand);
  const unit = document.observables.find(({ key }) => key === measurand?.observable)?.unit ?? null;
  const facility = document.facilities.find(({ key }) => key === measurement?.facility);
  return (
    <tr>
      <th scope="row">
        <span className="sm:hidden">Line </span>
        {row.line}
      </th>
      <td data-label="Fate" className={`whitespace-nowrap ${fateInk[row.fate]}`}>
        {fateWords[row.fate]}
      </td>
      <td data-label="Id">{row.id === null ? null : <code>{row.id}</code>}</td>
      <td data-label="Quantity">{measurand?.title ?? measurement?.measurand ?? ""}</td>
      <td data-label="Facility">{facility?.title ?? measurement?.facility ?? ""}</td>
      <td data-label="Value" className="number">
        {valueWords(row, unit)}
      </td>
      {reasons ? (
        <td data-label="Why" className="max-w-[44ch] text-[14px]">
          <div>
            {reasonsOf(row).map((reason) => (
              <div key={reason}>{reason}</div>
            ))}
          </div>
        </td>
      ) : null}
    </tr>
  );
}

/** How the file's columns were read, where any was not taken by its own name. */
function Columns({ preview }: { preview: MeasurementsPreview }) {
  const renamed = preview.columns.filter(({ column, field }) => field !== null && field !== column);
  const extra = preview.columns.filter(({ field }) => field === null);
  if (renamed.length + extra.length === 0) return null;
  return (
    <p className="mb-2 text-[14px] text-quiet">
      {renamed.map(({ column, field }) => (
        <span key={column}>
          Column <code>{column}</code> is read as {field}.{" "}
        </span>
      ))}
      {extra.length === 0 ? null : (
        <>
          Kept beside the measurement, not used in scoring:{" "}
          {extra.map(({ column }) => column).join(", ")}.
        </>
      )}
    </p>
  );
}
