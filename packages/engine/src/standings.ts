import type {
  HypothesisStanding,
  MeasurandStanding,
  Standings,
  VerdictRow,
} from "@weighhouse/campaign/standings";
import { STANDINGS_FORMAT } from "@weighhouse/campaign/standings";
import { combine } from "./combination";
import { log10BayesFactor, pairsOf, posteriors, ranked } from "./comparison";
import {
  isSilenced,
  scoreHypothesis,
  scoreSilence,
  type HypothesisScore,
  type ListedPrediction,
} from "./hypothesis-scores";
import { upperTail } from "./distribution/distribution";
import { naturalInterval } from "./natural-interval";
import { toNatural, wrapped } from "./scoring-space";
import type { ScoreOptions } from "./score-options";
import type { MeasurandSums } from "./sums";
import type { Tally } from "./tally";
import { verdictOf, verdictOfWithheld } from "./verdict";
import { ENGINE_VERSION } from "./version";
import { warningsOf } from "./warnings";
import type { Workspace } from "./workspace";

/** The standings document, keys in schema order: the same input gives the same bytes. */
export function standings(
  workspace: Workspace,
  tally: Tally,
  { includeAfter = false, asOf = null }: ScoreOptions,
): Standings {
  const { frame } = workspace;
  const context = { dates: tally.dates, includeAfter };
  const scores = frame.hypotheses.map((one) => scoreHypothesis(workspace, one, context));
  const silence = scoreSilence(workspace);
  const inRank = ranked(silence.share > 0 ? [...scores, silence] : scores);
  const rows = scores.flatMap((score) =>
    score.listed.map((listed) => ({ score, listed, row: verdictRow(workspace, score, listed) })),
  );
  const chances = posteriors(inRank);
  const hypotheses = inRank.map((score, i) => {
    const own = rows.filter((one) => one.score === score);
    return hypothesisStanding(score, {
      rank: i + 1,
      leader: inRank[0]!,
      posterior: chances[i]!,
      ...countVerdicts(own, includeAfter),
    });
  });
  const pairs = pairsOf(workspace, inRank);
  return {
    format: STANDINGS_FORMAT,
    engine: ENGINE_VERSION,
    campaign: frame.document.campaign.key,
    asOf: asOf === null ? null : { size: asOf.size, treeHead: asOf.treeHead },
    measurements: { counted: tally.counted, setAside: tally.setAside },
    noModel: { lnEvidence: finite(silence.lnEvidence) },
    hypotheses,
    pairs,
    verdicts: rows.map(({ row }) => row),
    measurands: frame.measurands.map((_, m) => measurandStanding(workspace, m)),
    warnings: warningsOf({ workspace, tally, scores, silence, hypotheses, pairs, includeAfter }),
  };
}

/** A listed prediction with its row. */
interface ListedRow {
  listed: ListedPrediction;
  row: VerdictRow;
}

function countVerdicts(rows: readonly ListedRow[], includeAfter: boolean) {
  const verdicts: HypothesisStanding["verdicts"] = {
    pass: 0,
    fail: 0,
    undecided: 0,
    awaiting: 0,
    notMeasured: 0,
    withheld: 0,
    void: 0,
  };
  const failedDecisive: string[] = [];
  for (const { listed, row } of rows) {
    if (row.order !== "after") verdicts[row.verdict] += 1;
    const decisive = listed.kind === "open" && listed.prediction.decisive;
    if (decisive && row.verdict === "fail" && !isSilenced(row.order, includeAfter)) {
      failedDecisive.push(row.measurand);
    }
  }
  return { verdicts, failedDecisive };
}

function hypothesisStanding(
  score: HypothesisScore,
  rest: Pick<HypothesisStanding, "rank" | "posterior" | "failedDecisive" | "verdicts"> & {
    leader: HypothesisScore;
  },
): HypothesisStanding {
  const lnEvidence = finite(score.lnEvidence);
  return {
    key: score.key,
    rank: rest.rank,
    compared: score.compared,
    silent: score.silent,
    chiSquare: finite(score.fit?.chiSquare ?? null),
    degreesOfFreedom: score.fit?.degreesOfFreedom ?? 0,
    pValue: score.fit?.pValue ?? null,
    lnEvidence,
    lnEvidenceError: lnEvidence === null ? 0 : score.lnEvidenceError,
    log10BayesFactor: log10BayesFactor(score.lnEvidence, rest.leader.lnEvidence),
    posterior: rest.posterior,
    failedDecisive: rest.failedDecisive,
    verdicts: rest.verdicts,
    parameters: score.parameters,
  };
}

function verdictRow(
  workspace: Workspace,
  { key }: HypothesisScore,
  listed: ListedPrediction,
): VerdictRow {
  const m = listed.kind === "open" ? listed.prediction.measurand : listed.measurand;
  const { key: measurand, scale } = workspace.frame.measurands[m]!;
  const verdict =
    listed.kind === "open"
      ? verdictOf(workspace, listed.prediction)
      : verdictOfWithheld(workspace, m);
  const interval =
    listed.kind === "open"
      ? naturalInterval(workspace.frame, listed.prediction)
      : { lower: null, upper: null };
  return {
    hypothesis: key,
    measurand,
    verdict: verdict.word,
    conformance: verdict.conformance,
    tension: finite(verdict.tension),
    value: verdict.value === null ? null : finite(toNatural(verdict.value, scale)),
    sd: verdict.sd,
    // An end beyond all doubles is as good as unbounded.
    lower: finite(interval.lower),
    upper: finite(interval.upper),
    inflated: verdict.inflated,
    provisional: measuredBy(workspace, m).some(({ provisional }) => provisional > 0),
    order: listed.order,
  };
}

/** The sums of a measurand, or of a derived value's inputs. */
function measuredBy({ frame, sums }: Workspace, measurand: number): MeasurandSums[] {
  const { derived } = frame.measurands[measurand]!;
  if (derived === null) return [sums.measurands[measurand]!];
  const inputs = new Set(derived.from.map((one) => one.measurand));
  return [...inputs].map((input) => sums.measurands[input]!);
}

function measurandStanding(workspace: Workspace, m: number): MeasurandStanding {
  const { key, scale, thresholds } = workspace.frame.measurands[m]!;
  const combination = combine(workspace, m);
  const value = combination === null ? null : finite(toNatural(combination.value, scale));
  let measurements = 0;
  for (const { counted } of measuredBy(workspace, m)) measurements += counted;
  return {
    key,
    measurements,
    combined:
      combination === null || value === null
        ? null
        : {
            value,
            sd: combination.sd,
            chiSquare: finite(combination.chiSquare),
            degreesOfFreedom: combination.degreesOfFreedom,
            birgeRatio: finite(combination.birgeRatio),
          },
    thresholds: thresholds.map(({ key: threshold, value: at }) => ({
      key: threshold,
      probabilityAbove: combination === null ? null : probabilityAbove(workspace, m, at),
    })),
  };
}

/** On a circle above means up to half a turn ahead. */
function probabilityAbove(workspace: Workspace, m: number, threshold: number): number {
  const { value, trueValue } = combine(workspace, m)!;
  const { period } = workspace.frame.measurands[m]!;
  return upperTail(trueValue, value - wrapped(value - threshold, period));
}

/** What is beyond all doubles doesn't exist in JSON. */
function finite(value: number | null): number | null {
  return value !== null && Number.isFinite(value) ? value : null;
}
