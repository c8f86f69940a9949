import type { CampaignDocument, Prior, Reference, Tolerance } from "@weighhouse/campaign/document";
import type { Problem } from "@weighhouse/campaign/problem";

/** Uncertainties whose squares and weights are ordinary doubles. */
export const LEAST_SD = 1e-140;
export const MOST_SD = 1e140;

/** Of a gamma's sd over its mean: beyond it is as good as exact, or nearly all at 0. */
const LEAST_SPREAD = 1e-6;
const MOST_SPREAD = 1e3;

/** What keeps a gamma's density from being computed; null where nothing does. */
export function gammaProblem(
  { mean, sd }: { mean: number; sd: number },
  pointer: string,
): Problem | null {
  const spread = sd / mean;
  if (spread >= LEAST_SPREAD && spread <= MOST_SPREAD && mean >= LEAST_SD && mean <= MOST_SD) {
    return null;
  }
  const allowed = `an sd of ${LEAST_SPREAD} to ${MOST_SPREAD} times the mean, and a mean of ${LEAST_SD} to ${MOST_SD}`;
  const found = `${sd}, with a mean of ${mean}`;
  return { pointer: `${pointer}/sd`, code: "out-of-range", found, allowed };
}

/** Of a lognormal prior, in dex: its own mean and sd are ordinary doubles. */
const MOST_DEX = 8;

/** What spreads a value and is declared in the document, too large to be squared. */
export function oversizedParts(document: CampaignDocument): Problem[] {
  const problems: Problem[] = [];
  const check = (pointer: string, size: number) => {
    if (size <= MOST_SD) return;
    const allowed = `at most ${MOST_SD}`;
    problems.push({ pointer, code: "out-of-range", found: String(size), allowed });
  };
  const checkWidth = ({ lower, upper }: { lower: number; upper: number }, at: string) => {
    if (Math.abs(upper - lower) >= LEAST_SD) return;
    const allowed = `an end at least ${LEAST_SD} from ${lower}`;
    problems.push({ pointer: `${at}/upper`, code: "out-of-range", found: String(upper), allowed });
  };
  const checkReference = (reference: Reference | null, at: string) => {
    if (reference === null) return;
    check(`${at}/scatter`, reference.scatter);
    const gamma = reference.family === "gamma" ? gammaProblem(reference, at) : null;
    if (gamma !== null) problems.push(gamma);
    else if ("sd" in reference) check(`${at}/sd`, reference.sd);
  };
  document.measurands.forEach(({ scatter, reference }, i) => {
    check(`/measurands/${i}/scatter`, scatter);
    checkReference(reference, `/measurands/${i}/reference`);
  });
  document.derived.forEach(({ reference }, i) =>
    checkReference(reference, `/derived/${i}/reference`),
  );
  document.sharedErrors.forEach(({ sd }, i) => check(`/sharedErrors/${i}/sd`, sd));
  document.hypotheses.forEach(({ parameters, predictions }, i) => {
    parameters.forEach(({ prior }, p) => {
      const problem = priorProblem(prior, `/hypotheses/${i}/parameters/${p}/prior`);
      if (problem !== null) problems.push(problem);
      else if (prior.family === "uniform") {
        checkWidth(prior, `/hypotheses/${i}/parameters/${p}/prior`);
      }
    });
    predictions.forEach(({ tolerance }, j) => {
      const at = `/hypotheses/${i}/predictions/${j}/tolerance`;
      for (const [field, size] of sidesOf(tolerance)) {
        check(`${at}/${field}`, size);
      }
    });
  });
  return problems;
}

function sidesOf(tolerance: Tolerance | null): [string, number][] {
  if (tolerance?.family !== "splitNormal") return [];
  return [
    ["plus", tolerance.plus],
    ["minus", tolerance.minus],
  ];
}

/** A prior whose width, mean or sd is no ordinary double. */
function priorProblem(prior: Prior, pointer: string): Problem | null {
  const refused = (field: string, found: number, most: number): Problem | null => {
    if (found <= most) return null;
    const allowed = `at most ${most}`;
    return { pointer: `${pointer}/${field}`, code: "out-of-range", found: String(found), allowed };
  };
  switch (prior.family) {
    case "normal":
      return refused("mean", Math.abs(prior.mean), MOST_SD) ?? refused("sd", prior.sd, MOST_SD);
    case "halfnormal":
      return refused("sd", prior.sd, MOST_SD);
    case "lognormal":
      return (
        refused("median", prior.median, MOST_SD) ?? refused("sdLog10", prior.sdLog10, MOST_DEX)
      );
    case "uniform":
    case "loguniform": {
      const { lower, upper } = prior;
      const problem =
        refused("lower", Math.abs(lower), MOST_SD) ?? refused("upper", Math.abs(upper), MOST_SD);
      if (problem !== null || prior.family === "uniform") return problem;
      if (lower >= LEAST_SD) return null;
      const allowed = `at least ${LEAST_SD}`;
      return { pointer: `${pointer}/lower`, code: "out-of-range", found: String(lower), allowed };
    }
    case "fixed":
      return null;
  }
}
