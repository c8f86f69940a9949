import type { Integrand } from "./integrand";
import { integrate, type Integral } from "./integrate";
import type { BlockRefusal } from "./problem";
import { startsOf } from "./starts";
import { workOfRound, workOfRows } from "./work";
import type { Workbench } from "./workbench";

const MOST_DIMENSIONS = 30;
/** Units of work.ts: for a rule, and for sampling where that doesn't converge or there is none. */
const RULE_WORK = 2_000_000;
const SAMPLING_WORK = 2_000_000;
/** One dimension may have so many looks with a round each, however many rows there are. */
const LOOKS_ON_LINE = 5000;
/** Of an ensemble's rows; more take more time in all. */
const MOST_SHARES = 8;

export interface ScenarioEvidence {
  integrand: Integrand;
  integral: Integral;
}

/** Over the integrand's coordinates; one point where there are none. */
export function integralOf(
  bench: Workbench,
  integrand: Integrand,
): Integral | { refusal: BlockRefusal } {
  const { coordinates } = integrand;
  const dimensions = coordinates.length;
  if (dimensions > MOST_DIMENSIONS) {
    return { refusal: { kind: "too-many-unknowns", dimensions, limit: MOST_DIMENSIONS } };
  }
  let integral: Integral;
  if (dimensions === 0) {
    const point = new Float64Array(0);
    const { ln, error } = integrand.lnWithError(point);
    integral = { ln, error, points: [point], weights: Float64Array.of(1), cdf: null };
  } else {
    const { seed, scenarios } = bench.layout.problem;
    let kinks = 0;
    for (const { breaks } of bench.layout.factors) kinks += breaks.length;
    const { starts, more } = startsOf(bench, integrand);
    // A variance taken at the best fit has kinks wherever it meets its clamps.
    const rough = bench.layout.moving;
    const share = Math.min(scenarios.length, MOST_SHARES);
    const look = workOfRows(bench.layout) + workOfRound(bench.layout);
    const fewest = dimensions === 1 ? LOOKS_ON_LINE * look : 0;
    const rule = Math.max(RULE_WORK / share, fewest);
    const work = { done: () => bench.work, rule, sampling: SAMPLING_WORK / share };
    const options = { starts, more, seed, kinks, rough, work };
    integral = integrate((c) => integrand.lnWithError(c).ln, coordinates, options);
  }
  const singular = integrand.singular();
  return singular === null ? integral : { refusal: { kind: "singular", rows: singular } };
}
