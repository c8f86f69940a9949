import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";

/** Uncertainties whose squares and weights are ordinary doubles. */
export const LEAST_SD = 1e-140;
export const MOST_SD = 1e140;

/** What spreads a value and is declared in the document, too large to be squared. */
export function oversizedParts(document: CampaignDocument): Problem[] {
  const problems: Problem[] = [];
  const check = (pointer: string, size: number) => {
    if (size <= MOST_SD) return;
    const allowed = `at most ${MOST_SD}`;
    problems.push({ pointer, code: "out-of-range", found: String(size), allowed });
  };
  document.measurands.forEach(({ scatter, reference }, i) => {
    check(`/measurands/${i}/scatter`, scatter);
    if (reference === null) return;
    check(`/measurands/${i}/reference/scatter`, reference.scatter);
    if ("sd" in reference) check(`/measurands/${i}/reference/sd`, reference.sd);
  });
  document.sharedErrors.forEach(({ sd }, i) => check(`/sharedErrors/${i}/sd`, sd));
  return problems;
}
