import type { Prior } from "@weighhouse/campaign/document";
import { normalQuantile } from "@weighhouse/numerics/normal";
import { sobolPoints } from "@weighhouse/numerics/sobol";
import type { EnsembleFrame, Expectation, HypothesisFrame } from "./frame";

/** The sequence has so many, one of them for the ensemble's rows. */
const MOST_DIMENSIONS = 64;

/** Slots of the parameters that an expression reads and that aren't fixed. */
export function freeSlots(
  { parameters }: Pick<HypothesisFrame, "parameters">,
  { uses }: Pick<Expectation, "uses">,
): number[] {
  return uses.filter(
    (slot) => slot < parameters.length && parameters[slot]!.prior.family !== "fixed",
  );
}

/** Every parameter at its prior's median, and the ensemble's first row. */
export function middleOf({
  parameters,
  ensemble,
}: Pick<HypothesisFrame, "parameters" | "ensemble">): Float64Array {
  const columns = ensemble?.columns ?? [];
  return Float64Array.from([
    ...parameters.map(({ prior }) => priorQuantile(prior, 0.5)),
    ...columns.map((column) => column[0]!),
  ]);
}

/**
 * Points of the priors of what the expression reads, in the middle of the cells that Sobol's points
 * are the corners of: so that no coordinate is 0. Without free parameters, the ensemble's rows.
 * The slots are one array, filled anew for each point. Of more than 63 free parameters the last stay
 * at their medians.
 */
export function* pointsOf(
  { parameters, ensemble }: Pick<HypothesisFrame, "parameters" | "ensemble">,
  { uses }: Pick<Expectation, "uses">,
  count: number,
): Generator<{ slots: Float64Array; weight: number }> {
  const slots = middleOf({ parameters, ensemble });
  const free = freeSlots({ parameters }, { uses }).slice(0, MOST_DIMENSIONS - 1);
  const inRows = uses.some((slot) => slot >= parameters.length);
  if (free.length === 0 && ensemble !== null) {
    for (let row = 0; row < ensemble.logWeights.length; row += 1) {
      setRow(slots, ensemble, { row, begin: parameters.length });
      yield { slots, weight: Math.exp(ensemble.logWeights[row]!) };
    }
    return;
  }
  const dimension = free.length + (inRows ? 1 : 0);
  const points = sobolPoints(dimension, count);
  const shares = inRows ? cumulative(ensemble!) : null;
  for (let i = 0; i < count; i += 1) {
    free.forEach((slot, k) => {
      const u = points[i * dimension + k]! + 0.5 / count;
      slots[slot] = priorQuantile(parameters[slot]!.prior, u);
    });
    if (shares !== null) {
      const u = points[i * dimension + free.length]! + 0.5 / count;
      setRow(slots, ensemble!, { row: rowAt(shares, u), begin: parameters.length });
    }
    yield { slots, weight: 1 };
  }
}

function setRow(
  slots: Float64Array,
  { columns }: EnsembleFrame,
  { row, begin }: { row: number; begin: number },
): void {
  columns.forEach((column, k) => (slots[begin + k] = column[row]!));
}

function cumulative({ logWeights }: EnsembleFrame): Float64Array {
  let sum = 0;
  return logWeights.map((log) => (sum += Math.exp(log)));
}

function rowAt(shares: Float64Array, u: number): number {
  let [low, high] = [0, shares.length - 1];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (shares[middle]! < u) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** The value that a share u of a prior lies below, 0 < u < 1. */
function priorQuantile(prior: Prior, u: number): number {
  switch (prior.family) {
    case "normal":
      return prior.mean + prior.sd * normalQuantile(u);
    case "lognormal":
      return prior.median * 10 ** (prior.sdLog10 * normalQuantile(u));
    case "halfnormal":
      return prior.sd * normalQuantile((1 + u) / 2);
    case "uniform":
      return prior.lower + (prior.upper - prior.lower) * u;
    case "loguniform":
      return prior.lower * (prior.upper / prior.lower) ** u;
    case "fixed":
      return prior.value;
  }
}
