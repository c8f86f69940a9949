import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings } from "@weighhouse/campaign/standings";
import { formatCount } from "@weighhouse/figures/numbers";
import { harmless, wrap, type Terminal } from "../terminal";
import { combinedLines } from "./combined-values";
import { standingLines } from "./standings-table";
import { verdictLines } from "./verdict-grid";
import { counted, warningLines } from "./warnings";

/** The standings for people: the table, the verdicts, what was measured, the warnings. */
export function standingsReport(
  document: CampaignDocument,
  standings: Standings,
  terminal: Terminal,
): string {
  const heading = (text: string) => terminal.style("bold", text);
  const { counted: used, setAside } = standings.measurements;
  const measured = `${formatCount(used)} ${used === 1 ? "measurement" : "measurements"} counted`;
  const sections = [
    [
      heading(wrap(harmless(document.campaign.title), terminal.proseColumns)),
      wrap(
        `${measured}, ${formatCount(setAside)} set aside; engine ${standings.engine}`,
        terminal.proseColumns,
      ),
    ],
    standingLines(document, standings, terminal),
    [heading("Verdicts"), ...verdictLines(document, standings, terminal)],
    [heading("Measured"), ...combinedLines(document, standings, terminal)],
  ];
  if (standings.warnings.length > 0) {
    sections.push([
      heading(counted(standings.warnings.length, "warning")),
      warningLines(standings.warnings, terminal).trimEnd(),
    ]);
  }
  return sections
    .filter((lines) => lines.length > 0)
    .map((lines) => `${lines.join("\n")}\n`)
    .join("\n")
    .replaceAll("\u00a0", " ");
}
