import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Result } from "@weighhouse/campaign/problem";
import { SENSITIVITY_FORMAT, type Sensitivity } from "@weighhouse/campaign/sensitivity";
import type { Standings } from "@weighhouse/campaign/standings";
import { scoreCampaign } from "../score";
import { ENGINE_VERSION } from "../version";
import { changedScores, type ScoreChanged } from "./changed-scores";
import { changesOf, without, type Change } from "./changes";
import { findingOf } from "./finding";
import { likelyTelling } from "./likely-telling";
import { withReferences } from "./widths";

/** Single measurements in the table. */
const MOST_TELLING = 50;
/** Single measurements that are left out in turn, at most. */
const MOST_TRIED = 400;
/** Widths of the references are tried in powers of two up to this one, both ways. */
const MOST_DOUBLINGS = 10;
const BISECTIONS = 30;

export interface SensitivityOptions {
  /** Called before each scoring. */
  progress?: (done: number, total: number) => void;
}

/**
 * What the standings hang on (section 10): the campaign scored again with each thing changed, one at
 * a time. Every row is a full scoring; nothing is approximated but the choice of single
 * measurements, where there are more than 400: those are tried that are likely to tell most.
 */
export function sensitivityOf(
  document: CampaignDocument,
  { progress = () => undefined }: SensitivityOptions = {},
): Result<Sensitivity> {
  const scored = scoreCampaign(document);
  if (!scored.ok) return scored;
  const standings = scored.value;
  const changes = changesOf(document, standings);
  const counted = document.measurements.filter((one) => isCounted(document, one));
  const total = changes.length + Math.min(counted.length, MOST_TRIED) + 2 * MOST_DOUBLINGS;
  let done = 0;
  const scoreOf = changedScores(document);
  const scoreChanged = (change: Change): Row[] => {
    progress(done, total);
    done += 1;
    const changed = scoreOf(change.document);
    return changed === null ? [] : [rowOf(change, changed, standings)];
  };
  const rows = changes.flatMap(scoreChanged);
  const weights = weightsOfEvidence(rows, standings);
  const tried = likelyTelling({ document, standings, weights, counted, most: MOST_TRIED });
  const single = tried.flatMap((one) =>
    scoreChanged({
      kind: "without-measurement",
      key: one.id,
      document: without(document, ({ id }) => id === one.id),
    }),
  );
  const telling = mostTelling(single, standings);
  const place = rows.findIndex(({ kind }) => !BEFORE_MEASUREMENTS.has(kind));
  rows.splice(place < 0 ? rows.length : place, 0, ...telling);
  const value: Sensitivity = {
    format: SENSITIVITY_FORMAT,
    engine: ENGINE_VERSION,
    campaign: standings.campaign,
    finding: findingOf(document, standings, rows),
    leader: leaderOf(standings),
    hypotheses: hypothesesOf(standings),
    changes: rows,
    measurementsTried: tried.length,
    referenceWidthFactor: referenceWidthFactor(document, { standings, scoreOf }, () => {
      progress(Math.min(done, total), total);
      done += 1;
    }),
    weightOfEvidence: weights,
  };
  return { ok: true, value };
}

type Row = Sensitivity["changes"][number];

/** Section 10 names single measurements after these. */
const BEFORE_MEASUREMENTS = new Set<Row["kind"]>([
  "without-facility",
  "without-measurand",
  "without-team",
]);

function isCounted(document: CampaignDocument, { measurand, setAside }: Measurement): boolean {
  if (setAside !== null) return false;
  return document.measurands.find(({ key }) => key === measurand)?.closed === null;
}

function rowOf({ kind, key }: Change, hypotheses: Row["hypotheses"], before: Standings): Row {
  const leader = leaderIn(hypotheses);
  return { kind, key, leader, leaderChanges: leader !== leaderOf(before), hypotheses };
}

/** The first; null without one, or where every likelihood is zero. */
function leaderIn([first]: Row["hypotheses"]): string | null {
  return first === undefined || first.log10BayesFactor === null ? null : first.key;
}

/** Null without a hypothesis, or where every likelihood is zero. */
function leaderOf({ hypotheses }: Standings): string | null {
  const [first] = hypotheses;
  return first === undefined || first.lnEvidence === null ? null : first.key;
}

function hypothesesOf({ hypotheses }: Standings): Sensitivity["hypotheses"] {
  return hypotheses.map(({ key, rank, log10BayesFactor, posterior, chiSquare }) => ({
    key,
    rank,
    log10BayesFactor,
    posterior,
    chiSquare,
  }));
}

/** log10 B of a against b from a standings' list; null where either is impossible. */
function log10B(hypotheses: Row["hypotheses"], a: string, b: string): number | null {
  const of = (key: string) => hypotheses.find((one) => one.key === key)?.log10BayesFactor ?? null;
  const [own, other] = [of(a), of(b)];
  return own === null || other === null ? null : own - other;
}

/** The rows that move log10 B of the first two most, the largest first. */
function mostTelling(rows: Row[], { hypotheses }: Standings): Row[] {
  const [first, second] = hypotheses;
  if (first === undefined || second === undefined) return rows.slice(0, MOST_TELLING);
  const before = log10B(hypotheses, first.key, second.key);
  const moved = rows.map((row) => {
    const after = log10B(row.hypotheses, first.key, second.key);
    return { row, by: after === null || before === null ? Infinity : Math.abs(after - before) };
  });
  // A stable sort: ties stay in the measurements' order.
  moved.sort((a, b) => (a.by === b.by ? 0 : b.by - a.by));
  return moved.slice(0, MOST_TELLING).map(({ row }) => row);
}

function weightsOfEvidence(rows: Row[], standings: Standings): Sensitivity["weightOfEvidence"] {
  const leftOut = rows.filter(({ kind }) => kind === "without-measurand");
  return standings.pairs.flatMap(({ a, b, log10BayesFactor }) =>
    leftOut.map(({ key, hypotheses }) => {
      const rest = log10B(hypotheses, a, b);
      const weight = log10BayesFactor === null || rest === null ? null : log10BayesFactor - rest;
      return { a, b, measurand: key!, log10BayesFactor: weight };
    }),
  );
}

/** The factor nearest to 1, by its logarithm, at which another leads; bisected to 1e-9. */
function referenceWidthFactor(
  document: CampaignDocument,
  { standings, scoreOf }: { standings: Standings; scoreOf: ScoreChanged },
  step: () => void,
): Sensitivity["referenceWidthFactor"] {
  const leader = leaderOf(standings);
  if (leader === null || standings.hypotheses.length < 2) return null;
  const leaderAt = (exponent: number): string | null => {
    const changed = scoreOf(withReferences(document, 2 ** exponent));
    return changed === null ? null : leaderIn(changed);
  };
  const changesAt = (exponent: number) => {
    const other = leaderAt(exponent);
    return other !== null && other !== leader;
  };
  for (let size = 1; size <= MOST_DOUBLINGS; size += 1) {
    for (const sign of [1, -1]) {
      step();
      if (!changesAt(sign * size)) continue;
      let [stays, changes] = [sign * (size - 1), sign * size];
      for (let i = 0; i < BISECTIONS; i += 1) {
        const middle = (stays + changes) / 2;
        if (changesAt(middle)) changes = middle;
        else stays = middle;
      }
      return { factor: 2 ** changes, leader: leaderAt(changes)! };
    }
  }
  return null;
}
