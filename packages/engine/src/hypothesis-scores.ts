import type { Order } from "@weighhouse/campaign/standings";
import { fit, type Fit } from "./chi-square-fit";
import { evidence } from "./evidence";
import type { HypothesisFrame, PredictionFrame } from "./frame";
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
  /** Its role where it speaks and counts, null where it is silent. */
  spoken: Roles;
  compared: number;
  silent: number;
  fit: Fit | null;
  /** -Infinity where the likelihood is zero. */
  lnEvidence: number;
  lnEvidenceError: number;
}

/** A prediction that says nothing in the standings: filed after data, unless those were asked for. */
export function isSilenced(order: Order, includeAfter: boolean): boolean {
  return order === "after" && !includeAfter;
}

export function scoreHypothesis(
  workspace: Workspace,
  hypothesis: HypothesisFrame,
  { dates, includeAfter }: { dates: readonly FirstDates[]; includeAfter: boolean },
): HypothesisScore {
  const listed = listPredictions(workspace, hypothesis, dates);
  const spoken: (number | null)[] = workspace.frame.measurands.map(() => null);
  for (const one of listed) {
    if (one.kind === "open" && !isSilenced(one.order, includeAfter)) {
      spoken[one.prediction.measurand] = one.prediction.role;
    }
  }
  const { key, pointer, share } = hypothesis;
  return { key, pointer, share, listed, ...scoreRoles(workspace, spoken) };
}

/** The hypothesis silent on everything: `noneOfThese`, and the evidence of `noModel`. */
export function scoreSilence(workspace: Workspace): HypothesisScore {
  const { weight } = workspace.frame.document.campaign.noneOfThese;
  const spoken = workspace.frame.measurands.map(() => null);
  return {
    key: "noneOfThese",
    pointer: "/campaign/noneOfThese",
    share: weight,
    listed: [],
    ...scoreRoles(workspace, spoken),
  };
}

function scoreRoles(workspace: Workspace, spoken: Roles) {
  let compared = 0;
  let silent = 0;
  workspace.sums.measurands.forEach(({ counted }, m) => {
    if (spoken[m] === null) silent += counted;
    else compared += counted;
  });
  // Where it is silent it is charged the measurand's reference.
  const charged = spoken.map((role) => role ?? 0);
  const { ln, error } = evidence(workspace, charged);
  const lnEvidence = Number.isFinite(ln) ? ln : -Infinity;
  const own = fit(workspace, spoken);
  return { spoken, compared, silent, fit: own, lnEvidence, lnEvidenceError: error };
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
