import type { CampaignDocument, Measurement } from "@weighhouse/campaign/document";
import type { Sensitivity } from "@weighhouse/campaign/sensitivity";
import type { Standings } from "@weighhouse/campaign/standings";

interface Context {
  document: CampaignDocument;
  standings: Standings;
  weights: Sensitivity["weightOfEvidence"];
  counted: readonly Measurement[];
  most: number;
}

/**
 * All counted measurements, or the `most` that are likely to move the first two hypotheses'
 * Bayes factor: by their measurand's weight of evidence, their own share of its information
 * (1 / sd^2) and their distance from its combined value. A choice of what to try, not a result.
 */
export function likelyTelling(context: Context): Measurement[] {
  const { counted, most } = context;
  if (counted.length <= most) return [...counted];
  const weight = measurandWeights(context);
  const information = new Map<string, number>();
  for (const one of counted) {
    const so = information.get(one.measurand) ?? 0;
    information.set(one.measurand, so + informationOf(one));
  }
  const combined = new Map(context.standings.measurands.map((one) => [one.key, one.combined]));
  const scores = counted.map((one, place) => {
    const own = informationOf(one);
    const share = own / information.get(one.measurand)!;
    const middle = combined.get(one.measurand)?.value ?? one.value ?? 0;
    const distance = Math.abs((one.value ?? middle) - middle) * Math.sqrt(own);
    return { place, score: (weight.get(one.measurand) ?? 1) * share * (1 + distance) };
  });
  scores.sort((a, b) => b.score - a.score || a.place - b.place);
  const kept = scores.slice(0, most).map(({ place }) => place);
  return kept.sort((a, b) => a - b).map((place) => counted[place]!);
}

function measurandWeights({ standings, weights }: Context): Map<string, number> {
  const [first, second] = standings.hypotheses;
  const own = weights.filter(({ a, b }) => a === first?.key && b === second?.key);
  return new Map(own.map((one) => [one.measurand, Math.abs(one.log10BayesFactor ?? Infinity)]));
}

/** 1 / sd^2 where there is one; reports, counts and limits count alike. */
function informationOf({ sd, plus, minus }: Measurement): number {
  const width = sd ?? (plus !== null && minus !== null ? (plus + minus) / 2 : null);
  return width === null ? 1 : width ** -2;
}
