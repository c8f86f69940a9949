import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { Standings } from "@weighhouse/campaign/standings";
import { readText } from "./archive-text";
import type { Files } from "./container";
import { readCells } from "./csv-cells";
import { counted, failed, judged } from "./line";
import type { Checked } from "./line";
import { TOLERANCE } from "./standings";
import type { Score } from "./standings";
import { tablePath } from "../layout";
import { timelineOf, timelineSizes } from "../timeline";
import type { TimelineRow } from "../timeline";

const PATH = tablePath("timeline");

/** 200 points of 1,000 hypotheses are 20 MB. */
const MOST_CHARACTERS = 32_000_000;

/** Two evaluations of one evidence may lie so many standard errors apart. */
const SIGMAS = 5;

/**
 * Each row of the timeline is what the engine computes from the entries up to it. Gives the archive's
 * rows: the figure is drawn of them.
 */
export function checkTimeline(
  files: Files,
  {
    records,
    heads,
    standings,
  }: { records: readonly LedgerRecord[]; heads: readonly number[]; standings: Standings },
  score: Score,
): Checked<TimelineRow[]> {
  const check = "timeline";
  const found = readTimeline(files);
  if (typeof found === "string") return { line: failed(check, found), value: null };
  const sizes = timelineSizes(records, heads, standings);
  const computed = timelineOf(records, sizes, { standings, score });
  const faults: string[] = [];
  if (found.length !== computed.length) {
    faults.push(`${PATH}: found ${found.length} rows, computed ${computed.length}`);
  }
  for (const [index, row] of computed.entries()) {
    const said = found[index];
    if (said === undefined) break;
    faults.push(...differences(said, row).map((fault) => `${PATH}, row ${index + 1}, ${fault}`));
  }
  const detail = `${counted(computed.length, "evidence")} at ${counted(sizes.length, "size")} of the ledger computed anew`;
  return { line: judged(check, faults, detail), value: found };
}

function differences(found: TimelineRow, computed: TimelineRow): string[] {
  const error = Math.SQRT2 * computed.lnEvidenceError;
  const allowed = { lnEvidence: SIGMAS * error, lnEvidenceError: 0.5 * computed.lnEvidenceError };
  return (Object.keys(computed) as (keyof TimelineRow)[]).flatMap((name) => {
    const [a, b] = [found[name], computed[name]];
    const same =
      typeof a === "number" && typeof b === "number" && name !== "size"
        ? Math.abs(a - b) <=
          Math.max(allowed[name as keyof typeof allowed], TOLERANCE * Math.max(1, Math.abs(b)))
        : a === b;
    return same ? [] : [`${name}: found ${JSON.stringify(a)}, computed ${JSON.stringify(b)}`];
  });
}

/** The rows as they stand in the archive; each number must be one. */
function readTimeline(files: Files): TimelineRow[] | string {
  const read = readText(files, PATH);
  if (!read.ok) return read.fault;
  if (read.text.length > MOST_CHARACTERS) {
    return `${PATH}: found ${read.text.length} characters; allowed are ${MOST_CHARACTERS}`;
  }
  const records = readCells(read.text);
  if (typeof records === "string") return `${PATH}, ${records}`;
  const rows: TimelineRow[] = [];
  for (const { line, cells } of records.slice(1)) {
    const [size, at, hypothesis, lnEvidence, lnEvidenceError] = cells;
    const numbers = [size, lnEvidence === "" ? "0" : lnEvidence, lnEvidenceError].map((text) =>
      text === undefined || text === "" ? Number.NaN : Number(text),
    );
    if (cells.length !== 5 || !numbers.every(Number.isFinite)) {
      return `${PATH}, line ${line}: found ${JSON.stringify(cells.join(","))}; allowed are a size, a time, a key and two numbers`;
    }
    rows.push({
      size: numbers[0] as number,
      at: at as string,
      hypothesis: hypothesis as string,
      lnEvidence: lnEvidence === "" ? null : (numbers[1] as number),
      lnEvidenceError: numbers[2] as number,
    });
  }
  return rows;
}
