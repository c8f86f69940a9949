import type { CampaignDocument } from "@weighhouse/campaign/document";
import { formatInterval, formatNumber } from "@weighhouse/figures/numbers";
import type { ReactNode } from "react";
import { Table } from "@/look/table";
import { Time } from "@/look/time";
import { unitText } from "@/look/unit-text";
import { quantitiesOf, referenceWords, unitAfter } from "../register/quantity";
import { partTitles, type Part } from "./parts";

/** What is declared of a part, a row each. */
export function DeclaredTable({ document, part }: { document: CampaignDocument; part: Part }) {
  const { head, rows } = tableOf(document, part);
  return (
    <Table
      caption={`${partTitles[part]} of this campaign`}
      head={
        <tr>
          {head.map((title) => (
            <th scope="col" key={title}>
              {title}
            </th>
          ))}
        </tr>
      }
    >
      {rows.map(({ key, cells }) => (
        <tr key={key}>
          {cells.map((cell, index) =>
            index === 0 ? (
              <th scope="row" key={head[index]}>
                {cell}
              </th>
            ) : (
              <td key={head[index]} data-label={head[index]}>
                {cell}
              </td>
            ),
          )}
        </tr>
      ))}
    </Table>
  );
}

interface Rows {
  head: string[];
  rows: { key: string; cells: ReactNode[] }[];
}

function tableOf(document: CampaignDocument, part: Part): Rows {
  if (part === "observables")
    return {
      head: ["Title", "Key", "Unit", "Scale"],
      rows: document.observables.map(({ key, title, unit, scale }) => ({
        key,
        cells: [
          title,
          <code key="key">{key}</code>,
          unit === null ? "none" : unitText(unit),
          scale,
        ],
      })),
    };
  if (part === "quantities") return quantityRows(document);
  if (part === "shared-errors")
    return {
      head: ["Title", "Key", "Size", "The same for"],
      rows: document.sharedErrors.map(({ key, title, sd, per, relative }) => ({
        key,
        cells: [
          title,
          <code key="key">{key}</code>,
          relative ? `${formatNumber(sd)} of the value` : formatNumber(sd),
          per === "batch" ? "each batch" : "the whole campaign",
        ],
      })),
    };
  const named = part === "facilities" ? document.facilities : document.teams;
  return {
    head: ["Title", "Key"],
    rows: named.map(({ key, title }) => ({ key, cells: [title, <code key="key">{key}</code>] })),
  };
}

function quantityRows(document: CampaignDocument): Rows {
  const quantities = [...quantitiesOf(document).values()];
  return {
    head: ["Quantity", "Key", "Window", "No-model range", "Thresholds"],
    rows: quantities.map((quantity) => {
      const { key, title, window, thresholds } = quantity.measurand;
      return {
        key,
        cells: [
          title,
          <code key="key">{key}</code>,
          <Window key="window" from={window.from} to={window.to} />,
          referenceWords(quantity),
          thresholds
            .map(({ value }) => `${formatInterval(value, value)}${unitAfter(quantity)}`)
            .join("; ") || "none",
        ],
      };
    }),
  };
}

function Window({ from, to }: { from: string | null; to: string | null }) {
  if (from === null && to === null) return "any time";
  return (
    <span>
      {from === null ? "until" : <Time at={from} dateOnly />}
      {from !== null && to !== null ? " to " : from === null ? " " : " on"}
      {to === null ? null : <Time at={to} dateOnly />}
    </span>
  );
}
