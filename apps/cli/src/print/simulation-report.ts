import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Simulation } from "@weighhouse/campaign/simulation";
import { formatPercent } from "@weighhouse/figures/numbers";
import { formatLog10B, formatPosterior } from "@weighhouse/figures/standing-numbers";
import { harmless, wrap, type Terminal } from "../terminal";
import { tableLines, tableWidth, type TableColumn } from "./table";

/** Would the campaign decide? A row for each hypothesis, were it true. */
export function simulationReport(
  document: CampaignDocument,
  { truths, runs, candidates }: Simulation,
  terminal: Terminal,
): string {
  const title = wrap(harmless(document.campaign.title), terminal.proseColumns);
  const drawn = `${runs} campaigns of ${candidates.length} measurements drawn from each hypothesis`;
  const legend = wrap(
    "Leads: how often the hypothesis that is true ranks first; decides: with log10 B of 1 or more over the next; misleading: another has log10 B above 1 against it. log10 B is against the best of the others. Quantiles are of 2.5, 50 and 97.5 %.",
    terminal.proseColumns,
  );
  const lines = [terminal.style("bold", title), drawn, ...truthLines(truths, terminal), legend];
  return `${lines.join("\n")}\n`.replaceAll("\u00a0", " ");
}

function truthLines(truths: Simulation["truths"], terminal: Terminal): string[] {
  const percent = (title: string, values: number[]): TableColumn => ({
    title,
    align: "decimal",
    cells: values.map((value) => formatPercent(value)),
  });
  const quantile = (title: string, place: 0 | 1 | 2): TableColumn => ({
    title,
    align: "decimal",
    cells: truths.map(({ log10BayesFactor }) => {
      if (log10BayesFactor === null) return "";
      const value = log10BayesFactor[place];
      return value === null ? "∞" : formatLog10B(value);
    }),
  });
  const columns: TableColumn[] = [
    { title: "were it true", align: "left", cells: truths.map(({ hypothesis }) => hypothesis) },
    percent(
      "leads",
      truths.map(({ leads }) => leads),
    ),
    percent(
      "decides",
      truths.map(({ leadsDecisively }) => leadsDecisively),
    ),
    percent(
      "misleading",
      truths.map(({ misleading }) => misleading),
    ),
    quantile("log10 B 2.5 %", 0),
    quantile("50 %", 1),
    quantile("97.5 %", 2),
    {
      title: "posterior 50 %",
      align: "decimal",
      cells: truths.map(({ posterior }) => formatPosterior(posterior[1])),
    },
  ];
  if (tableWidth(columns) <= terminal.columns) {
    return tableLines(columns, (head) => terminal.style("dim", head));
  }
  return truths.map((_, row) => {
    const [name, ...rest] = columns;
    const facts = rest.map(({ title, cells }) => `${title} ${cells[row]}`);
    return wrap(`${name!.cells[row]}: ${facts.join(", ")}`, terminal.columns, "  ");
  });
}
