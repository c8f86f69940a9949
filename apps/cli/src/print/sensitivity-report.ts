import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Sensitivity } from "@weighhouse/campaign/sensitivity";
import { changeInWords } from "@weighhouse/engine/sensitivity/finding";
import { formatNumber } from "@weighhouse/figures/numbers";
import { formatLog10B, formatPosterior } from "@weighhouse/figures/standing-numbers";
import { cut, harmless, wrap, type Terminal } from "../terminal";
import { tableLines, tableWidth, type TableColumn } from "./table";

const LONGEST_CHANGE = 60;

/** What each standing hangs on, for people: the finding first, then a row per change. */
export function sensitivityReport(
  document: CampaignDocument,
  sensitivity: Sensitivity,
  terminal: Terminal,
): string {
  const heading = (text: string) => terminal.style("bold", text);
  const sections = [
    [heading(wrap(harmless(sensitivity.finding), terminal.proseColumns)), widthLine(sensitivity)],
    changeLines(sensitivity, terminal),
    [
      heading("Weight of evidence: log10 B with a quantity, less without it"),
      ...weightLines(sensitivity, terminal),
    ],
  ];
  const { measurementsTried } = sensitivity;
  const counted = document.measurements.filter(({ setAside }) => setAside === null).length;
  if (measurementsTried < counted) {
    const tried = `Of ${counted} measurements the ${measurementsTried} likeliest to tell were left out one by one.`;
    sections.push([wrap(tried, terminal.proseColumns)]);
  }
  return `${sections.map((lines) => lines.join("\n")).join("\n\n")}\n`.replaceAll("\u00a0", " ");
}

function widthLine({ referenceWidthFactor }: Sensitivity): string {
  if (referenceWidthFactor === null) {
    return "No width of the references from 1/1024 to 1024 of theirs changes the leader.";
  }
  const { factor, leader } = referenceWidthFactor;
  return `With references ${formatNumber(factor, 3)} times as wide ${leader} leads.`;
}

/** The standings as they are, then those of each change: who leads, and the others behind. */
function changeLines(sensitivity: Sensitivity, terminal: Terminal): string[] {
  const rows = [
    { words: "as it is", leader: sensitivity.leader, hypotheses: sensitivity.hypotheses },
    ...sensitivity.changes.map((change) => ({ words: changeInWords(change), ...change })),
  ];
  const keys = sensitivity.hypotheses.map(({ key }) => key);
  const turned = rows.map(({ leader }) => leader !== sensitivity.leader);
  const columns: TableColumn[] = [
    {
      title: "scored",
      align: "left",
      cells: rows.map(({ words }) => cut(harmless(words), LONGEST_CHANGE)),
    },
    {
      title: "leads",
      align: "left",
      cells: rows.map(({ leader }) => leader ?? "none"),
      paint: (padded, row) => (turned[row] ? terminal.style("bold", padded) : padded),
    },
    ...keys.map((key): TableColumn => ({
      title: `log10 B ${key}`,
      align: "decimal",
      cells: rows.map(({ hypotheses }) => log10BOf(hypotheses, key)),
    })),
  ];
  if (tableWidth(columns) <= terminal.columns) {
    return tableLines(columns, (head) => terminal.style("dim", head));
  }
  return rows.map(({ words, leader, hypotheses }) => {
    const own = hypotheses.map(
      ({ key, log10BayesFactor, posterior }) =>
        `${key} ${formatLog10B(log10BayesFactor)} (${formatPosterior(posterior)})`,
    );
    const line = `${harmless(words)}: ${leader ?? "none"} leads; ${own.join(", ")}`;
    return wrap(line, terminal.columns, "  ");
  });
}

function log10BOf(hypotheses: Sensitivity["hypotheses"], key: string): string {
  const own = hypotheses.find((one) => one.key === key);
  return own === undefined ? "" : formatLog10B(own.log10BayesFactor);
}

/** Of the leader against each other hypothesis, the heaviest quantities first. */
function weightLines({ weightOfEvidence, leader }: Sensitivity, terminal: Terminal): string[] {
  const own = weightOfEvidence.filter(({ a }) => a === leader);
  if (own.length === 0) return ["Nothing to compare"];
  const size = ({ log10BayesFactor }: (typeof own)[number]) =>
    log10BayesFactor === null ? Infinity : Math.abs(log10BayesFactor);
  const ordered = own.toSorted((a, b) => (size(a) === size(b) ? 0 : size(b) - size(a)));
  const columns: TableColumn[] = [
    {
      title: "pair",
      align: "left",
      cells: ordered.map(({ a, b }) => `${a} against ${b}`),
    },
    { title: "quantity", align: "left", cells: ordered.map(({ measurand }) => measurand) },
    {
      title: "log10 B",
      align: "decimal",
      cells: ordered.map(({ log10BayesFactor }) => formatLog10B(log10BayesFactor)),
    },
  ];
  return tableLines(columns, (head) => terminal.style("dim", head));
}
