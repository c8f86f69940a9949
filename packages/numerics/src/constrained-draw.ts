import { distanceIn, drawDirection, drawInside, type Ellipsoid } from "./ellipsoid";
import { ellipsoidsAround, type LivePoints } from "./ellipsoid-union";
import type { RandomSource } from "./random-source";

/** Slices along random directions until a point has forgotten where it started. */
const SLICES_PER_DIMENSION = 2;
const MORE_SLICES = 4;
/** Calls that a slice costs, about. */
const CALLS_PER_SLICE = 4;
/** Proposals outside the cube in a row, before that counts as a rejected draw. */
const MOST_OUTSIDE = 500;

export interface Draw {
  u: Float64Array;
  ln: number;
}

/** Draws points uniformly from where the likelihood exceeds a bound. */
export interface ConstrainedDraw {
  /** Says anew where the live points are. */
  enclose: (live: LivePoints) => void;
  /** @param start one of the live points above the bound */
  draw: (bound: number, start: Float64Array) => Draw;
}

/**
 * By rejection: from the cube while that succeeds often, then from ellipsoids around the live
 * points (those in several are thinned by their number). Where rejection costs more than slices
 * do, slice sampling from a live point, along directions uniform in the metric of an ellipsoid;
 * the slice starts as long as that is wide, so that it need not be stepped out.
 *
 * Source: Feroz, Hobson & Bridges, MNRAS 398 (2009) 1601; Neal, Annals of Statistics 31 (2003) 705
 * (shrinkage, section 4); Handley, Hobson & Lasenby, MNRAS 453 (2015) 4384.
 */
export function constrainedDraw(
  logDensity: (u: Float64Array) => number,
  dimension: number,
  random: RandomSource,
): ConstrainedDraw {
  let ellipsoids: Ellipsoid[] = [];
  let lnVolume = Infinity;
  let shares: number[] = [];
  const slices = SLICES_PER_DIMENSION * dimension + MORE_SLICES;
  const patience = slices * CALLS_PER_SLICE;
  /** Calls that a rejected-until-accepted draw takes, a running mean. */
  let cost = 1;
  let untilRetry = 0;

  function enclose(live: LivePoints): void {
    ellipsoids = ellipsoidsAround(live, random);
    const largest = Math.max(...ellipsoids.map((one) => one.lnVolume));
    const sizes = ellipsoids.map((one) => Math.exp(one.lnVolume - largest));
    const total = sizes.reduce((sum, size) => sum + size, 0);
    lnVolume = largest + Math.log(total);
    let sum = 0;
    shares = sizes.map((size) => (sum += size) / total);
    untilRetry -= 1;
    if (cost > patience && untilRetry <= 0) cost = patience / 2;
  }

  function draw(bound: number, start: Float64Array): Draw {
    if (cost <= patience) {
      const u = new Float64Array(dimension);
      for (let calls = 1; calls <= 20 * patience; calls += 1) {
        const ln = propose(u) ? logDensity(u) : -Infinity;
        if (ln > bound) {
          cost += (calls - cost) / 40;
          return { u, ln };
        }
      }
      cost = 2 * patience;
    }
    if (untilRetry <= 0) untilRetry = 20;
    return bySlices(bound, start);
  }

  function propose(u: Float64Array): boolean {
    if (lnVolume > -0.5) {
      for (let i = 0; i < dimension; i += 1) u[i] = random.uniform();
      return true;
    }
    for (let tries = 0; tries < MOST_OUTSIDE; tries += 1) {
      drawInside(byVolume(), random, u);
      if (!insideCube(u)) continue;
      let around = 0;
      for (const one of ellipsoids) if (distanceIn(one, u, 0) <= one.radius) around += 1;
      if (around <= 1 || random.uniform() * around < 1) return true;
    }
    return false;
  }

  function byVolume(): Ellipsoid {
    const at = random.uniform();
    return ellipsoids[
      Math.max(
        shares.findIndex((share) => at <= share),
        0,
      )
    ]!;
  }

  function bySlices(bound: number, start: Float64Array): Draw {
    let from = start;
    let found = -Infinity;
    const direction = new Float64Array(dimension);
    const at = (along: number) => {
      const u = from.map((x, i) => x + along * direction[i]!);
      return { u, ln: insideCube(u) ? logDensity(u) : -Infinity };
    };
    for (let slice = 0; slice < slices; slice += 1) {
      // Chosen by volume: a choice by where the point is would favour some places over others.
      drawDirection(byVolume(), random, direction);
      let left = -2 * random.uniform();
      let right = left + 2;
      for (let tries = 0; tries < 200; tries += 1) {
        const along = left + random.uniform() * (right - left);
        const next = at(along);
        if (next.ln > bound) {
          [from, found] = [next.u, next.ln];
          break;
        }
        if (along < 0) left = along;
        else right = along;
      }
    }
    return { u: from, ln: found === -Infinity ? logDensity(from) : found };
  }

  return { enclose, draw };
}

function insideCube(u: Float64Array): boolean {
  for (const x of u) if (!(x > 0 && x < 1)) return false;
  return true;
}
