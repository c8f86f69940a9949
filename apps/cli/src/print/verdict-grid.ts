import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings, VerdictRow } from "@weighhouse/campaign/standings";
import { formatTension } from "@weighhouse/figures/standing-numbers";
import { VERDICT_WORDS } from "@weighhouse/figures/verdict-marks";
import { cut, harmless, type Terminal } from "../terminal";
import { tableLines, tableWidth, type TableColumn } from "./table";

/** Measurands by hypotheses, tension in sigma first; a list where the grid is too wide. */
export function verdictLines(
  document: CampaignDocument,
  standings: Standings,
  terminal: Terminal,
): string[] {
  if (standings.verdicts.length === 0) return ["No predictions"];
  const titles = new Map(
    [...document.measurands, ...document.derived].map(({ key, title }) => [key, harmless(title)]),
  );
  const byCell = new Map(standings.verdicts.map((row) => [cellKey(row), row]));
  const measurands = [...titles.keys()].filter((measurand) =>
    standings.verdicts.some((row) => row.measurand === measurand),
  );
  const columns: TableColumn[] = [
    {
      title: "tension in σ first",
      align: "left",
      cells: measurands.map((key) => cut(titles.get(key) ?? key, 40)),
    },
    ...standings.hypotheses.map(({ key: hypothesis }) => {
      const rows = measurands.map((measurand) => byCell.get(cellKey({ hypothesis, measurand })));
      return verdictColumn(hypothesis, rows, terminal);
    }),
  ];
  if (tableWidth(columns) <= terminal.columns) {
    return tableLines(columns, (head) => terminal.style("dim", head));
  }
  return measurands.flatMap((measurand) => [
    cut(titles.get(measurand) ?? measurand, terminal.columns),
    ...standings.hypotheses.map(({ key: hypothesis }) => {
      const row = byCell.get(cellKey({ hypothesis, measurand }));
      return cut(`  ${cellText(row).trim()}  ${hypothesis}`, terminal.columns);
    }),
  ]);
}

function verdictColumn(
  hypothesis: string,
  rows: (VerdictRow | undefined)[],
  terminal: Terminal,
): TableColumn {
  const tensions = rows.map((row) => (row === undefined ? "" : formatTension(row.tension)));
  const widest = Math.max(...tensions.map((text) => text.length));
  return {
    title: hypothesis,
    align: "left",
    cells: rows.map((row, index) => `${(tensions[index] ?? "").padStart(widest)} ${wordFor(row)}`),
    paint: (padded, index) => {
      const verdict = rows[index]?.verdict;
      if (verdict === "pass") return terminal.style("green", padded);
      return verdict === "fail" ? terminal.style("red", padded) : padded;
    },
  };
}

function cellText(row: VerdictRow | undefined): string {
  return `${row === undefined ? "" : formatTension(row.tension)} ${wordFor(row)}`;
}

/** The verdict's word, with what qualifies it. */
function wordFor(row: VerdictRow | undefined): string {
  if (row === undefined) return "silent";
  const remarks = [
    row.order === "after" ? "after data" : null,
    row.inflated ? "inflated" : null,
    row.provisional ? "provisional" : null,
  ].filter((remark) => remark !== null);
  return VERDICT_WORDS[row.verdict] + (remarks.length > 0 ? ` (${remarks.join(", ")})` : "");
}

function cellKey({ hypothesis, measurand }: Pick<VerdictRow, "hypothesis" | "measurand">): string {
  return `${hypothesis} ${measurand}`;
}
