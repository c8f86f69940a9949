import type { Candidate, Outcome } from "@weighhouse/campaign/candidates";
import { Unscorable } from "./evidence-with";

type LogProbability = (outcome: Outcome, hypothesis: string) => number | null;

interface Outcomes {
  /** Per hypothesis, of each outcome. */
  probabilities: Map<string, number[]>;
  /** Mean and sd of what is measured, without the reading's own noise. */
  predictive: Map<string, { mean: number | null; sd: number | null }>;
}

/** Counts are summed until this little is left of every hypothesis's probability. */
const LEFT = 1e-12;
const MOST_COUNTS = 5000;

/** Every outcome of an event's report or of a count, under each hypothesis. */
export function outcomesOf(
  candidate: Candidate,
  scale: "event" | "count",
  { keys, logProbability }: { keys: readonly string[]; logProbability: LogProbability },
): Outcomes {
  return scale === "event"
    ? eventOutcomes(candidate, keys, logProbability)
    : countOutcomes(candidate, keys, logProbability);
}

/** The truth's own probability stands behind the report: (P(yes) - falseAlarm) / (efficiency - falseAlarm). */
function eventOutcomes(
  { efficiency, falseAlarm }: Candidate,
  keys: readonly string[],
  logProbability: LogProbability,
): Outcomes {
  const probabilities = probabilitiesOf(keys, [
    logsOf({ occurred: true }, keys, logProbability),
    logsOf({ occurred: false }, keys, logProbability),
  ]);
  const predictive: Outcomes["predictive"] = new Map();
  for (const key of keys) {
    const [yes] = probabilities.get(key)!;
    if (efficiency === falseAlarm) {
      predictive.set(key, { mean: null, sd: null });
      continue;
    }
    const truth = (yes! - falseAlarm) / (efficiency - falseAlarm);
    const mean = Math.min(Math.max(truth, 0), 1);
    predictive.set(key, { mean, sd: Math.sqrt(mean * (1 - mean)) });
  }
  return { probabilities, predictive };
}

/** The rate's mean and sd, from the count's: Var n = E n + Var(exposure x rate). */
function countOutcomes(
  { key: candidate, exposure, background }: Candidate,
  keys: readonly string[],
  logProbability: LogProbability,
): Outcomes {
  const logs: ReadonlyMap<string, number | null>[] = [];
  const sums = new Map(keys.map((key) => [key, 0]));
  while ([...sums.values()].some((sum) => sum < 1 - LEFT)) {
    if (logs.length === MOST_COUNTS) {
      const found = `counts of more than ${MOST_COUNTS} expected of ${candidate}`;
      const allowed = "an exposure with fewer expected counts";
      throw new Unscorable([{ pointer: "", code: "out-of-range", found, allowed }]);
    }
    const next = logsOf({ count: logs.length }, keys, logProbability);
    logs.push(next);
    for (const key of keys) {
      const log = next.get(key) ?? null;
      // An impossible hypothesis has no more outcomes to come.
      sums.set(key, log === null ? 1 : sums.get(key)! + Math.exp(log));
    }
  }
  const probabilities = probabilitiesOf(keys, logs);
  const predictive: Outcomes["predictive"] = new Map();
  for (const key of keys) {
    let mean = 0;
    let square = 0;
    probabilities.get(key)!.forEach((p, n) => {
      mean += n * p;
      square += n * n * p;
    });
    const variance = Math.max(square - mean * mean - mean, 0);
    const rate = (mean - background) / exposure;
    predictive.set(key, { mean: rate, sd: Math.sqrt(variance) / exposure });
  }
  return { probabilities, predictive };
}

function logsOf(
  outcome: Outcome,
  keys: readonly string[],
  logProbability: LogProbability,
): Map<string, number | null> {
  return new Map(keys.map((key) => [key, logProbability(outcome, key)]));
}

function probabilitiesOf(
  keys: readonly string[],
  logs: readonly ReadonlyMap<string, number | null>[],
): Map<string, number[]> {
  return new Map(
    keys.map((key) => [key, logs.map((outcome) => Math.exp(outcome.get(key) ?? -Infinity))]),
  );
}
