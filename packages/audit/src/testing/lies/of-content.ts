import { encodeVerifierKey } from "@weighhouse/ledger/verifier-key";
import { ENGINE_VERSION } from "@weighhouse/engine/version";
import { parseTreeHead } from "@weighhouse/ledger/tree-head";
import type { CheckName } from "../../checks/line";
import { headPath, jsonText } from "../../layout";
import { writeArchive } from "../../write";
import { forge, line, replacing } from "../forge";
import type { Change } from "../forge";
import { archiveInput } from "../marsh-campaign";
import { forger, signedHead } from "../verify-marsh";
import type { Lie } from "./lie";

const input = archiveInput();
const archive = writeArchive(input);

type Row = [name: string, changes: Record<string, Change>, check: CheckName, reason: string];

/** Files changed, with a manifest made good and signed by the forger. */
const rows: Row[] = [
  [
    "a payload's value",
    { "payloads.ndjson": line(12, replacing('"value":19.2', '"value":19.3')) },
    "payloads",
    "payloads.ndjson, line 12 (entry 11, measurements.posted): found SHA-256",
  ],
  [
    "an entry's digest",
    { "ledger.ndjson": line(12, replacing(/"payloadSha256":"./, '"payloadSha256":"0')) },
    "root against the signed tree head",
    "heads/0000000017.note: found root",
  ],
  [
    "an entry's time",
    { "ledger.ndjson": line(10, replacing("T01:", "T00:")) },
    "consistency of the tree heads",
    "ledger.ndjson, line 10: not what heads/0000000010.note and 6 later heads signed (found root",
  ],
  [
    "an entry's author",
    { "ledger.ndjson": line(13, replacing("m-1", "m-2")) },
    "consistency of the tree heads",
    "ledger.ndjson, line 13: not what heads/0000000013.note and 3 later heads signed",
  ],
  [
    "an entry's author among the nine of the first transaction",
    { "ledger.ndjson": line(4, replacing("m-1", "m-2")) },
    "consistency of the tree heads",
    "ledger.ndjson, lines 1 to 9: not what heads/0000000009.note and 7 later heads signed",
  ],
  [
    "an entry's time, to before the entry before it",
    { "ledger.ndjson": line(12, replacing("T03:00:00.000000", "T01:30:00.000000")) },
    "entries: hash and order",
    "ledger.ndjson, line 12: found at 2031-02-01T01:30:00.000000Z; allowed is a time after 2031-02-01T02:00:00.000000Z",
  ],
  [
    "two entries change places",
    { "ledger.ndjson": swapLines(10, 11), "payloads.ndjson": swapLines(10, 11) },
    "entries: hash and order",
    "ledger.ndjson, line 10: found seq 10; allowed is 9",
  ],
  [
    "the last entry is left out",
    { "ledger.ndjson": dropLine(17), "payloads.ndjson": dropLine(17) },
    "root against the signed tree head",
    "heads/0000000017.note: found a head of 17 entries, the ledger has 16",
  ],
  [
    "an entry of another campaign",
    {
      "ledger.ndjson": line(12, replacing('"campaign":"steaming-marsh"', '"campaign":"dry-marsh"')),
    },
    "entries: hash and order",
    "ledger.ndjson, line 12: found campaign dry-marsh; allowed is steaming-marsh",
  ],
  [
    "an entry with another property",
    { "ledger.ndjson": line(12, replacing('"v":1}', '"v":1,"w":1}')) },
    "entries: hash and order",
    "ledger.ndjson, line 12: the entry: found",
  ],
  [
    "an entry in another form",
    { "ledger.ndjson": line(12, replacing('"v":1}', '"v": 1}')) },
    "entries: hash and order",
    "ledger.ndjson, line 12: found JSON in another form",
  ],
  [
    "an older head of another root",
    { "heads/0000000011.note": () => signedHead(11, new Uint8Array(32)) },
    "consistency of the tree heads",
    "heads/0000000011.note: found root AAAA",
  ],
  [
    "a head of another ledger",
    {
      "heads/0000000011.note": () =>
        signedHead(11, parseTreeHead(input.heads[2] as string).root, "other"),
    },
    "consistency of the tree heads",
    "heads/0000000011.note: found ledger other, allowed house.example/5f1d3c0a9be84e27",
  ],
  [
    "a head under another size's name",
    { "heads/0000000011.note": () => input.heads[0] as string },
    "signatures of the tree heads",
    "heads/0000000011.note is of size 9",
  ],
  [
    "a head that nobody signed",
    { "heads/0000000011.note": replacing(/[A-Za-z0-9+/]{20}=*\n$/, "AAAAAAAAAAAAAAAAAAAA\n") },
    "signatures of the tree heads",
    "heads/0000000011.note: ",
  ],
  [
    "a key's file with another key",
    { "keys/34750f98bd59fcfc.pub": () => `${encodeVerifierKey(forger)}\n` },
    "signatures of the tree heads",
    "keys/34750f98bd59fcfc.pub holds another key",
  ],
  [
    "a number of the campaign document",
    { "campaign.json": replacing('"expected":21', '"expected":20') },
    "campaign document",
    "campaign.json, /hypotheses/0/predictions/0/expected: found 20, computed 21",
  ],
  [
    "a date of the campaign document",
    {
      "campaign.json": replacing(/"registeredAt":"[^"]+"/, '"registeredAt":"2031-01-01T00:00:00Z"'),
    },
    "campaign document",
    "campaign.json, /hypotheses/0/",
  ],
  [
    "a measurement left out of the document",
    { "campaign.json": (text) => json(text, (it) => it.measurements.pop()) },
    "campaign document",
    "campaign.json, /measurements: found 4 items, computed 5",
  ],
  [
    "a Bayes factor in the sixth digit",
    {
      "standings.json": (text) =>
        json(text, (it) => (it.hypotheses[1].log10BayesFactor *= 1 + 1e-6)),
    },
    "standings",
    "standings.json, /hypotheses/1/log10BayesFactor: found",
  ],
  [
    "a verdict",
    { "standings.json": (text) => json(text, (it) => (it.verdicts[0].verdict = "void")) },
    "standings",
    'standings.json, /verdicts/0/verdict: found "void", computed',
  ],
  [
    "a prediction said to be filed before observation",
    { "standings.json": replacing('"order":"after"', '"order":"before-observation"') },
    "before and after data",
    "found before-observation, but entry 12 of 2031-02-01T04:00:00.000000Z files it, after entry 11 posted a measurement",
  ],
  [
    "a warning left out",
    { "standings.json": (text) => json(text, (it) => it.warnings.pop()) },
    "standings",
    "standings.json, /warnings: found",
  ],
  [
    "standings without a list",
    { "standings.json": (text) => json(text, (it) => delete it.pairs) },
    "standings",
    "standings.json, /pairs: ",
  ],
  [
    "standings that hold a name twice",
    { "standings.json": replacing('  "engine"', '  "campaign": "other",\n  "engine"') },
    "standings",
    "standings.json, line 3: not in the form",
  ],
  [
    "a table's number",
    { "tables/standings.csv": replacing(/\r\n1,([^,]+),-?[\d.]+/, "\r\n1,$1,-1.5") },
    "tables",
    "tables/standings.csv, line 2, ln evidence (nat): found",
  ],
  [
    "a table's word",
    { "tables/measurements.csv": replacing("the cap was on", "all was well") },
    "tables",
    'tables/measurements.csv, line 6, set aside: found "all was well", computed "the cap was on"',
  ],
  [
    "a table's row",
    { "tables/verdicts.csv": replacing(/[^\n]+\r\n$/, "") },
    "tables",
    "tables/verdicts.csv: found",
  ],
  ["a table", { "tables/verdicts.csv": () => "" }, "tables", "tables/verdicts.csv is missing"],
  [
    "the size in the manifest",
    { "manifest.json": replacing('"size": 17', '"size": 18') },
    "manifest against the ledger",
    "manifest.json, /size: found 18, computed 17",
  ],
  [
    "the clock in the manifest",
    { "manifest.json": replacing('"clock": "real"', '"clock": "simulated"') },
    "manifest against the ledger",
    'manifest.json, /clock: found "simulated", computed "real"',
  ],
  [
    "the engine in the manifest",
    { "manifest.json": replacing(`"engine": "${ENGINE_VERSION}"`, '"engine": "9.9.9"') },
    "manifest against the ledger",
    `manifest.json, /engine: found "9.9.9", computed "${ENGINE_VERSION}"`,
  ],
  [
    "a file that nobody knows",
    { "figures/other.svg": () => "<svg/>" },
    "files against the manifest",
    "figures/other.svg is unknown to this version",
  ],
  [
    "the ledger gone",
    { "ledger.ndjson": () => "" },
    "entries: hash and order",
    "ledger.ndjson is missing",
  ],
  ["the payloads gone", { "payloads.ndjson": () => "" }, "payloads", "payloads.ndjson is missing"],
  ["no head at all", allHeadsGone(), "root against the signed tree head", "heads/: no tree head"],
];

export const liesOfContent: Lie[] = rows.map(([name, changes, check, reason]) => ({
  name,
  check,
  reason,
  make: () => forge(archive, changes, forger),
}));

function allHeadsGone(): Record<string, Change> {
  return Object.fromEntries(
    input.heads.map((note) => [headPath(parseTreeHead(note).size), () => ""]),
  );
}

function swapLines(a: number, b: number): Change {
  return (text) => {
    const lines = text.split("\n");
    [lines[a - 1], lines[b - 1]] = [lines[b - 1] as string, lines[a - 1] as string];
    return lines.join("\n");
  };
}

function dropLine(number: number): Change {
  return (text) =>
    text
      .split("\n")
      .filter((_, index) => index !== number - 1)
      .join("\n");
}

// oxlint-disable-next-line typescript/no-explicit-any -- lies reach anywhere into a document.
export function json(text: string, change: (value: any) => unknown): string {
  const value: object = JSON.parse(text);
  change(value);
  return jsonText(value);
}
