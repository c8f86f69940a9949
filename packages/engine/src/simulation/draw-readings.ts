import {
  candidateMeasurement,
  type Candidate,
  type Outcome,
} from "@weighhouse/campaign/candidates";
import type { Measurement } from "@weighhouse/campaign/document";
import { poissonCdf } from "@weighhouse/numerics/poisson-distribution";
import type { RandomSource } from "@weighhouse/numerics/random-source";
import type { Frame, HypothesisFrame } from "../frame";
import { relativeSd, toNatural } from "../scoring-space";
import { drawTruth, type Truth } from "./draw-truth";

/** A whole campaign of candidates as it could turn out, were a hypothesis true. */
export function drawReadings(
  frame: Frame,
  candidates: readonly Candidate[],
  { truth, random }: { truth: HypothesisFrame | null; random: RandomSource },
): Measurement[] {
  const truthOf = drawTruth(frame, truth, random);
  const draws = new Map<number, number>();
  const common = (error: number): number => {
    const there = draws.get(error) ?? random.normal();
    draws.set(error, there);
    return there;
  };
  return candidates.flatMap((candidate) => {
    const measurand = frame.measurandIndex.get(candidate.measurand)!;
    const own = truthOf(measurand);
    const outcome = drawOutcome(frame, candidate, { own, common, random });
    const got = candidate.chance === 1 || random.uniform() < candidate.chance;
    return got ? [candidateMeasurement(candidate, outcome)] : [];
  });
}

interface Context {
  own: Truth;
  common: (error: number) => number;
  random: RandomSource;
}

function drawOutcome(
  frame: Frame,
  candidate: Candidate,
  { own, common, random }: Context,
): Outcome {
  switch (own.kind) {
    case "event": {
      const chance = own.occurred ? candidate.efficiency : candidate.falseAlarm;
      return { occurred: random.uniform() < chance };
    }
    case "rate": {
      const mean = candidate.exposure * own.rate + candidate.background;
      return { count: poissonAt(random.uniform(), mean) };
    }
    case "value": {
      const { scale } = frame.measurands[frame.measurandIndex.get(candidate.measurand)!]!;
      const { level, value } = own.at(candidate.conditions);
      let y = value + candidate.sd! * random.normal();
      for (const { error: key, coefficient } of candidate.shared) {
        const place = frame.errorIndex.get(key)!;
        const { sd, perBatch, relative } = frame.errors[place]!;
        const size = relative ? (relativeSd(sd, scale) ?? sd * level) : sd;
        y += coefficient * size * (perBatch ? random.normal() : common(place));
      }
      const valued = scale as "linear" | "log10" | "magnitude" | "cyclic";
      return { value: toNatural(y, scale), scale: valued };
    }
  }
}

/** The smallest n with P(<= n) >= u, by bisection. */
function poissonAt(u: number, mean: number): number {
  if (mean === 0) return 0;
  let upper = Math.ceil(mean) + 1;
  while (poissonCdf(upper, mean) < u) upper *= 2;
  let lower = -1;
  while (upper - lower > 1) {
    const middle = Math.floor((lower + upper) / 2);
    if (poissonCdf(middle, mean) >= u) upper = middle;
    else lower = middle;
  }
  return upper;
}
