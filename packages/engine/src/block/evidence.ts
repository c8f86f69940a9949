import { logSumExp } from "@weighhouse/numerics/log-sum-exp";
import { integrandOf } from "./integrand";
import { couplersOf } from "./couplers";
import { layoutOf, type Layout } from "./layout";
import { lnOrthant } from "./orthant";
import { flatQuantileOf, outerQuantileOf, posteriorOf } from "./posterior";
import type { BlockEvidence, BlockOutcome, BlockProblem, BlockRefusal } from "./problem";
import { integralOf, type ScenarioEvidence } from "./scenario-integral";
import { workbenchOf, type Workbench } from "./workbench";

/** Of an integral done on a lattice: the posterior is found when it is asked for. */
const NO_POINTS = { points: [], weights: new Float64Array(0), cdf: null };

/**
 * ln Z of a block: linear unknowns in closed form where only Gaussian rows see them, flat ones over
 * their boxes, all others with the outer unknowns numerically; scenarios added up by weight.
 *
 * Accuracy: closed forms 1e-9 relative; one numerical dimension 1e-9 in ln Z, two and three 1e-6;
 * four to thirty by nested sampling, within three of the stated errors. Work is counted (work.ts) and
 * bounded for each block by itself, so that no hypothesis's evidence hangs on who else is there: a
 * rule that doesn't converge in up to three dimensions within it gives way to sampling, and sampling
 * ends with the error that it has then.
 */
export function blockEvidence(problem: BlockProblem): BlockOutcome<BlockEvidence> {
  const layout = layoutOf(problem, "evidence");
  const made = workbenchOf(withCouplers(layout));
  if (!made.ok) return made;
  const { bench } = made;
  const found: ScenarioEvidence[] = [];
  for (let scenario = 0; scenario < problem.scenarios.length; scenario += 1) {
    const one = scenarioEvidence(bench, scenario);
    if ("refusal" in one) return { ok: false, refusal: one.refusal };
    found.push(one);
  }
  const terms = found.map((one, r) => one.integral.ln + problem.scenarios[r]!);
  const ln = logSumExp(terms);
  const shares = Float64Array.from(terms, (term) => (ln === -Infinity ? 0 : Math.exp(term - ln)));
  let error = 0;
  found.forEach(({ integral }, r) => (error += (shares[r]! * integral.error) ** 2));
  return {
    ok: true,
    ln,
    error: Math.sqrt(error),
    scenarioShares: shares,
    unknowns: { outer: problem.outer.length, linear: problem.linear.length },
    posterior: () => (ln === -Infinity ? [] : posteriorOf(bench, { shares, found })),
    outerQuantile: outerQuantileOf(problem, { shares, found }),
    flatQuantile: flatQuantileOf(bench, { shares, found }),
  };
}

/** Many flat unknowns that a few normal ones couple: those are kept, to condition on. */
function withCouplers(layout: Layout): Layout {
  const { problem, others, bounds } = layout;
  if (others.length > 0 || bounds.length < 4) return layout;
  const couplers = couplersOf(problem);
  return couplers.size === 0 ? layout : layoutOf(problem, "evidence", couplers);
}

function scenarioEvidence(
  bench: Workbench,
  scenario: number,
): ScenarioEvidence | { refusal: BlockRefusal } {
  const integrand = integrandOf(bench, scenario, { flatsOpen: bench.layout.others.length > 0 });
  const orthant = lnOrthant(bench, integrand);
  const integral = orthant === null ? integralOf(bench, integrand) : { ...orthant, ...NO_POINTS };
  return "refusal" in integral ? integral : { integrand, integral };
}
