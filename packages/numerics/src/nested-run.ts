import { constrainedDraw } from "./constrained-draw";
import type { RandomSource } from "./random-source";

/** A point taken out of the live ones, and how many those were, itself among them. */
export interface DeadPoint {
  /** null where the density is 0: only its having been drawn counts. */
  u: Float64Array | null;
  ln: number;
  live: number;
}

/** The live points are given up when they hold less than this share of Z; they are still counted. */
const REMAINDER = 0.01;
/** Live points are enclosed anew each time the volume has shrunk by about e^-0.3. */
const ENCLOSE_EVERY = 0.3;
/** Draws from the whole cube in search of a density above 0. */
const MOST_PRIOR_DRAWS = 100_000;

export interface RunOptions {
  dimension: number;
  /** Number of live points. */
  live: number;
  random: RandomSource;
  /** Calls of the density left. */
  budget: number;
}

/**
 * One run of nested sampling: the live point of least density is taken out and replaced by one
 * drawn from where the density is higher, and so on.
 *
 * Points of equal density go out together, one after another from ever fewer live points, and are
 * replaced only then: that is right for plateaus, and for the region where the density is 0 (all
 * that is drawn from the cube until enough points lie outside that region is one plateau).
 *
 * @returns the dead points, density rising; `unfinished` when the budget ran out
 * Source: Skilling, Bayesian Analysis 1 (2006) 833; plateaus: Fowlie, Handley & Su, MNRAS 503
 * (2021) 1199.
 */
export function nestedRun(
  logDensity: (u: Float64Array) => number,
  options: RunOptions,
): { dead: DeadPoint[]; unfinished: boolean } {
  let calls = 0;
  const counted = (u: Float64Array) => {
    calls += 1;
    return logDensity(u);
  };
  const { dimension, random } = options;
  const { alive, empty } = drawFromCube(counted, options);
  const dead: DeadPoint[] = [];
  for (let i = 0; i < empty; i += 1) {
    dead.push({ u: null, ln: -Infinity, live: alive.length + empty - i });
  }
  const take = (live: number) => {
    const point = alive.shift()!;
    dead.push({ ...point, live });
    return point;
  };
  const sampler = constrainedDraw(counted, dimension, random);
  let lnX = empty === 0 ? 0 : Math.log(alive.length / (alive.length + empty));
  let lnZ = -Infinity;
  let untilEnclosed = 0;
  let unfinished = alive.length <= 2 * dimension;
  while (!unfinished && alive[0]!.ln < alive.at(-1)!.ln) {
    if (lnX + alive.at(-1)!.ln < lnZ + Math.log(REMAINDER)) break;
    unfinished = calls > options.budget;
    if (unfinished) break;
    if (untilEnclosed <= 0) {
      sampler.enclose({ points: rowsOf(alive, dimension), dimension, lnVolume: lnX });
      untilEnclosed = Math.ceil(ENCLOSE_EVERY * alive.length);
    }
    const full = Math.max(alive.length, options.live);
    const bound = alive[0]!.ln;
    while (alive[0]!.ln === bound) {
      const lnWidth = lnX + Math.log(-Math.expm1(-1 / alive.length));
      lnX -= 1 / alive.length;
      lnZ = logAdd(lnZ, lnWidth + take(alive.length).ln);
    }
    while (alive.length < full) {
      const from = alive[random.below(alive.length)]!;
      insert(alive, sampler.draw(bound, from.u));
      untilEnclosed -= 1;
    }
  }
  while (alive.length > 0) take(alive.length);
  return { dead, unfinished };
}

interface LivePoint {
  u: Float64Array;
  ln: number;
}

function drawFromCube(
  logDensity: (u: Float64Array) => number,
  { dimension, live, random, budget }: RunOptions,
): { alive: LivePoint[]; empty: number } {
  const alive: LivePoint[] = [];
  let empty = 0;
  while (alive.length < live && alive.length + empty < Math.min(MOST_PRIOR_DRAWS, budget)) {
    const u = Float64Array.from({ length: dimension }, () => random.uniform());
    const ln = logDensity(u);
    if (ln === -Infinity) empty += 1;
    else alive.push({ u, ln });
  }
  alive.sort((a, b) => a.ln - b.ln);
  return { alive, empty };
}

function insert(alive: LivePoint[], point: LivePoint): void {
  let begin = 0;
  let end = alive.length;
  while (begin < end) {
    const middle = (begin + end) >>> 1;
    if (alive[middle]!.ln <= point.ln) begin = middle + 1;
    else end = middle;
  }
  alive.splice(begin, 0, point);
}

function rowsOf(alive: readonly LivePoint[], dimension: number): Float64Array {
  const rows = new Float64Array(alive.length * dimension);
  alive.forEach(({ u }, i) => rows.set(u, i * dimension));
  return rows;
}

function logAdd(a: number, b: number): number {
  const high = Math.max(a, b);
  return high === -Infinity ? high : high + Math.log1p(Math.exp(Math.min(a, b) - high));
}
