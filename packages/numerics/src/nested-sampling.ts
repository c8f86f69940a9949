import type { CubeIntegral } from "./cube-integral";
import { nestedRun, type DeadPoint, type Rest } from "./nested-run";
import { randomSource } from "./random-source";

/** The error to be stated where the information is below 40 nats, and what is aimed at for it. */
const WANTED_ERROR = 0.1;
const AIM = 0.093;
const MANY_NATS = 40;
/** Below so many nats a run is short: the error is brought down further, for a share of the work. */
const FEW_NATS = 3;
const FINE = 0.025;
const CHEAP = 0.2;
/** Live points that this information takes; with more, live points times nats are kept. */
const MOST_LIVE = 4700;
const FEWEST_LIVE = 1000;
/** Where work is dear, fewer: a run of so many points costs a few hundred calls for each. */
const LEAST_LIVE = 100;
const CALLS_PER_LIVE = 400;
const PROBES = 10;
/** A mean that fewer live points carry tells nothing of its own error. */
const FEW_EFFECTIVE = 10;
const MOST_CALLS = 5_000_000;
/** Points lighter than e^-30 of the posterior are left out. */
const NEGLIGIBLE = 30;

export interface NestedOptions {
  /** The same seed gives the same bytes. */
  seed: number;
  /** The share of the work allowed for that has been spent; by default of five million calls. */
  spent?: () => number;
}

/**
 * ln of the integral of exp(logDensity) over [0, 1]^d by nested sampling.
 *
 *   Z = sum over dead points of L_i (X_(i-1) - X_i),   ln X_i = -sum_(j <= i) 1 / n_j
 *
 * with n_j live points at the j-th death. A first run tells the information H; further runs are
 * merged with it (the live points add up) until the error, about sqrt(H / n), is below 0.1 or the
 * work allowed for is spent. Beyond 40 nats the number of live points falls as 1 / H and the error
 * is what it is.
 *
 * @param dimension 1 to 30
 * Error: the shrinkages' standard errors 1 / n_j carried through that sum; no plateau adds to it.
 *   Where the work is spent before the first run's end, what is left is the live points' mean, whose
 *   standard error adds to it; where few of them carry that mean, all that it would be if the
 *   highest density among them held throughout.
 * Accuracy: within three of its errors. Calls for a normal peak, about: 2e4 in four dimensions at 6
 *   nats, 3e4 in six at 9, 1e5 in ten at 16; three to ten times that where the peak isn't compact.
 * Source: Skilling, Bayesian Analysis 1 (2006) 833; merging: Higson et al., Statistics and
 * Computing 29 (2019) 891.
 */
export function nestedSampling(
  logDensity: (u: Float64Array) => number,
  dimension: number,
  options: NestedOptions,
): CubeIntegral {
  let evaluations = 0;
  const counted = (u: Float64Array) => {
    evaluations += 1;
    return logDensity(u);
  };
  const { spent = () => evaluations / MOST_CALLS } = options;
  const random = randomSource(options.seed);
  const mayGoOn = () => spent() < 1;
  const run = (live: number) => nestedRun(counted, { dimension, live, random, mayGoOn });
  let live = firstLive(counted, { dimension, spent, random });
  const first = run(live);
  const runs = [first.dead];
  let summary = summaryOf(runs);
  if (first.left !== null) {
    if (summary.ln === -Infinity) return { ...integralOf(summary, dimension), evaluations };
    const error = Math.hypot(summary.error, openError(first.left, summary.ln));
    summary = { ...summary, error };
    return { ...integralOf(summary, dimension), evaluations };
  }
  for (;;) {
    const wanted = wantedLive(summary, live, spent());
    if (wanted < live + Math.min(50, live / 4)) break;
    const more = Math.ceil(Math.max(wanted - live, 4 * dimension));
    const { dead, left } = run(more);
    if (left !== null) break;
    runs.push(dead);
    live += more;
    summary = summaryOf(runs);
  }
  return { ...integralOf(summary, dimension), evaluations };
}

/** How many live points in all the error that is aimed at takes; no more than the work allows. */
function wantedLive({ error, information }: Summary, live: number, spent: number): number {
  const most = MOST_LIVE * Math.min(1, MANY_NATS / information);
  // Some is kept, for no run costs just as much as the one before.
  if (error > WANTED_ERROR) return Math.min(live * (error / AIM) ** 2, most, live * (0.9 / spent));
  if (information > FEW_NATS) return live;
  return Math.min(live * (error / FINE) ** 2, most, live * (CHEAP / spent));
}

/** Of ln Z, for what a run that ended early left to its last live points. */
function openError({ ln, lnMost, error, effective }: Rest, lnZ: number): number {
  if (effective < FEW_EFFECTIVE) return Math.log1p(Math.exp(lnMost - lnZ));
  return error * Math.exp(ln - lnZ);
}

/** As many as the work allows, by what a few calls take of it. */
function firstLive(
  logDensity: (u: Float64Array) => number,
  {
    dimension,
    spent,
    random,
  }: { dimension: number; spent: () => number; random: ReturnType<typeof randomSource> },
): number {
  const before = spent();
  for (let n = 0; n < PROBES; n += 1) {
    logDensity(Float64Array.from({ length: dimension }, () => random.uniform()));
  }
  const each = (spent() - before) / PROBES;
  const affordable = (1 - before) / each / CALLS_PER_LIVE;
  const fewest = Math.max(LEAST_LIVE, 5 * dimension);
  const most = Math.max(FEWEST_LIVE, 20 * dimension);
  return Math.floor(Math.min(Math.max(affordable, fewest), most));
}

interface Summary {
  ln: number;
  error: number;
  information: number;
  /** Of all runs, density rising, with ln of the weight X_(i-1) - X_i. */
  dead: { point: DeadPoint; lnWidth: number }[];
}

function summaryOf(runs: readonly DeadPoint[][]): Summary {
  const { dead, lnX, live } = merge(runs);
  let top = -Infinity;
  for (const { point, lnWidth } of dead) top = Math.max(top, point.ln + lnWidth);
  if (top === -Infinity) return { ln: top, error: 0, information: 0, dead };
  let sum = 0;
  for (const { point, lnWidth } of dead) sum += Math.exp(point.ln + lnWidth - top);
  const ln = top + Math.log(sum);
  let after = 0;
  let variance = 0;
  let information = 0;
  for (let i = dead.length - 1; i >= 0; i -= 1) {
    const { point, lnWidth } = dead[i]!;
    // The step's shrinkage scales all that comes after, and what it leaves is lost to this point.
    const slope = after - Math.exp(lnX[i]! + point.ln - ln);
    variance += (slope / live[i]!) ** 2;
    const share = Math.exp(point.ln + lnWidth - ln);
    after += share;
    if (share > 0) information += share * (point.ln - ln);
  }
  return { ln, error: Math.sqrt(variance), information: Math.max(0, information), dead };
}

/** Several runs as one: at each death the live points of all of them are counted. */
function merge(runs: readonly DeadPoint[][]) {
  const at = runs.map(() => 0);
  const total = runs.reduce((sum, run) => sum + run.length, 0);
  const dead: Summary["dead"] = [];
  const lnX: number[] = [];
  const live: number[] = [];
  let before = 0;
  for (let i = 0; i < total; i += 1) {
    let first = -1;
    let lowest = Infinity;
    runs.forEach((run, r) => {
      const next = run[at[r]!];
      if (next === undefined || (first >= 0 && next.ln >= lowest)) return;
      first = r;
      lowest = next.ln;
    });
    let count = 0;
    runs.forEach((run, r) => {
      const next = run[at[r]!];
      const last = run[at[r]! - 1];
      // Points of a plateau are replaced when those of all runs are out.
      if (next?.ln !== lowest && last?.ln === lowest) count += last.live - 1;
      else if (next !== undefined) count += next.live;
    });
    const point = runs[first]![at[first]!]!;
    at[first]! += 1;
    const last = i === total - 1;
    const lnWidth = last ? before : before + Math.log(-Math.expm1(-1 / count));
    before = last ? -Infinity : before - 1 / count;
    dead.push({ point, lnWidth });
    lnX.push(before);
    live.push(count);
  }
  return { dead, lnX, live };
}

function integralOf(
  { ln, error, information, dead }: Summary,
  dimension: number,
): Omit<CubeIntegral, "evaluations"> {
  const kept = dead.filter(({ point, lnWidth }) => point.ln + lnWidth > ln - NEGLIGIBLE);
  const points = new Float64Array(kept.length * dimension);
  const lnWeights = new Float64Array(kept.length);
  let sum = 0;
  kept.forEach(({ point, lnWidth }, i) => {
    points.set(point.u!, i * dimension);
    lnWeights[i] = point.ln + lnWidth - ln;
    sum += Math.exp(lnWeights[i]!);
  });
  for (let i = 0; i < kept.length; i += 1) lnWeights[i]! -= Math.log(sum);
  return { ln, error, information, nodes: { points, lnWeights } };
}
