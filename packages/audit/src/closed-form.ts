import type { Standings } from "@weighhouse/campaign/standings";

/** Whether every evidence has a closed form. */
export function inClosedForm(hypotheses: Standings["hypotheses"]): boolean {
  return hypotheses.every(({ lnEvidenceError }) => lnEvidenceError === 0);
}
