import { findRoot } from "@weighhouse/numerics/find-root";
import type { TriangularSystem } from "@weighhouse/numerics/triangular-system";

import type { Conditional } from "./conditional";
import { backSubstitute, varianceGivenTail } from "./elimination";
import { integrandOf, type Integrand } from "./integrand";
import type { Integral } from "./integrate";
import type { OpenPart } from "./open-part";
import { sharesOutside } from "./over-box";
import type { BlockProblem, LinearPosterior, PosteriorPiece } from "./problem";
import { integralOf, type ScenarioEvidence } from "./scenario-integral";
import type { Workbench } from "./workbench";

/** Points of less than this share of the posterior aren't kept. */
const NO_WEIGHT = 1e-14;
/** Bounds that cut off less than this are as good as none for means and quantiles. */
const NEGLIGIBLE_SHARE = 1e-9;

export interface Scenarios {
  shares: Float64Array;
  found: readonly ScenarioEvidence[];
}

export function posteriorOf(bench: Workbench, { shares, found }: Scenarios): PosteriorPiece[] {
  const pieces: PosteriorPiece[] = [];
  found.forEach((one, r) => {
    if (shares[r]! <= NO_WEIGHT) return;
    const { integrand, integral } = withPoints(bench, one);
    integral.points.forEach((point, n) => {
      const weight = shares[r]! * integral.weights[n]!;
      if (weight <= NO_WEIGHT) return;
      let linear: LinearPosterior | null = null;
      pieces.push({
        weight,
        scenario: integrand.scenario,
        outer: integrand.valuesAt(point),
        linear: () => (linear ??= linearAt(bench, integrand, point)),
      });
    });
  });
  let sum = 0;
  for (const { weight } of pieces) sum += weight;
  for (const piece of pieces) piece.weight /= sum;
  return pieces;
}

const known = new WeakMap<ScenarioEvidence, ScenarioEvidence>();

/** The integral once more where its points don't tell the linear unknowns; done once. */
function withPoints(bench: Workbench, one: ScenarioEvidence): ScenarioEvidence {
  const there = known.get(one);
  if (there !== undefined) return there;
  const made = integratedForPoints(bench, one);
  known.set(one, made);
  return made;
}

function integratedForPoints(bench: Workbench, one: ScenarioEvidence): ScenarioEvidence {
  const { layout } = bench;
  if (one.integral.points.length === 0) {
    const integral = integralOf(bench, one.integrand);
    return "refusal" in integral ? one : { integrand: one.integrand, integral };
  }
  if (layout.size === layout.open || one.integrand.flats > 0) return one;
  let best = 0;
  one.integral.weights.forEach((weight, n) => {
    if (weight > one.integral.weights[best]!) best = n;
  });
  const found = one.integrand.openAt(one.integral.points[best]!);
  if (found !== null && isInformed(found.conditional.eliminated.tail)) {
    const shares = sharesOutside(found.conditional.eliminated.tail, layout.bounds);
    if (shares.every((share) => share < NEGLIGIBLE_SHARE)) return one;
  }
  const integrand = integrandOf(bench, one.integrand.scenario, { flatsOpen: true });
  const integral = integralOf(bench, integrand);
  // More of them than can be integrated: as if they had no bounds.
  return "refusal" in integral ? one : { integrand, integral };
}

function isInformed({ size, data }: TriangularSystem): boolean {
  for (let i = 0; i < size; i += 1) if (data[i * (size + 1) + i] === 0) return false;
  return true;
}

function linearAt(bench: Workbench, integrand: Integrand, point: Float64Array): LinearPosterior {
  const { layout } = bench;
  const { place, inner, size } = layout;
  const found = integrand.openAt(point);
  if (found === null) throw new RangeError("a point of the posterior has a likelihood");
  const { conditional, part } = found;
  const open = integrand.rank + integrand.flats > 0 || layout.others.length > 0;
  const at = point.subarray(integrand.outer);
  const values = new Float64Array(size);
  const tail = open ? openTail(conditional, part, at) : wholeTail(conditional.eliminated.tail);
  values.set(tail.values, inner);
  backSubstitute(conditional.eliminated, values);
  const a = new Float64Array(size);
  return {
    mean: Float64Array.from(place, (p) => values[p]!),
    spread: (loadings) => {
      a.fill(0);
      place.forEach((p, k) => (a[p] = loadings[k]!));
      const given = varianceGivenTail(conditional.eliminated, a);
      return Math.sqrt(given + tail.variance(a.subarray(inner)));
    },
  };
}

interface Tail {
  values: Float64Array;
  /** Of a't, t the tail's unknowns. */
  variance(a: Float64Array): number;
}

/** The tail without bounds: t = R^-1 q, covariance (R'R)^-1. */
function wholeTail(system: TriangularSystem): Tail {
  return {
    values: solved(system, system.size, new Float64Array(system.size)),
    variance: (a) => squared(transposed(system, system.size, a)),
  };
}

/** Directions w and flat unknowns f given; of the normal unknowns what w leaves open. */
function openTail({ eliminated }: Conditional, part: OpenPart, at: Float64Array): Tail {
  const { rank, flats, basis } = part;
  const system = eliminated.tail;
  const normals = system.size - flats;
  const values = new Float64Array(system.size);
  for (let f = 0; f < flats; f += 1) values[normals + f] = at[rank + f]!;
  const turned = new Float64Array(normals);
  for (let r = 0; r < rank; r += 1) {
    for (let j = 0; j < normals; j += 1) turned[j]! += basis[r * normals + j]! * at[r]!;
  }
  for (let j = 0; j < normals; j += 1) values[j] = turned[j]!;
  const means = solved(system, normals, values);
  return {
    values: means,
    variance: (a) => {
      const b = transposed(system, normals, a);
      let sum = squared(b);
      for (let r = 0; r < rank; r += 1) {
        let along = 0;
        for (let j = 0; j < normals; j += 1) along += basis[r * normals + j]! * b[j]!;
        sum -= along * along;
      }
      return Math.max(sum, 0);
    },
  };
}

/** The first `count` unknowns from R t = q + shift, the others as given; `given` holds both. */
function solved({ size, data }: TriangularSystem, count: number, given: Float64Array) {
  const values = given.slice();
  for (let i = count - 1; i >= 0; i -= 1) {
    const start = i * (size + 1);
    let rest = data[start + size]! + given[i]!;
    for (let k = i + 1; k < size; k += 1) rest -= data[start + k]! * values[k]!;
    values[i] = rest / data[start + i]!;
  }
  return values;
}

/** R^-T a over the first `count` unknowns. */
function transposed({ size, data }: TriangularSystem, count: number, a: Float64Array) {
  const b = a.slice(0, count);
  for (let i = 0; i < count; i += 1) {
    b[i] = b[i]! / data[i * (size + 1) + i]!;
    for (let k = i + 1; k < count; k += 1) b[k]! -= data[i * (size + 1) + k]! * b[i]!;
  }
  return b;
}

function squared(vector: Float64Array): number {
  let sum = 0;
  for (const value of vector) sum += value * value;
  return sum;
}

/**
 * Posterior quantile of a flat linear unknown that was integrated numerically, from the integrals'
 * own distribution functions; null where its bounds cut off nothing, or the pieces alone tell it.
 */
export function flatQuantileOf(
  bench: Workbench,
  { shares, found }: Scenarios,
): (unknown: number, p: number) => number | null {
  let counted: { cdf: Integral["cdf"]; share: number; first: number }[] | null = null;
  return (unknown, p) => {
    counted ??= found.flatMap((one, r) => {
      if (shares[r]! <= NO_WEIGHT) return [];
      const { integrand, integral } = withPoints(bench, one);
      const first = integrand.flats > 0 ? integrand.outer + integrand.rank : -1;
      return [{ cdf: integral.cdf, share: shares[r]!, first }];
    });
    const flat = bench.layout.place[unknown]! - bench.layout.open;
    if (flat < 0 || counted.some(({ cdf, first }) => cdf === null || first < 0)) return null;
    const { lower, upper } = bench.layout.bounds[flat]!;
    const above = (t: number) => {
      let sum = -p;
      for (const { cdf, share, first } of counted!) sum += share * cdf!(first + flat, t);
      return sum;
    };
    // Nearly all of it may lie closer to a bound than numbers can tell.
    if (!(above(lower) < 0)) return lower;
    if (!(above(upper) > 0)) return upper;
    return findRoot(above, lower, upper, 1e-12 * (upper - lower));
  };
}

/** From the integrals' own distribution functions; null where there is none. */
export function outerQuantileOf(
  { outer }: BlockProblem,
  { shares, found }: Scenarios,
): ((unknown: number, p: number) => number) | null {
  const counted = found.flatMap(({ integral }, r) =>
    shares[r]! > NO_WEIGHT
      ? [{ cdf: integral.cdf, points: integral.points, share: shares[r]! }]
      : [],
  );
  if (outer.length === 0 || counted.length === 0) return null;
  if (counted.some(({ cdf }) => cdf === null)) return null;
  return (unknown, p) => {
    let lower = Infinity;
    let upper = -Infinity;
    for (const { points } of counted) {
      for (const point of points) {
        lower = Math.min(lower, point[unknown]!);
        upper = Math.max(upper, point[unknown]!);
      }
    }
    const above = (c: number) => {
      let sum = -p;
      for (const { cdf, share } of counted) sum += share * cdf!(unknown, c);
      return sum;
    };
    const one = outer[unknown]!;
    if (!(above(lower) < 0)) return one.valueAt(lower);
    if (!(above(upper) > 0)) return one.valueAt(upper);
    return one.valueAt(findRoot(above, lower, upper, 1e-12 * (upper - lower)));
  };
}
