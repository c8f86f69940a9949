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
/** They are given up too when they hold no more than the dead and add less than this to the error. */
const SETTLED = 0.005;
/** Live points are enclosed anew each time the volume has shrunk by about e^-0.3. */
const ENCLOSE_EVERY = 0.3;
/** Draws from the whole cube in search of a density above 0. */
const MOST_PRIOR_DRAWS = 100_000;

export interface RunOptions {
  dimension: number;
  /** Number of live points. */
  live: number;
  random: RandomSource;
  /** Asked before each death: whether there is work left to be spent. */
  mayGoOn: () => boolean;
}

/**
 * One run of nested sampling: the live point of least density is taken out and replaced by one
 * drawn from where the density is higher, and so on.
 *
 * Points of equal density go out together, one after another from ever fewer live points, and are
 * replaced only then: that is right for plateaus, and for the region where the density is 0 (all
 * that is drawn from the cube until enough points lie outside that region is one plateau).
 *
 * @returns the dead points, density rising; `left` what is left open where the work was spent before
 *   the end
 * Source: Skilling, Bayesian Analysis 1 (2006) 833; plateaus: Fowlie, Handley & Su, MNRAS 503
 * (2021) 1199.
 */
export function nestedRun(
  logDensity: (u: Float64Array) => number,
  options: RunOptions,
): { dead: DeadPoint[]; left: Rest | null } {
  const { dimension, random, mayGoOn } = options;
  const { alive, empty } = drawFromCube(logDensity, options);
  const dead: DeadPoint[] = [];
  for (let i = 0; i < empty; i += 1) {
    dead.push({ u: null, ln: -Infinity, live: alive.length + empty - i });
  }
  const take = (live: number) => {
    const point = alive.shift()!;
    dead.push({ ...point, live });
    return point;
  };
  const sampler = constrainedDraw(logDensity, dimension, random);
  let lnX = empty === 0 ? 0 : Math.log(alive.length / (alive.length + empty));
  let lnZ = -Infinity;
  let untilEnclosed = 0;
  let unfinished = alive.length <= 2 * dimension;
  while (!unfinished && alive[0]!.ln < alive.at(-1)!.ln) {
    if (lnX + alive.at(-1)!.ln < lnZ + Math.log(REMAINDER)) break;
    if (untilEnclosed <= 0 && isSettled(alive, { lnX, lnZ })) break;
    unfinished = !mayGoOn();
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
  const left = unfinished ? restOf(alive, lnX) : null;
  while (alive.length > 0) take(alive.length);
  return { dead, left };
}

/** What the live points say of the volume that they are spread over. */
export interface Rest {
  /** ln of the volume times their mean density, and times the highest one. */
  ln: number;
  lnMost: number;
  /** Standard error of the mean, as a share of it. */
  error: number;
  /** How many points as good as carry it. */
  effective: number;
}

function restOf(alive: readonly LivePoint[], lnX: number): Rest {
  const top = alive.at(-1)?.ln ?? -Infinity;
  let sum = 0;
  let squares = 0;
  for (const { ln } of alive) {
    const share = Math.exp(ln - top);
    sum += share;
    squares += share * share;
  }
  const count = alive.length;
  const effective = count === 0 ? 0 : (sum * sum) / squares;
  return {
    ln: count === 0 ? -Infinity : lnX + top + Math.log(sum / count),
    lnMost: lnX + top,
    error: count === 0 ? 0 : Math.sqrt(Math.max(1 / effective - 1 / count, 0)),
    effective,
  };
}

/** Whether the live points' mean, by their scatter, leaves next to no error in Z. */
function isSettled(alive: readonly LivePoint[], { lnX, lnZ }: { lnX: number; lnZ: number }) {
  const { ln, lnMost, error } = restOf(alive, lnX);
  return lnMost < lnZ && error / (1 + Math.exp(lnZ - ln)) < SETTLED;
}

interface LivePoint {
  u: Float64Array;
  ln: number;
}

function drawFromCube(
  logDensity: (u: Float64Array) => number,
  { dimension, live, random, mayGoOn }: RunOptions,
): { alive: LivePoint[]; empty: number } {
  const alive: LivePoint[] = [];
  let empty = 0;
  while (alive.length < live && alive.length + empty < MOST_PRIOR_DRAWS) {
    // Those that every run begins with are drawn whatever they cost.
    if (alive.length + empty >= live && !mayGoOn()) break;
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
