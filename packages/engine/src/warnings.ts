import type {
  HypothesisStanding,
  Pair,
  Standings,
  Warning,
  WarningCode,
} from "@weighhouse/campaign/standings";
import { binomialUpperTail } from "@weighhouse/numerics/binomial";
import { referenceFit } from "./chi-square-fit";
import { combine } from "./combination";
import { meanOf } from "./distribution/distribution";
import { enteredCounts } from "./entered";
import type { HypothesisScore } from "./hypothesis-scores";
import type { PredictionFrame } from "./frame";
import { predictiveOf } from "./predictive";
import { isOutsideReference, shareOfReference } from "./reference-range";
import type { Tally } from "./tally";
import { DISAGREEING, intervalOf } from "./verdict";
import type { Workspace } from "./workspace";

const VAGUE_SHARE = 0.8;
const POOR_P = 0.001;
const FAIL_CHANCE = 0.01;
const MOST_ERROR = 0.1;
const FEW_ROWS = 20;

export interface WarningContext {
  workspace: Workspace;
  tally: Tally;
  /** In the document's order. */
  scores: readonly HypothesisScore[];
  silence: HypothesisScore;
  hypotheses: Standings["hypotheses"];
  pairs: readonly Pair[];
  includeAfter: boolean;
}

/**
 * The warnings of section 14, in its order. `at` points into the campaign document; for a pair,
 * which that doesn't hold, into the standings.
 */
export function warningsOf(context: WarningContext): Warning[] {
  return [
    ...disagreeingMeasurements(context),
    ...sameDataTwice(context),
    ...predictionWarnings(context, "vague-prediction", vague),
    ...outsideReference(context),
    ...predictionWarnings(context, "outside-reference", outside),
    ...poorReferences(context),
    ...everyHypothesisFails(context),
    ...moreFailsThanChance(context),
    ...approximateEvidence(context),
    ...commonGroundDisagrees(context),
    ...filedAfter(context),
    ...registeredAfterObservation(context),
    ...unknownUnits(context),
  ];
}

function disagreeingMeasurements({ workspace }: WarningContext): Warning[] {
  return workspace.frame.measurands.flatMap(({ key, pointer }, m) => {
    const combination = combine(workspace, m);
    if (combination === null || combination.pValue === null || combination.pValue >= DISAGREEING)
      return [];
    const { chiSquare, degreesOfFreedom, pValue } = combination;
    const text =
      `The measurements of ${key} disagree with one another: chi-square ${short(chiSquare!)} ` +
      `for ${degreesOfFreedom} degrees of freedom, p = ${short(pValue)}.`;
    return [{ code: "disagreeing-measurements" as const, at: pointer, text }];
  });
}

function sameDataTwice({ tally }: WarningContext): Warning[] {
  const warnings: Warning[] = [];
  for (const [key, some] of tally.sameData) {
    const [first, second] = some;
    if (first === undefined || second === undefined) continue;
    const text = `${countOf(some.length, "counted measurements")} share the data ${key}, first ${first.id}: the same data must not vote twice.`;
    warnings.push({ code: "same-data-twice", at: `/measurements/${second.place}`, text });
  }
  return warnings;
}

function predictionWarnings(
  context: WarningContext,
  code: WarningCode,
  describe: (context: WarningContext, prediction: PredictionFrame) => string | null,
): Warning[] {
  return context.scores.flatMap(({ key, listed }) =>
    listed.flatMap((one) => {
      if (one.kind !== "open") return [];
      const described = describe(context, one.prediction);
      if (described === null) return [];
      return [{ code, at: one.prediction.pointer, text: `${key} ${described}` }];
    }),
  );
}

function vague({ workspace }: WarningContext, prediction: PredictionFrame): string | null {
  const { frame } = workspace;
  // Of a curve there is no interval but hard bounds.
  const bounds = "width" in prediction.tolerance ? prediction.interval : null;
  const interval = bounds ?? intervalOf(frame, prediction);
  if (interval === null) return null;
  const share = shareOfReference(frame, prediction.measurand, interval);
  if (share <= VAGUE_SHARE) return null;
  const { key } = frame.measurands[prediction.measurand]!;
  return `predicts for ${key} an interval that covers ${short(100 * share)} % of its reference.`;
}

/** What is expected, or a bound, outside of the reference. */
function outside({ workspace }: WarningContext, prediction: PredictionFrame): string | null {
  const { frame } = workspace;
  const { measurand, tolerance, expected, interval } = prediction;
  const { key } = frame.measurands[measurand]!;
  if ("width" in tolerance) {
    const bounds = [interval!.lower, interval!.upper].filter(Number.isFinite);
    if (!bounds.some((y) => isOutsideReference(frame, measurand, { y }))) return null;
    return `predicts for ${key} a bound outside its reference.`;
  }
  const predictive = expected === null ? predictiveOf(frame, prediction) : null;
  const y = expected ?? (predictive === null ? null : meanOf(predictive));
  if (y === null || !isOutsideReference(frame, measurand, { y })) return null;
  return `predicts for ${key} a value outside its reference.`;
}

function outsideReference({ workspace, tally }: WarningContext): Warning[] {
  return tally.outside.flatMap((places, m) => {
    if (places.length === 0) return [];
    const { key } = workspace.frame.measurands[m]!;
    const text = `${countOf(places.length, "measurements")} of ${key} outside its reference.`;
    return [{ code: "outside-reference" as const, at: `/measurements/${places[0]}`, text }];
  });
}

function poorReferences({ workspace }: WarningContext): Warning[] {
  // Silence is charged the references of what enters the evidence, and of nothing else.
  const counts = enteredCounts(workspace);
  return workspace.frame.measurands.flatMap(({ key, pointer }, m) => {
    const own = counts[m]! > 0 ? referenceFit(workspace, m) : null;
    if (own === null || own.pValue === null || own.pValue >= POOR_P) return [];
    const text =
      `The reference of ${key} fits its measurements badly (p = ${short(own.pValue)}), so that ` +
      "silence on it is charged too much: read the common ground.";
    return [{ code: "poor-reference" as const, at: pointer, text }];
  });
}

function everyHypothesisFails({ scores }: WarningContext): Warning[] {
  const compared = scores.filter((score) => score.compared > 0);
  const fails = ({ fit }: HypothesisScore) => (fit?.pValue ?? 1) < POOR_P;
  if (compared.length === 0 || !compared.every(fails)) return [];
  const text = "Every hypothesis with data has p < 0.001: no hypothesis describes the data.";
  return [{ code: "every-hypothesis-fails", at: "/hypotheses", text }];
}

function moreFailsThanChance({ scores, hypotheses }: WarningContext): Warning[] {
  return scores.flatMap(({ key, pointer }) => {
    const { pass, fail } = standingOf(hypotheses, key).verdicts;
    const decided = pass + fail;
    const chance = binomialUpperTail(fail, decided, FAIL_CHANCE);
    if (chance >= FAIL_CHANCE) return [];
    const text =
      `${key} fails ${fail} of ${decided} decided predictions; with a chance of 1 % each, as many ` +
      `have a probability of ${short(chance)}.`;
    return [{ code: "more-fails-than-chance" as const, at: pointer, text }];
  });
}

function standingOf(hypotheses: readonly HypothesisStanding[], key: string): HypothesisStanding {
  return hypotheses.find((one) => one.key === key)!;
}

function approximateEvidence({ scores, silence }: WarningContext): Warning[] {
  const code = "approximate-evidence" as const;
  return [...scores, silence].flatMap(({ key, pointer, lnEvidenceError, effectiveRows }) => {
    const warnings: Warning[] = [];
    if (lnEvidenceError > MOST_ERROR) {
      const text = `The ln evidence of ${key} has a standard error of ${short(lnEvidenceError)}.`;
      warnings.push({ code, at: pointer, text });
    }
    if (effectiveRows !== null && effectiveRows < FEW_ROWS) {
      const rows = short(effectiveRows);
      const text = `Few rows of the ensemble of ${key} carry its evidence: an effective number of ${rows}.`;
      warnings.push({ code, at: `${pointer}/ensemble`, text });
    }
    return warnings;
  });
}

function commonGroundDisagrees({ pairs }: WarningContext): Warning[] {
  return pairs.flatMap(({ a, b, log10BayesFactor: all, commonGround }, i) => {
    const common = commonGround.log10BayesFactor;
    if (all === null || common === null || all * common >= 0) return [];
    if (Math.max(Math.abs(all), Math.abs(common)) <= 0.5) return [];
    const text =
      `${a} against ${b}: log10 Bayes factor ${short(all)} on everything, ${short(common)} on ` +
      "their common ground. Silence decides between them.";
    return [{ code: "common-ground-disagrees" as const, at: `/pairs/${i}`, text }];
  });
}

function filedAfter({ workspace, scores, includeAfter }: WarningContext): Warning[] {
  if (includeAfter) return [];
  return byOrder({ workspace, scores }, "after", (key, measurand) => ({
    code: "filed-after-excluded",
    text: `The prediction of ${key} for ${measurand} was filed after data, and is left out.`,
  }));
}

function registeredAfterObservation({ workspace, scores }: WarningContext): Warning[] {
  return byOrder({ workspace, scores }, "before-posting", (key, measurand) => ({
    code: "registered-after-observation",
    text: `The prediction of ${key} for ${measurand} was filed after the observation: somebody could have seen the data.`,
  }));
}

function byOrder(
  { workspace, scores }: Pick<WarningContext, "workspace" | "scores">,
  order: "after" | "before-posting",
  word: (hypothesis: string, measurand: string) => Pick<Warning, "code" | "text">,
): Warning[] {
  return scores.flatMap(({ key, listed }) =>
    listed.flatMap((one) => {
      if (one.kind !== "open" || one.order !== order) return [];
      const { pointer, measurand } = one.prediction;
      const { code, text } = word(key, workspace.frame.measurands[measurand]!.key);
      return [{ code, at: pointer, text }];
    }),
  );
}

function unknownUnits({ workspace, tally }: WarningContext): Warning[] {
  return [...tally.unknownUnits.values()].map(({ places, measurand, unit: found }) => {
    const { key, unit } = workspace.frame.measurands[measurand]!;
    const text = `${countOf(places.length, "measurements")} of ${key} in ${found}, of which no conversion to ${unit} is known: taken as they stand.`;
    return { code: "unknown-unit", at: `/measurements/${places[0]}/unit`, text };
  });
}

/** `many` ends in its plural's s. */
function countOf(count: number, many: string): string {
  return count === 1 ? `1 ${many.slice(0, -1)}` : `${count} ${many}`;
}

function short(value: number): string {
  return String(Number(value.toPrecision(3)));
}
