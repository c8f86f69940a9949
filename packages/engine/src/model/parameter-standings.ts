import type { HypothesisStanding } from "@weighhouse/campaign/standings";
import { mixtureMoments, mixtureOf, mixtureQuantiles } from "../block/mixture";
import type { Query } from "../block/problem";
import { measuredBlocks } from "../evidence";
import type { HypothesisFrame } from "../frame";
import { isPlain } from "../plain-blocks";
import type { Roles, Workspace } from "../workspace";
import type { Scored } from "./block-parts";
import { generalEvidence } from "./general-evidence";
import { linearUnknown } from "./parameters";
import { priorSummary, type ParameterSummary } from "./prior-summary";
import { ensembleKey, parameterKey, sharedUnknowns } from "./shared-unknowns";

const SHARES = [0.025, 0.5, 0.975];

/**
 * Every parameter of a hypothesis in its order, as its posterior has it; as its prior where no
 * counted measurement hangs on it, or where the likelihood is zero.
 *
 * @param charged what it says, or is charged, of everything that enters
 */
export function parameterStandings(
  workspace: Workspace,
  hypothesis: HypothesisFrame,
  charged: Roles,
): HypothesisStanding["parameters"] {
  const { parameters } = hypothesis;
  const place = workspace.frame.hypotheses.indexOf(hypothesis);
  const scored = parameters.length > 0 ? scoredBy(workspace, place, charged) : [];
  return parameters.map(({ key, prior }, p) => {
    const own = parameterKey(place, p);
    const found = scored.find(({ built }) => built.placeOf(own) !== undefined);
    const summary = found === undefined ? null : posteriorOf(found, own, prior);
    return { key, ...(summary ?? priorSummary(prior)) };
  });
}

/** Effective number of the ensemble's rows, 1 / sum w^2; null where no measurement hangs on them. */
export function effectiveRows(
  workspace: Workspace,
  hypothesis: HypothesisFrame,
  charged: Roles,
): number | null {
  if (hypothesis.ensemble === null) return null;
  const place = workspace.frame.hypotheses.indexOf(hypothesis);
  for (const { evidence, built } of scoredBy(workspace, place, charged)) {
    const uses = built.parts.some(({ measurand, role }) =>
      sharedUnknowns(workspace.frame, measurand, role).includes(ensembleKey(place)),
    );
    if (!uses || evidence.ln === -Infinity) continue;
    let squares = 0;
    for (const share of evidence.scenarioShares) squares += share * share;
    return 1 / squares;
  }
  return null;
}

/** What was scored of the blocks in which the hypothesis speaks in its own words. */
function scoredBy(workspace: Workspace, hypothesis: number, charged: Roles): Scored[] {
  return measuredBlocks(workspace, charged).flatMap((block) => {
    const own = block.some((m) => {
      const role = workspace.frame.measurands[m]!.roles[charged[m]!]!;
      return role.kind === "predicted" && role.prediction.hypothesis === hypothesis;
    });
    if (!own || isPlain(workspace, block, charged)) return [];
    return generalEvidence(workspace, block, charged).scored;
  });
}

function posteriorOf(
  { built, evidence }: Scored,
  key: string,
  prior: HypothesisFrame["parameters"][number]["prior"],
): ParameterSummary | null {
  if (evidence.ln === -Infinity) return null;
  const place = built.placeOf(key)!;
  const { from, step } = built.isLinear(key) ? linearUnknown(prior) : { from: 0, step: 0 };
  const query: Query = (outer, _scenario, loadings) => {
    if (step === 0) return outer[place]!;
    loadings[place] = step;
    return from;
  };
  const mixture = mixtureOf(evidence, query);
  const { outerQuantile } = evidence;
  const [lower, middle, upper] =
    step === 0 && outerQuantile !== null
      ? SHARES.map((share) => outerQuantile(place, share))
      : mixtureQuantiles(mixture, SHARES);
  return { ...mixtureMoments(mixture), quantiles: [lower!, middle!, upper!] };
}
