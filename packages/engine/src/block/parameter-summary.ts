import { mixtureMoments, mixtureOf, mixtureQuantiles } from "./mixture";
import type { BlockEvidence, Mixture, Query } from "./problem";

/** Mean, sd and the 2.5, 50 and 97.5 % quantiles. */
export interface ParameterSummary {
  mean: number;
  sd: number;
  quantiles: [number, number, number];
}

const PROBABILITIES = [0.025, 0.5, 0.975] as const;

/**
 * What a posterior says of a number that is read off its unknowns.
 *
 * @returns null where the likelihood is zero
 * Accuracy: Gaussian ones 1e-10 of sd; an outer unknown itself up to three dimensions as its
 * integral; others as the posterior's points are close.
 */
export function parameterSummary(evidence: BlockEvidence, query: Query): ParameterSummary | null {
  const mixture = mixtureOf(evidence, query);
  if (mixture.weights.length === 0) return null;
  const [lower, median, upper] = quantilesOf(evidence, query, mixture);
  return { ...mixtureMoments(mixture), quantiles: [lower!, median!, upper!] };
}

function quantilesOf(evidence: BlockEvidence, query: Query, mixture: Mixture): number[] {
  const { outerQuantile } = evidence;
  const unknown = outerQuantile === null ? -1 : outerItself(evidence, query);
  if (outerQuantile === null || unknown < 0) return mixtureQuantiles(mixture, PROBABILITIES);
  return PROBABILITIES.map((p) => outerQuantile(unknown, p));
}

/** Which outer unknown a query gives as it is; -1 for none. */
function outerItself({ posterior, unknowns }: BlockEvidence, query: Query): number {
  const loadings = new Float64Array(unknowns.linear);
  const pieces = posterior();
  const values = pieces.map(({ outer, scenario }) => query(outer, scenario, loadings));
  if (loadings.some((value) => value !== 0)) return -1;
  for (let k = 0; k < unknowns.outer; k += 1) {
    if (pieces.every(({ outer }, n) => outer[k] === values[n])) return k;
  }
  return -1;
}
