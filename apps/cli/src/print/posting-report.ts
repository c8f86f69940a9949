import { formatLog10B } from "@weighhouse/figures/standing-numbers";
import type { ColumnMatch } from "@weighhouse/tables/table-match";
import type { Preview, Standing } from "../post/server-preview";
import { cut, harmless, wrap, type Terminal } from "../terminal";
import { tableLines } from "./table";
import { counted } from "./warnings";

/** What posting a file would do, for people: fates, how its columns were read, what would change. */
export function postingReport(
  preview: Preview,
  { path, matches, notes }: { path: string; matches: ColumnMatch[]; notes: string[] },
  terminal: Terminal,
): string {
  const heading = (text: string) => terminal.style("bold", text);
  const prose = (text: string, indent = "") => wrap(harmless(text), terminal.proseColumns, indent);
  const sections = [
    [heading(prose(`${path}: nothing was entered`)), prose(fatesInWords(preview))],
    ...(matches.length === 0
      ? []
      : [[heading("Columns are read as"), ...matchLines(matches, terminal)]]),
    ...(notes.length === 0
      ? []
      : [[heading("Said of them"), ...notes.map((note) => prose(note, "  "))]]),
    ...changeSections(preview, terminal).map(({ title, lines }) => [heading(title), ...lines]),
  ];
  return `${sections.map((lines) => lines.join("\n")).join("\n\n")}\n`.replaceAll("\u00a0", " ");
}

/** `118 new, 1 already there, 1 refused`; what there is none of is left out. */
export function fatesInWords({ counts }: Pick<Preview, "counts">): string {
  const { new: fresh, alreadyThere, conflict, refused } = counts;
  const parts = [
    fresh > 0 ? `${fresh} new` : null,
    alreadyThere > 0 ? `${alreadyThere} already there` : null,
    conflict > 0 ? `${conflict} in conflict` : null,
    refused > 0 ? `${refused} refused` : null,
  ];
  return parts.filter((part) => part !== null).join(", ") || "no row";
}

function matchLines(matches: readonly ColumnMatch[], terminal: Terminal): string[] {
  const cells = (of: (match: ColumnMatch) => string | null) =>
    matches.map((match) => cut(harmless(of(match) ?? ""), Math.max(12, terminal.columns / 3 - 3)));
  return tableLines(
    [
      { title: "column", align: "left", cells: cells(({ column }) => column) },
      { title: "field", align: "left", cells: cells(({ field }) => field) },
      { title: "unit", align: "left", cells: cells(({ unit }) => unit) },
      { title: "by", align: "left", cells: cells(({ why }) => (why === "none" ? null : why)) },
    ],
    (head) => terminal.style("dim", head),
  ).concat(
    matches
      .filter(({ conversion }) => conversion !== null)
      .map(({ column, conversion }) =>
        wrap(harmless(`${column}: ${conversion}`), terminal.proseColumns, "  "),
      ),
  );
}

function changeSections({ changes, postable }: Preview, terminal: Terminal) {
  if (changes === null) {
    return postable ? [{ title: "The standings", lines: ["can't be told before"] }] : [];
  }
  const { verdicts, before, after } = changes;
  const turns =
    verdicts.length === 0
      ? ["none"]
      : tableLines(
          [
            { title: "hypothesis", align: "left", cells: verdicts.map((one) => one.hypothesis) },
            { title: "measurand", align: "left", cells: verdicts.map((one) => one.measurand) },
            { title: "is", align: "left", cells: verdicts.map((one) => one.before ?? "") },
            { title: "would be", align: "left", cells: verdicts.map((one) => one.after ?? "") },
          ],
          (head) => terminal.style("dim", head),
        );
  return [
    { title: "Verdicts that would turn", lines: turns },
    {
      title: "Standings, log₁₀ B against the leader",
      lines: standingLines(before.hypotheses, after.hypotheses, terminal),
    },
  ];
}

function standingLines(before: Standing[], after: Standing[], terminal: Terminal): string[] {
  const old = new Map(before.map((one) => [one.key, one]));
  const cell = (one: Standing | undefined) => (one ? formatLog10B(one.log10BayesFactor) : "");
  const was = (key: string) => old.get(key);
  return tableLines(
    [
      { title: "", align: "right", cells: after.map(({ rank }) => String(rank)) },
      { title: "hypothesis", align: "left", cells: after.map(({ key }) => key) },
      { title: "is", align: "decimal", cells: after.map(({ key }) => cell(was(key))) },
      { title: "would be", align: "decimal", cells: after.map(cell) },
    ],
    (head) => terminal.style("dim", head),
  );
}

/** What was entered, in a line. */
export function postedLine(
  path: string,
  posted: {
    key: string;
    posted: number;
    alreadyThere: number;
    entries: { from: number; to: number } | null;
  },
): string {
  const { key, entries, alreadyThere } = posted;
  const there = alreadyThere > 0 ? `, ${alreadyThere} there already` : "";
  if (entries === null) return `${path}: nothing new for ${key}${there}\n`;
  const { from, to } = entries;
  const where = to - from === 1 ? `entry ${from}` : `entries ${from} to ${to - 1}`;
  return `${path}: posted ${counted(posted.posted, "measurement")} to ${key}, ${where}${there}\n`;
}
