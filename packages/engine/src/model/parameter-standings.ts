import type { HypothesisStanding } from "@weighhouse/campaign/standings";
import { mixtureMoments, mixtureOf, mixtureQuantiles } from "../block/mixture";
import type { BlockEvidence, Mixture } from "../block/problem";
import { measuredBlocks } from "../evidence";
import type { HypothesisFrame } from "../frame";
import { isPlain } from "../plain-blocks";
import type { Roles, Workspace } from "../workspace";
import type { Scored } from "./block-parts";
import { generalEvidence } from "./general-evidence";
import { linearUnknown, type LinearParameter } from "./parameters";
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
    return { key, ...(summary !== null && isFinite(summary) ? summary : priorSummary(prior)) };
  });
}

function isFinite({ mean, sd, quantiles }: ParameterSummary): boolean {
  return [mean, sd, ...quantiles].every(Number.isFinite);
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
  return built.isLinear(key)
    ? linearPosterior(evidence, place, linearUnknown(prior))
    : outerPosterior(evidence, place);
}

function outerPosterior(evidence: BlockEvidence, place: number): ParameterSummary {
  const mixture = mixtureOf(evidence, (outer) => outer[place]!);
  const { outerQuantile } = evidence;
  const [lower, middle, upper] =
    outerQuantile === null
      ? mixtureQuantiles(mixture, SHARES)
      : SHARES.map((share) => outerQuantile(place, share));
  return { ...mixtureMoments(mixture), quantiles: [lower!, middle!, upper!] };
}

function linearPosterior(
  evidence: BlockEvidence,
  place: number,
  { from, step, logged }: LinearParameter,
): ParameterSummary {
  const mixture = mixtureOf(evidence, (_outer, _scenario, loadings) => {
    loadings[place] = step;
    return logged ? Math.log10(from) : from;
  });
  const flat = SHARES.map((share) => evidence.flatQuantile(place, share));
  const quantiles = flat.every((one) => one !== null)
    ? flat.map((t) => (logged ? Math.log10(from) : from) + step * t)
    : mixtureQuantiles(mixture, SHARES);
  if (!logged) {
    const [lower, middle, upper] = quantiles;
    return { ...mixtureMoments(mixture), quantiles: [lower!, middle!, upper!] };
  }
  const [lower, middle, upper] = quantiles.map((log) => 10 ** log);
  return { ...momentsOfPowers(mixture), quantiles: [lower!, middle!, upper!] };
}

/**
 * Mean and sd of 10^x over a mixture of normals: E 10^(k x) = 10^(k m) exp((k s ln 10)^2 / 2),
 * relative to the mixture's middle so that the second moment keeps its digits.
 */
function momentsOfPowers(mixture: Mixture): { mean: number; sd: number } {
  const { mean: centre } = mixtureMoments(mixture);
  let excess = 0;
  let second = 0;
  mixture.weights.forEach((weight, n) => {
    const m = (mixture.means[n]! - centre) * Math.LN10;
    const v = (mixture.sds[n]! * Math.LN10) ** 2;
    const one = Math.expm1(m + v / 2);
    excess += weight * one;
    // E (10^x - 1)^2 = e^(2m + 2v) - 2 e^(m + v/2) + 1.
    second += weight * (Math.expm1(2 * m + 2 * v) - 2 * one);
  });
  const unit = 10 ** centre;
  return { mean: unit * (1 + excess), sd: unit * Math.sqrt(Math.max(0, second - excess ** 2)) };
}
