import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Plan } from "@weighhouse/campaign/plan";
import { formatNumber, formatWithUncertainty } from "@weighhouse/figures/numbers";
import { formatPosterior } from "@weighhouse/figures/standing-numbers";
import { harmless, wrap, type Terminal } from "../terminal";
import { tableLines, tableWidth, type TableColumn } from "./table";

/** What to measure next, for people: candidates as they rank, their predictives, then sets. */
export function planReport(document: CampaignDocument, plan: Plan, terminal: Terminal): string {
  const heading = (text: string) => terminal.style("bold", text);
  const legend = wrap(
    "Information gain in bits: what the reading would tell which hypothesis it is (Lindley 1956). Decides: the probability that log10 B of the first two ends at 1 or more. Half at: the uncertainty that earns half of what a reading without any would. All in scoring space.",
    terminal.proseColumns,
  );
  const sections = [
    [
      heading(wrap(harmless(document.campaign.title), terminal.proseColumns)),
      ...candidateLines(plan, terminal),
      legend,
    ],
    [heading("Predicted, without the reading's own noise"), ...predictiveLines(plan, terminal)],
  ];
  if (plan.sets.length > 0) sections.push([heading("Sets"), ...setLines(plan, terminal)]);
  return `${sections.map((lines) => lines.join("\n")).join("\n\n")}\n`.replaceAll("\u00a0", " ");
}

function candidateLines({ candidates }: Plan, terminal: Terminal): string[] {
  const perCost = candidates.some(({ gainPerCost }) => gainPerCost !== null);
  const column = (title: string, cells: (string | null)[]): TableColumn => ({
    title,
    align: "decimal",
    cells: cells.map((cell) => cell ?? ""),
  });
  const numbers = (values: (number | null)[], digits = 3) =>
    values.map((value) => (value === null ? null : formatNumber(value, digits)));
  const columns: TableColumn[] = [
    { title: "candidate", align: "left", cells: candidates.map(({ key }) => key) },
    column("bits", numbers(candidates.map(({ informationGainBits }) => informationGainBits))),
    ...(perCost
      ? [column("bits per cost", numbers(candidates.map(({ gainPerCost }) => gainPerCost)))]
      : []),
    column(
      "decides",
      candidates.map(({ decisiveProbability }) =>
        decisiveProbability === null ? null : formatPosterior(decisiveProbability),
      ),
    ),
    column("half at", numbers(candidates.map(({ halfGainSd }) => halfGainSd))),
  ];
  return tableLines(columns, (head) => terminal.style("dim", head));
}

function predictiveLines({ candidates }: Plan, terminal: Terminal): string[] {
  const keys = candidates[0]?.predictive.map(({ hypothesis }) => hypothesis) ?? [];
  const cell = ({ mean, sd }: { mean: number | null; sd: number | null }) => {
    if (mean === null || sd === null) return "impossible";
    return sd > 0 ? formatWithUncertainty(mean, sd) : formatNumber(mean, 6);
  };
  const columns: TableColumn[] = [
    { title: "candidate", align: "left", cells: candidates.map(({ key }) => key) },
    ...keys.map((key): TableColumn => ({
      title: key,
      align: "left",
      cells: candidates.map(({ predictive }) => {
        const own = predictive.find(({ hypothesis }) => hypothesis === key);
        return own === undefined ? "" : cell(own);
      }),
    })),
  ];
  if (tableWidth(columns) <= terminal.columns) {
    return tableLines(columns, (head) => terminal.style("dim", head));
  }
  return candidates.map(({ key, predictive }) => {
    const own = predictive.map((one) => `${one.hypothesis} ${cell(one)}`);
    return wrap(`${key}: ${own.join(", ")}`, terminal.columns, "  ");
  });
}

function setLines({ sets }: Plan, terminal: Terminal): string[] {
  return sets.map(({ candidates, informationGainBits, gainPerCost }) => {
    const perCost = gainPerCost === null ? "" : `, ${formatNumber(gainPerCost, 3)} per cost`;
    const line = `${formatNumber(informationGainBits, 3)} bits${perCost}: ${candidates.join(", ")}`;
    return wrap(line, terminal.proseColumns, "  ");
  });
}
