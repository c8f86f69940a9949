import type { Given } from "./frame";
import type { Workspace } from "./workspace";

/** ln of what an event's counted reports say under either truth. */
export interface Reports {
  lnYes: number;
  lnNo: number;
}

/**
 * Reports are independent given the truth: P(reported yes | yes) = efficiency,
 * P(reported yes | no) = falseAlarm.
 */
export function reportsOf({ sums }: Workspace, measurand: number): Reports {
  let lnYes = 0;
  let lnNo = 0;
  for (const { told } of sums.measurands[measurand]!.kept) {
    if (told.form !== "event") continue;
    const { occurred, efficiency, falseAlarm } = told;
    lnYes += Math.log(occurred ? efficiency : 1 - efficiency);
    lnNo += Math.log(occurred ? falseAlarm : 1 - falseAlarm);
  }
  return { lnYes, lnNo };
}

/** ln(p prod P(r | yes) + (1 - p) prod P(r | no)). */
export function eventEvidence({ lnYes, lnNo }: Reports, probability: number): number {
  const yes = Math.log(probability) + lnYes;
  const no = Math.log1p(-probability) + lnNo;
  const most = Math.max(yes, no);
  return most === -Infinity ? most : most + Math.log1p(Math.exp(Math.min(yes, no) - most));
}

/** P(yes | reports) with prior 1/2; 1/2 where reports leave no truth possible. */
export function occurredProbability({ lnYes, lnNo }: Reports): number {
  return lnYes === lnNo ? 0.5 : 1 / (1 + Math.exp(lnNo - lnYes));
}

/** Whether a condition is met, its complement is, or neither yet. */
export type GivenState = "met" | "contradicted" | "open";

/** By the event's posterior with prior 1/2, from its counted reports alone, against `rule.pass`. */
export function givenState(workspace: Workspace, { measurand, occurred }: Given): GivenState {
  const { lnYes, lnNo } = reportsOf(workspace, measurand);
  const { pass } = workspace.frame.document.campaign.rule;
  const met = occurred ? { lnYes, lnNo } : { lnYes: lnNo, lnNo: lnYes };
  if (occurredProbability(met) >= pass) return "met";
  return occurredProbability({ lnYes: met.lnNo, lnNo: met.lnYes }) >= pass
    ? "contradicted"
    : "open";
}
