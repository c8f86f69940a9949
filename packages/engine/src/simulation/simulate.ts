import type { Candidate } from "@weighhouse/campaign/candidates";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Problem, Result } from "@weighhouse/campaign/problem";
import { SIMULATION_FORMAT, type Simulation } from "@weighhouse/campaign/simulation";
import { randomSource } from "@weighhouse/numerics/random-source";
import { compileFrame } from "../compile-frame";
import { evidencesOf } from "../evidences";
import type { Frame, HypothesisFrame } from "../frame";
import { createState } from "../state";
import { ENGINE_VERSION } from "../version";
import { drawReadings } from "./draw-readings";

export interface SimulateOptions {
  runs: number;
  /** Called before each run of each truth. */
  progress?: (done: number, total: number) => void;
}

/**
 * Would a campaign of these candidates decide (section 11)? The whole of it is drawn from each
 * hypothesis in turn and scored, over and over. The campaign's own measurements take no part.
 *
 * The same input gives the same bytes: draws are seeded by the campaign's key, the hypothesis's
 * place and the run.
 */
export function simulate(
  document: CampaignDocument,
  candidates: readonly Candidate[],
  { runs, progress = () => undefined }: SimulateOptions,
): Result<Simulation> {
  const empty = { ...document, measurements: [], correlations: [] };
  const compiled = compileFrame(empty);
  if (!compiled.ok) return compiled;
  const frame = compiled.value;
  const { noneOfThese } = document.campaign;
  const truths: (HypothesisFrame | null)[] = [
    ...frame.hypotheses,
    ...(noneOfThese.weight > 0 ? [null] : []),
  ];
  const rows: Simulation["truths"] = [];
  for (const [place, truth] of truths.entries()) {
    const outcomes: RunOutcome[] = [];
    for (let run = 0; run < runs; run += 1) {
      progress(place * runs + run, truths.length * runs);
      const random = randomSource(seedOf(`${document.campaign.key} ${place} ${run}`));
      const measurements = drawReadings(frame, candidates, { truth, random });
      const unfit = measurements.find(({ value }) => value !== null && !Number.isFinite(value));
      if (unfit !== undefined) return { ok: false, problems: [notDrawable(truth, unfit.id)] };
      const state = createState({ ...empty, measurements });
      if (!state.ok) return { ok: false, problems: state.problems };
      const evidences = new Map(
        evidencesOf(state.value).map((one) => [one.hypothesis, one.lnEvidence ?? -Infinity]),
      );
      outcomes.push(outcomeOf(evidences, { frame, noneWeight: noneOfThese.weight, truth }));
    }
    rows.push(summaryOf(truth?.key ?? "noneOfThese", outcomes));
  }
  return {
    ok: true,
    value: {
      format: SIMULATION_FORMAT,
      engine: ENGINE_VERSION,
      campaign: document.campaign.key,
      runs,
      candidates: candidates.map(({ key }) => key),
      truths: rows,
    },
  };
}

/** FNV-1a of the text, 32 bits. */
function seedOf(text: string): number {
  let hash = 0x811c9dc5;
  for (let i = 0; i < text.length; i += 1) {
    hash = Math.imul(hash ^ text.charCodeAt(i), 0x01000193) >>> 0;
  }
  return hash;
}

function notDrawable(truth: HypothesisFrame | null, id: string): Problem {
  return {
    pointer: truth?.pointer ?? "/campaign/noneOfThese",
    code: "out-of-range",
    found: `no finite reading of ${id} in one of the draws`,
    allowed: "an expectation with a value wherever its priors reach",
  };
}

interface RunOutcome {
  /** Of the truth against the best of the others; null without another. */
  log10B: number | null;
  posterior: number;
}

function outcomeOf(
  evidences: ReadonlyMap<string, number>,
  { frame, noneWeight, truth }: { frame: Frame; noneWeight: number; truth: HypothesisFrame | null },
): RunOutcome {
  const key = truth?.key ?? "noneOfThese";
  const own = evidences.get(key)!;
  const shares = new Map(frame.hypotheses.map((one) => [one.key, one.share]));
  if (noneWeight > 0) shares.set("noneOfThese", noneWeight);
  let best = -Infinity;
  let others = 0;
  for (const [other, share] of shares) {
    if (other === key) continue;
    const ln = evidences.get(other)!;
    best = Math.max(best, ln);
    others += share * Math.exp(ln - own);
  }
  const share = shares.get(key)!;
  return {
    log10B: shares.size < 2 ? null : (own - best) / Math.LN10,
    posterior: share / (share + others),
  };
}

function summaryOf(
  hypothesis: string,
  outcomes: readonly RunOutcome[],
): Simulation["truths"][number] {
  const logs = outcomes.flatMap(({ log10B }) => (log10B === null ? [] : [log10B]));
  const part = (holds: (log: number) => boolean) =>
    logs.length === 0 ? 1 : logs.filter(holds).length / logs.length;
  return {
    hypothesis,
    leads: part((log) => log > 0),
    leadsDecisively: part((log) => log >= 1),
    misleading: logs.length === 0 ? 0 : part((log) => log < -1),
    log10BayesFactor: logs.length === 0 ? null : quantilesOf(logs),
    posterior: quantilesOf(outcomes.map(({ posterior }) => posterior)),
  };
}

/** 2.5, 50 and 97.5 %, interpolated between order statistics (type 7 of Hyndman & Fan, 1996). */
function quantilesOf(values: readonly number[]): [number | null, number | null, number | null] {
  const ordered = Float64Array.from(values).sort();
  const at = (p: number) => {
    const place = p * (ordered.length - 1);
    const low = Math.floor(place);
    const high = Math.min(low + 1, ordered.length - 1);
    const value = ordered[low]! + (place - low) * (ordered[high]! - ordered[low]!);
    // Next to an impossible rival, which is infinitely far behind.
    return Number.isFinite(value) ? value : null;
  };
  return [at(0.025), at(0.5), at(0.975)];
}
