import type { Integrand } from "./integrand";
import { integrate, type Integral } from "./integrate";
import type { BlockRefusal } from "./problem";
import { startsOf } from "./starts";
import type { Workbench } from "./workbench";

const MOST_DIMENSIONS = 30;
const MOST_CALLS = 2_000_000;
const FEWEST_CALLS = 50_000;

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
    const { seed } = bench.layout.problem;
    let kinks = 0;
    for (const { breaks } of bench.layout.factors) kinks += breaks.length;
    const starts = startsOf(bench, integrand);
    // A variance taken at the best fit has kinks wherever it meets its clamps.
    const rough = bench.layout.moving;
    const calls = callsFor(bench);
    const options = { starts, seed, kinks, rough, calls };
    integral = integrate((c) => integrand.lnWithError(c).ln, coordinates, options);
  }
  const singular = integrand.singular();
  return singular === null ? integral : { refusal: { kind: "singular", rows: singular } };
}

/** As many evaluations as take some seconds, by what one of them has to do. */
function callsFor({ layout }: Workbench): number {
  const { rows, linear, outer, varying, atFit } = layout.problem;
  const moves = layout.moving || varying.length + atFit.length > 0;
  let cost = 1 + rows.count / 20;
  if (layout.others.length > 0) cost *= 2;
  if (outer.length > 0 && moves) cost *= 20;
  else if (outer.length > 0 && linear.length > 0) cost *= 4;
  return Math.max(MOST_CALLS / cost, FEWEST_CALLS);
}
