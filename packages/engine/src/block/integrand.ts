import type { LogIntegral } from "@weighhouse/numerics/box";
import { lnBoxes } from "./boxes";
import { conditionalAt, conditionalBy, type Conditional } from "./conditional";
import { boundedCoordinate, normalCoordinate, type Coordinate } from "./coordinates";
import { startsFor } from "./fit";
import { fixedDesignOf } from "./fixed-design";
import { lnOpen, openPartOf, type OpenPart } from "./open-part";
import { workOfBox, workOfRows } from "./work";
import type { Workbench } from "./workbench";

/**
 * What is integrated numerically for one scenario: over the outer unknowns' coordinates, then over
 * directions of the normal unknowns, then over the flat ones (unless their boxes are closed forms).
 */
export interface Integrand {
  scenario: number;
  coordinates: readonly Coordinate[];
  outer: number;
  rank: number;
  flats: number;
  /** ln of the integrand, priors included; the error is that of the boxes at this point. */
  lnWithError(c: Float64Array): LogIntegral;
  /** Values of the outer unknowns. */
  valuesAt(c: Float64Array): Float64Array;
  /** The rest at given outer coordinates; null where the likelihood is zero. */
  openAt(c: Float64Array): { conditional: Conditional; part: OpenPart } | null;
  /** Rows found singular on the way; null for none. */
  singular(): number[] | null;
}

/** More kinks than these along one axis are left to the quadrature's own refinement. */
const MOST_BREAKS = 64;
const NOTHING: LogIntegral = { ln: -Infinity, error: 0 };

/** @param flatsOpen whether flat unknowns are coordinates */
export function integrandOf(
  bench: Workbench,
  scenario: number,
  { flatsOpen }: { flatsOpen: boolean },
): Integrand {
  const { problem, others, size, open, bounds } = bench.layout;
  const { outer, varying, outerFactor } = problem;
  const flats = flatsOpen ? size - open : 0;
  const openly = others.length > 0 || flats > 0;
  let singular: number[] | null = null;
  let shape: { most?: number; padded?: boolean } = {};
  const valuesAt = (c: Float64Array) => {
    const values = new Float64Array(outer.length);
    for (let j = 0; j < values.length; j += 1) values[j] = outer[j]!.valueAt(c[j]!);
    return values;
  };
  const conditional = (c: Float64Array): Conditional | null => {
    const found = conditionalAt(bench, valuesAt(c), scenario);
    if (found === null || !("singular" in found)) return found;
    singular = found.singular;
    return null;
  };
  const openAt = (c: Float64Array) => {
    const one = conditional(c);
    return one === null ? null : { conditional: one, part: openPartOf(bench, one, shape) };
  };
  const reference = openly ? referenceOf(bench, openAt) : null;
  const rank = reference?.rank ?? 0;
  shape = { most: rank, padded: varying.length > 0 };
  const fixed = outer.length === 0 && openly ? reference : null;
  const many = outer.length > 0 || problem.scenarios.length > 1;
  const design = many ? fixedDesignOf(bench) : null;
  const near = (c: Float64Array) =>
    design === null
      ? conditional(c)
      : conditionalBy(bench, design, { outer: valuesAt(c), scenario });
  const each = workOfRows(bench.layout);
  const density = (c: Float64Array): LogIntegral => {
    bench.work += each;
    let ln = 0;
    for (let j = 0; j < outer.length; j += 1) ln += outer[j]!.lnPrior(c[j]!);
    if (outerFactor !== undefined) ln += outerFactor(valuesAt(c), scenario);
    if (!(ln > -Infinity)) return NOTHING;
    if (!openly) {
      const one = near(c);
      if (one === null) return NOTHING;
      const box = lnBoxes(bench.layout, one.eliminated.tail);
      if (box.error > 0) bench.work += workOfBox(bounds.length);
      return { ln: ln + one.ln + box.ln, error: box.error };
    }
    const one = outer.length > 0 ? near(c) : null;
    const part = one === null ? fixed : openPartOf(bench, one, shape);
    if (part === null) return NOTHING;
    ln += lnOpen(bench, part, { at: c, from: outer.length });
    return Number.isNaN(ln) ? NOTHING : { ln, error: 0 };
  };
  // Under a quadrature that promises 1e-9, or a sampling that promises tenths.
  const sampled = outer.length + rank + flats > 3;
  if (outer.length > 0) bench.settledTo = sampled ? 1e-6 : 1e-11;
  const breaks = fixed !== null && rank + flats === 1 ? kinksOf(bench, fixed) : [];
  return {
    scenario,
    coordinates: [
      ...outer,
      ...Array.from({ length: rank }, () => normalCoordinate(breaks)),
      ...bounds.slice(0, flats).map((one) => boundedCoordinate(one, breaks)),
    ],
    outer: outer.length,
    rank,
    flats,
    lnWithError: density,
    valuesAt,
    openAt,
    singular: () => singular,
  };
}

/** The open part where the likelihood isn't zero: how many directions there are is told from it. */
function referenceOf({ layout }: Workbench, openAt: Integrand["openAt"]): OpenPart | null {
  for (const start of startsFor(layout.problem.outer, 32)) {
    const found = openAt(start);
    if (found !== null) return found.part;
  }
  return null;
}

function kinksOf({ layout }: Workbench, part: OpenPart): number[] {
  const kinks: number[] = [];
  const loadings = part.rank === 1 ? part.normalLoadings : part.flatLoadings;
  layout.factors.forEach(({ breaks }, o) => {
    if (loadings[o] === 0) return;
    for (const at of breaks) kinks.push((at - part.centre[o]!) / loadings[o]!);
  });
  return kinks.length > MOST_BREAKS ? [] : kinks.sort((a, b) => a - b);
}
