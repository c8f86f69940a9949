import { writeArchive } from "../../write";
import type { CheckName } from "../../checks/line";
import { forge, replacing } from "../forge";
import type { Change } from "../forge";
import { archiveInput } from "../marsh-campaign";
import { forger } from "../verify-marsh";
import type { Lie } from "./lie";
import { json } from "./of-content";

const archive = writeArchive(archiveInput());

type Row = [name: string, changes: Record<string, Change>, check: CheckName, reason: string];

/** What people read instead of the numbers behind it. */
const rows: Row[] = [
  [
    "a number in a table for print",
    { "tables/standings.tex": replacing("1.58", "3.58") },
    "tables",
    "tables/standings.tex, line 21: not what the archive's numbers give",
  ],
  [
    "a table for print left out",
    { "tables/verdicts.tex": () => "" },
    "tables",
    "tables/verdicts.tex is missing",
  ],
  [
    "a command hidden in a table for print",
    {
      "tables/standings.tex": replacing(
        "\\begin{document}",
        "\\begin{document}\\input{/etc/passwd}",
      ),
    },
    "tables",
    "tables/standings.tex, line 5: not what",
  ],
  [
    "a table for print of a hundred times its size",
    { "tables/standings.tex": (text) => text.repeat(100) },
    "tables",
    "tables/standings.tex: found ",
  ],
  [
    "an evidence of the past",
    { "tables/timeline.csv": replacing(/,warm-spring,-3\.\d+,/, ",warm-spring,-2.5,") },
    "timeline",
    "tables/timeline.csv, row 5, lnEvidence: found -2.5, computed -3.",
  ],
  [
    "a time of the past",
    { "tables/timeline.csv": replacing("T03:00", "T02:30") },
    "timeline",
    "tables/timeline.csv, row 4, at: found",
  ],
  [
    "a step of the past left out",
    { "tables/timeline.csv": replacing(/[^\n]+\r\n$/, "") },
    "timeline",
    "tables/timeline.csv: found 16 rows, computed 17",
  ],
  [
    "a word where a number stands in the past",
    { "tables/timeline.csv": replacing(/,warm-spring,-3\.\d+,/, ",warm-spring,much,") },
    "timeline",
    "allowed are a size, a time, a key and two numbers",
  ],
  [
    "a mark moved along the beam",
    { "figures/beam.svg": replacing("−1.58", "−0.58") },
    "figures",
    "figures/beam.svg, line",
  ],
  [
    "a script in a figure",
    { "figures/grid.svg": replacing("</svg>", "<script>alert(1)</script></svg>") },
    "figures",
    "figures/grid.svg, line",
  ],
  [
    "a band drawn wider",
    {
      "figures/measurands/vapour-may.svg": replacing(
        /width="[\d.]+" height="12"/,
        'width="300" height="12"',
      ),
    },
    "figures",
    "figures/measurands/vapour-may.svg, line",
  ],
  [
    "a figure left out",
    { "figures/timeline.svg": () => "" },
    "figures",
    "figures/timeline.svg is missing",
  ],
  [
    "a figure of a quantity that isn't",
    { "figures/measurands/no-such.svg": () => "<svg/>" },
    "figures",
    "figures/measurands/no-such.svg: a figure of nothing in the campaign",
  ],
  [
    "a count in the methods",
    {
      "methods.md": replacing(
        "| predictions filed after data (not counted) | 1 |",
        "| predictions filed after data (not counted) | 0 |",
      ),
    },
    "texts",
    "methods.md, line ",
  ],
  [
    "a way to check that checks nothing",
    { "README.md": replacing('echo "the root is the signed one"', "true") },
    "texts",
    "README.md, line ",
  ],
  [
    "a check.py that is content with all",
    { "check.py": replacing('return 1 if RESULTS["FAILED"] else 0', "return 0") },
    "texts",
    "check.py, line ",
  ],
  [
    "a licence that nobody gave",
    { "ro-crate-metadata.json": replacing("No licence given", "Public domain") },
    "texts",
    "ro-crate-metadata.json, line ",
  ],
  [
    "a name for somebody who published none",
    { "ro-crate-metadata.json": replacing('"name":"m-1"', '"name":"A. Person"') },
    "texts",
    "ro-crate-metadata.json, line ",
  ],
  [
    "a change that would not turn the lead",
    {
      "sensitivity.json": (text) =>
        json(text, (it) => (it.changes[0].leaderChanges = !it.changes[0].leaderChanges)),
    },
    "sensitivity",
    "sensitivity.json, /changes/0/leaderChanges: found",
  ],
  [
    "a Bayes factor without a facility",
    {
      "sensitivity.json": (text) =>
        json(text, (it) => (it.changes[1].hypotheses[1].log10BayesFactor *= 1.0001)),
    },
    "sensitivity",
    "sensitivity.json, /changes/1/hypotheses/1/log10BayesFactor: found",
  ],
  [
    "the sensitivity left out where it was short work",
    { "sensitivity.json": () => "" },
    "sensitivity",
    "sensitivity.json is missing",
  ],
  [
    "JSON a thousand deep",
    { "standings.json": () => `{"a":${"[".repeat(1000)}${"]".repeat(1000)}}\n` },
    "standings",
    "standings.json: found JSON nested more than 64 deep",
  ],
  [
    "JSON a million deep, and never closed",
    { "campaign.json": () => "[".repeat(1_000_000) },
    "campaign document",
    "campaign.json: found 1000000 bytes; allowed are",
  ],
  [
    "a manifest that is deep",
    { "standings.json": () => "{".repeat(100_000) },
    "standings",
    "standings.json: found JSON nested more than 64 deep",
  ],
  [
    "an entry of a megabyte",
    { "ledger.ndjson": (text) => text.replace('"v":1}', `"v":1,"w":"${"x".repeat(1_000_000)}"}`) },
    "entries: hash and order",
    "ledger.ndjson, line 1: found 1000",
  ],
  [
    "empty lines in the ledger",
    { "ledger.ndjson": (text) => `${text}\n\n` },
    "entries: hash and order",
    "ledger.ndjson, line 18 is empty",
  ],
  [
    "a time-stamp that this build can't read",
    { "heads/0000000017.tsr": () => "stamped" },
    "time-stamps",
    "this version can't check 1 file: heads/0000000017.tsr",
  ],
];

export const liesOfReaders: Lie[] = rows.map(([name, changes, check, reason]) => ({
  name,
  check,
  reason,
  make: () => forge(archive, changes, forger),
}));
