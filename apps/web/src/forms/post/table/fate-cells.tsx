"use client";

import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import { resultInWords } from "@/campaign/plain-words";
import { Time } from "@/look/time";
import { fateInk, fateWords, reasonsOf } from "../fates";
import type { ShownRow } from "./protocol";

/** The cells of one row; while it is being fetched its place alone is there. */
export function FateCells(props: { document: CampaignDocument; row: ShownRow | null }) {
  const { document, row } = props;
  if (row === null) {
    return (
      <th scope="row" colSpan={6} className="text-quiet">
        …
      </th>
    );
  }
  const measurand = document.measurands.find(({ key }) => key === row.measurand);
  const observedAt = textAt(row.draft, "observedAt");
  const facilityKey = textAt(row.draft, "facility");
  const facility = document.facilities.find(({ key }) => key === facilityKey)?.title ?? facilityKey;
  return (
    <>
      <th scope="row">
        <span className="min-[901px]:hidden">Line </span>
        {row.line}
      </th>
      <td data-label="Fate" className={row.fate === null ? "text-quiet" : fateInk[row.fate]}>
        {row.fate === null ? "reads" : fateWords[row.fate]}
      </td>
      <td data-label="Quantity">{measurand?.title ?? row.measurand}</td>
      <td data-label="Observed">
        {observedAt === null && facility === null ? null : (
          <span>
            {observedAt === null ? null : <ObservedAt at={observedAt} />}
            {observedAt !== null && facility !== null ? ", " : null}
            {facility}
          </span>
        )}
      </td>
      <td data-label="Result">
        <Result {...{ document, row }} />
      </td>
      <td data-label="Why" className="text-[14px] [overflow-wrap:anywhere]">
        <Why row={row} />
      </td>
    </>
  );
}

function Why({ row }: { row: ShownRow }) {
  const reasons = reasonsOf(row);
  if (reasons.length + row.notes.length === 0) return null;
  return (
    <div>
      {reasons.map((reason) => (
        <div key={reason}>{reason}</div>
      ))}
      {row.notes.map((note) => (
        <div key={note} className="text-quiet">
          {note}
        </div>
      ))}
    </div>
  );
}

/** A time that the campaign would refuse is shown as it is. */
function ObservedAt({ at }: { at: string }) {
  return Number.isNaN(Date.parse(at)) ? <>{at}</> : <Time at={at} />;
}

function Result({ document, row }: { document: CampaignDocument; row: ShownRow }) {
  if (row.draft === null) return null;
  const measurand = document.measurands.find(({ key }) => key === row.measurand);
  const observable = document.observables.find(
    ({ key }) => key === (measurand?.observable ?? textAt(row.draft, "observable")),
  );
  const plain = { scale: "linear", unit: null } as NonNullable<typeof observable>;
  const result = { ...emptyResult, ...row.draft } as unknown as Measurement;
  if (typeof result.value === "string") return <>{result.value}</>;
  return <span className="whitespace-nowrap">{resultInWords(result, observable ?? plain)}</span>;
}

const emptyResult = {
  value: null,
  sd: null,
  sdDex: null,
  plus: null,
  minus: null,
  limit: null,
  confidence: null,
  sigmas: null,
  occurred: null,
  count: null,
  unit: null,
};

function textAt(draft: Record<string, unknown> | null, field: string): string | null {
  const value = draft?.[field];
  return typeof value === "string" ? value : null;
}
