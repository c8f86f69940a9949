import type { HypothesisStanding, Order } from "@weighhouse/campaign/standings";
import { fit, type Fit } from "./chi-square-fit";
import { enteredCounts } from "./entered";
import { givenState } from "./events";
import { evidence } from "./evidence";
import type { HypothesisFrame, PredictionFrame } from "./frame";
import { effectiveRows, parameterStandings } from "./model/parameter-standings";
import { orderOf, type FirstDates } from "./order";
import type { Roles, Workspace } from "./workspace";

/** The rows of a hypothesis: its predictions, then its withheld measurands without one. */
export type ListedPrediction =
  | { kind: "open"; prediction: PredictionFrame; order: Order }
  | { kind: "withheld"; measurand: number; order: Order };

export interface HypothesisScore {
  key: string;
  pointer: string;
  share: number;
  listed: ListedPrediction[];
  /** Its role where it speaks and counts, null where it is silent, or nothing enters. */
  spoken: Roles;
  compared: number;
  silent: number;
  fit: Fit | null;
  /** -Infinity where the likelihood is zero. */
  lnEvidence: number;
  lnEvidenceError: number;
  parameters: HypothesisStanding["parameters"];
  /** Effective number of its ensemble's rows, 1 / sum w^2; null where no measurement hangs on one. */
  effectiveRows: number | null;
}

/** A prediction that says nothing in the standings: filed after data, unless those were asked for. */
export function isSilenced(order: Order, includeAfter: boolean): boolean {
  return order === "after" && !includeAfter;
}

export interface ScoreContext {
  dates: readonly FirstDates[];
  includeAfter: boolean;
}

/** Null for the hypothesis that is silent on everything. */
export type Said = HypothesisFrame | null;

/** ln Z alone, -Infinity where the likelihood is zero. */
export function lnEvidenceOf(
  workspace: Workspace,
  hypothesis: Said,
  { dates, includeAfter }: ScoreContext,
): number {
  const listed = hypothesis === null ? [] : listPredictions(workspace, hypothesis, dates);
  const { charged } = enteredRoles(workspace, spokenIn(workspace, listed, includeAfter));
  const { ln } = evidence(workspace, charged);
  return Number.isFinite(ln) ? ln : -Infinity;
}

export function scoreHypothesis(
  workspace: Workspace,
  hypothesis: HypothesisFrame,
  { dates, includeAfter }: ScoreContext,
): HypothesisScore {
  const listed = listPredictions(workspace, hypothesis, dates);
  const spoken = spokenIn(workspace, listed, includeAfter);
  const { key, pointer, share } = hypothesis;
  const { charged, ...scores } = scoreRoles(workspace, spoken);
  return {
    key,
    pointer,
    share,
    listed,
    ...scores,
    parameters: parameterStandings(workspace, hypothesis, charged),
    effectiveRows: effectiveRows(workspace, hypothesis, charged),
  };
}

/** What hypotheses are ranked by, and how well they fit. */
export type BriefScore = Pick<HypothesisScore, "key" | "share" | "lnEvidence" | "fit">;

export function scoreBriefly(
  workspace: Workspace,
  hypothesis: Said,
  { dates, includeAfter }: ScoreContext,
): BriefScore {
  const listed = hypothesis === null ? [] : listPredictions(workspace, hypothesis, dates);
  const { lnEvidence, fit: own } = scoreRoles(workspace, spokenIn(workspace, listed, includeAfter));
  const { noneOfThese } = workspace.frame.document.campaign;
  const { key, share } = hypothesis ?? { key: "noneOfThese", share: noneOfThese.weight };
  return { key, share, lnEvidence, fit: own };
}

/** The hypothesis silent on everything: `noneOfThese`, and the evidence of `noModel`. */
export function scoreSilence(workspace: Workspace): HypothesisScore {
  const { weight } = workspace.frame.document.campaign.noneOfThese;
  const silent = workspace.frame.measurands.map(() => null);
  const { charged: _, ...scores } = scoreRoles(workspace, silent);
  return {
    key: "noneOfThese",
    pointer: "/campaign/noneOfThese",
    share: weight,
    listed: [],
    ...scores,
    parameters: [],
    effectiveRows: null,
  };
}

/** What it says where it speaks and counts. */
function spokenIn(
  workspace: Workspace,
  listed: readonly ListedPrediction[],
  includeAfter: boolean,
): Roles {
  const spoken: (number | null)[] = workspace.frame.measurands.map(() => null);
  for (const one of listed) {
    if (one.kind !== "open" || isSilenced(one.order, includeAfter)) continue;
    const { measurand, role, given } = one.prediction;
    if (given !== null && givenState(workspace, given) !== "met") continue;
    spoken[measurand] = role;
  }
  return spoken;
}

/** Roles of what enters: as it is said, and with the reference where it is silent. */
function enteredRoles(workspace: Workspace, said: Roles) {
  const counts = enteredCounts(workspace);
  return {
    counts,
    spoken: said.map((role, m) => (counts[m]! > 0 ? role : null)),
    charged: said.map((role, m) => (counts[m]! > 0 ? (role ?? 0) : null)),
  };
}

function scoreRoles(workspace: Workspace, said: Roles) {
  let compared = 0;
  let silent = 0;
  const { counts, spoken, charged } = enteredRoles(workspace, said);
  counts.forEach((count, m) => {
    if (said[m] === null) silent += count;
    else compared += count;
  });
  const { ln, error } = evidence(workspace, charged);
  const lnEvidence = Number.isFinite(ln) ? ln : -Infinity;
  const own = fit(workspace, spoken);
  // An integral that no rule could bound is as uncertain as a number can say.
  const lnEvidenceError = Number.isFinite(error) ? error : Number.MAX_VALUE;
  return { spoken, charged, compared, silent, fit: own, lnEvidence, lnEvidenceError };
}

function listPredictions(
  { frame }: Workspace,
  { predictions, withheld, registeredAt }: HypothesisFrame,
  dates: readonly FirstDates[],
): ListedPrediction[] {
  const closes = frame.document.campaign.registrationCloses;
  const listed: ListedPrediction[] = predictions.map((prediction) => {
    const { measurand } = prediction;
    const order = orderOf(prediction.registeredAt, dates[measurand]!, closes);
    return withheld.includes(measurand)
      ? { kind: "withheld", measurand, order }
      : { kind: "open", prediction, order };
  });
  const predicted = new Set(predictions.map(({ measurand }) => measurand));
  for (const measurand of withheld) {
    if (predicted.has(measurand)) continue;
    const order = orderOf(registeredAt, dates[measurand]!, closes);
    listed.push({ kind: "withheld", measurand, order });
  }
  return listed;
}
