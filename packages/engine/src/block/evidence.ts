import { logSumExp } from "@weighhouse/numerics/log-sum-exp";
import { integrandOf } from "./integrand";
import { layoutOf } from "./layout";
import { outerQuantileOf, posteriorOf } from "./posterior";
import type { BlockEvidence, BlockOutcome, BlockProblem, BlockRefusal } from "./problem";
import { integralOf, type ScenarioEvidence } from "./scenario-integral";
import { workbenchOf, type Workbench } from "./workbench";

/**
 * ln Z of a block: linear unknowns in closed form where only Gaussian rows see them, flat ones over
 * their boxes, all others with the outer unknowns numerically; scenarios added up by weight.
 *
 * Accuracy: closed forms 1e-9 relative; one numerical dimension 1e-9 in ln Z, two and three 1e-6;
 * four to thirty by nested sampling, within three of the stated errors.
 */
export function blockEvidence(problem: BlockProblem): BlockOutcome<BlockEvidence> {
  const made = workbenchOf(layoutOf(problem, "evidence"));
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
  };
}

function scenarioEvidence(
  bench: Workbench,
  scenario: number,
): ScenarioEvidence | { refusal: BlockRefusal } {
  const integrand = integrandOf(bench, scenario, { flatsOpen: bench.layout.others.length > 0 });
  const integral = integralOf(bench, integrand);
  return "refusal" in integral ? integral : { integrand, integral };
}
