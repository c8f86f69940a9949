import { addRow, createSystem } from "@weighhouse/numerics/triangular-system";
import { boundedLeastSquares } from "./bounded-least-squares";
import { nearAndFar, outerMinima } from "./fit";
import type { Integrand } from "./integrand";
import { layoutOf } from "./layout";
import type { OpenPart } from "./open-part";
import { workbenchOf, type Workbench } from "./workbench";

/** Minima of chi-square further above the lowest than this weigh nothing. */
const FAR = 120;
const MOST_MINIMA = 3;
const MORE = 12;

export interface Starts {
  starts: Float64Array[];
  /** The next best. */
  more: () => Float64Array[];
}

/**
 * Where to look for an integrand's peaks: chi-square's minima, and the best of points spread over
 * the outer unknowns' priors; the linear unknowns there as if every factor were normal.
 */
export function startsOf(bench: Workbench, integrand: Integrand): Starts {
  const { problem } = bench.layout;
  const size = problem.outer.length;
  const tries = Math.min(16 + 8 * size, 80);
  const scattered = nearAndFar(problem.outer, size === 0 ? 1 : tries).map((c) =>
    completed(bench, integrand, c),
  );
  const minima = size === 0 ? [] : minimaOf(bench, integrand.scenario);
  const ranked = scattered
    .map((c) => ({ c, ln: integrand.lnWithError(c).ln }))
    .filter(({ ln }) => ln > -Infinity)
    .sort((a, b) => b.ln - a.ln)
    .map(({ c }) => c);
  const few = minima.length > 0 ? 2 : 4;
  const starts = minima.map((c) => completed(bench, integrand, c));
  starts.push(...ranked.slice(0, few));
  if (size === 0)
    starts.push(
      new Float64Array(integrand.coordinates.length).map((_, j) => {
        const { lower, upper } = integrand.coordinates[j]!;
        return lower > -Infinity ? (lower + upper) / 2 : 0;
      }),
    );
  return { starts, more: () => ranked.slice(few, few + MORE) };
}

const fittings = new WeakMap<Workbench, Workbench | null>();

/** The same block laid out for a fit; null where chi-square counts none of its rows. */
function fittingBench(bench: Workbench): Workbench | null {
  const there = fittings.get(bench);
  if (there !== undefined) return there;
  const made = workbenchOf(layoutOf(bench.layout.problem, "fit"));
  const fitting = made.ok && made.bench.layout.gaussian.length > 0 ? made.bench : null;
  fittings.set(bench, fitting);
  return fitting;
}

function minimaOf(bench: Workbench, scenario: number): Float64Array[] {
  const fitting = fittingBench(bench);
  if (fitting === null) return [];
  const found = outerMinima(fitting, scenario, nearAndFar(bench.layout.problem.outer, 5));
  if ("singular" in found) return [];
  const near = found.filter(({ chiSquare }) => chiSquare < found[0]!.chiSquare + FAR);
  return near.slice(0, MOST_MINIMA).map(({ outer }) => outer);
}

/** Outer coordinates with the best values of the others after them. */
function completed(bench: Workbench, integrand: Integrand, outer: Float64Array): Float64Array {
  const c = new Float64Array(integrand.coordinates.length);
  c.set(outer);
  if (integrand.rank + integrand.flats === 0) return c;
  const found = integrand.openAt(outer);
  if (found !== null) c.set(asIfNormal(bench, found.part), integrand.outer);
  return c;
}

/** Directions and flat unknowns at their best if each factor were normal about its centre. */
function asIfNormal({ layout }: Workbench, part: OpenPart): Float64Array {
  const { rank, flats, flatSystem, centre, normalLoadings, flatLoadings } = part;
  const size = rank + flats;
  const system = createSystem(size);
  const row = new Float64Array(size + 1);
  for (let r = 0; r < rank; r += 1) {
    row.fill(0);
    row[r] = 1;
    addRow(system, row, r);
  }
  for (let i = 0; i < flats; i += 1) {
    row.fill(0);
    row.set(flatSystem.subarray(i * (flats + 1), (i + 1) * (flats + 1)), rank);
    addRow(system, row, rank);
  }
  for (let o = 0; o < centre.length; o += 1) {
    const factor = layout.factors[o]!;
    const weight = 1 / factor.scale;
    for (let r = 0; r < rank; r += 1) row[r] = weight * normalLoadings[o * rank + r]!;
    for (let f = 0; f < flats; f += 1) row[rank + f] = weight * flatLoadings[o * flats + f]!;
    row[size] = weight * (factor.centre - centre[o]!);
    addRow(system, row);
  }
  const lower = new Float64Array(size).fill(-Infinity);
  const upper = new Float64Array(size).fill(Infinity);
  layout.bounds.slice(0, flats).forEach((one, f) => {
    lower[rank + f] = one.lower;
    upper[rank + f] = one.upper;
  });
  return boundedLeastSquares(system, { lower, upper }).values;
}
