import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { HypothesisStanding, Standings } from "@weighhouse/campaign/standings";
import { kassRaftery } from "@weighhouse/engine/kass-raftery";
import {
  formatChiSquare,
  formatLnEvidence,
  formatLog10B,
  formatP,
  formatPosterior,
} from "@weighhouse/figures/standing-numbers";
import { cut, harmless, wrap, type Terminal } from "../terminal";
import { tableLines, tableWidth, type TableColumn } from "./table";

type Row = { standing: HypothesisStanding | null; title: string; cells: Record<string, string> };

const LONGEST_TITLE = 40;
const SHORTEST_TITLE = 12;

/** Rank by rank; columns that say the same in words go first where the terminal is narrow. */
export function standingLines(
  document: CampaignDocument,
  standings: Standings,
  terminal: Terminal,
): string[] {
  const rows = rowsOf(document, standings);
  const legend = wrap(
    "log10 B is against the first; its words are those of Kass & Raftery (1995). These compare the hypotheses listed, under their stated priors and theory errors: no posterior is the probability that one is true.",
    terminal.proseColumns,
  );
  const table = fittingTable(rows, terminal);
  return [...(table ?? stackedLines(rows, terminal)), legend];
}

function rowsOf(document: CampaignDocument, standings: Standings): Row[] {
  const titles = new Map(document.hypotheses.map(({ key, title }) => [key, harmless(title)]));
  const rows = standings.hypotheses.map((standing) => ({
    standing,
    title: titles.get(standing.key) ?? "silent on everything",
    cells: cellsOf(standing),
  }));
  const noModel = {
    standing: null,
    title: "",
    cells: { key: "no model", "ln Z": formatLnEvidence(standings.noModel.lnEvidence) },
  };
  return [...rows, noModel];
}

function cellsOf(standing: HypothesisStanding): Record<string, string> {
  const { pass, fail, undecided, awaiting } = standing.verdicts;
  return {
    rank: String(standing.rank),
    key: standing.key,
    "χ² / dof": formatChiSquare(standing.chiSquare, standing.degreesOfFreedom),
    p: formatP(standing.pValue),
    "ln Z": formatLnEvidence(standing.lnEvidence, standing.lnEvidenceError),
    "log10 B": formatLog10B(standing.log10BayesFactor),
    words: wordsFor(standing),
    posterior: formatPosterior(standing.posterior),
    "pass/fail/open": `${pass}/${fail}/${undecided + awaiting}`,
    "compared/silent": `${standing.compared}/${standing.silent}`,
  };
}

function wordsFor({ rank, log10BayesFactor }: HypothesisStanding): string {
  if (log10BayesFactor === null) return "impossible";
  return rank === 1 ? "leads" : kassRaftery(log10BayesFactor);
}

function columnsOf(rows: Row[], terminal: Terminal): Map<string, TableColumn> {
  const column = (title: string, align: TableColumn["align"]): TableColumn => ({
    title,
    align,
    cells: rows.map(({ cells }) => cells[title] ?? ""),
  });
  const leader = (padded: string, row: number) =>
    row === 0 ? terminal.style("bold", padded) : padded;
  return new Map<string, TableColumn>([
    ["rank", { ...column("rank", "right"), title: "" }],
    ["key", { ...column("key", "left"), title: "hypothesis", paint: leader }],
    ["title", { title: "", align: "left", cells: rows.map(({ title }) => title) }],
    ["χ² / dof", column("χ² / dof", "decimal")],
    ["p", column("p", "decimal")],
    ["ln Z", column("ln Z", "decimal")],
    ["log10 B", column("log10 B", "decimal")],
    ["words", { ...column("words", "left"), title: "" }],
    ["posterior", column("posterior", "decimal")],
    ["pass/fail/open", column("pass/fail/open", "right")],
    ["compared/silent", column("compared/silent", "right")],
  ]);
}

/** The fullest table that fits: titles are cut, then left out, then the words; else null. */
function fittingTable(rows: Row[], terminal: Terminal): string[] | null {
  const columns = columnsOf(rows, terminal);
  const title = columns.get("title");
  columns.delete("title");
  const room = terminal.columns - tableWidth([...columns.values()]) - 2;
  const set = [...columns];
  if (title !== undefined && room >= SHORTEST_TITLE) {
    const longest = Math.min(room, LONGEST_TITLE);
    set.splice(2, 0, ["title", { ...title, cells: title.cells.map((text) => cut(text, longest)) }]);
  } else if (room < -2) {
    set.splice(
      set.findIndex(([name]) => name === "words"),
      1,
    );
  }
  const shown = set.map(([, column]) => column);
  if (tableWidth(shown) > terminal.columns) return null;
  return tableLines(shown, (head) => terminal.style("dim", head));
}

/** For narrow terminals: a hypothesis takes several lines. */
function stackedLines(rows: Row[], terminal: Terminal): string[] {
  return rows.flatMap(({ standing, title, cells }) => {
    const name =
      standing === null ? (cells.key ?? "") : `${standing.rank}. ${standing.key}: ${title}`;
    const facts = Object.entries(cells)
      .filter(([field]) => !["rank", "key", "words"].includes(field))
      .map(([field, text]) => {
        const whole = field === "log10 B" ? `${text} (${cells.words})` : text;
        return `${field} ${whole}`.replaceAll(" ", "\u00a0");
      });
    return [
      terminal.style("bold", wrap(name, terminal.columns, "   ")),
      wrap(`   ${facts.join(", ")}`, terminal.columns, "   "),
    ];
  });
}
