import type { Ensemble, Measurand, Parameter, Prior, Scale } from "../document";
import type { Expression } from "../expression";
import type { Legible } from "../form";
import type { PredictionPlace } from "./prediction-place";

/** Draws of parameters, and points of conditions, at which an expression is tried. */
const DRAWS = 256;
const CONDITION_POINTS = 16;
/** The 1 % and 99 % points of the standard normal and half-normal (Abramowitz & Stegun 26.2). */
const NORMAL_99 = 2.3263478740408408;
const HALF_NORMAL_01 = 0.012533469508069276;
const HALF_NORMAL_99 = 2.5758293035489004;

/**
 * Whether an expression is finite (positive on log10, a rate on counts) at one of the points tried: the middle of
 * the priors, then a Halton sequence over their 1 % to 99 % range, each with an ensemble row,
 * at the ends and between the ends of the measurand's `where`.
 *
 * True also where a condition has no bounds to try between: then nothing can be said.
 */
export function hasValueSomewhere(
  expression: Expression,
  place: PredictionPlace,
  conditions: ReadonlySet<string>,
): boolean {
  const { hypothesis, measurand, observable } = place;
  const parameters = (hypothesis.parameters ?? []) as Parameter[];
  const used = parameters.filter(({ key }) => expression.names.has(key));
  const ensemble = hypothesis.ensemble as Ensemble | null;
  const rows = ensemble === null ? 1 : (Object.values(ensemble.columns)[0]?.length ?? 1);
  const ranges = rangesOf(measurand, conditions, expression);
  if (ranges === null) return true;
  const points = ranges.length === 0 ? 1 : CONDITION_POINTS;
  const draws = used.length === 0 ? rows : Math.max(DRAWS, rows);
  for (let draw = 0; draw < draws; draw++) {
    const scope: Record<string, number> = {};
    used.forEach(({ key, prior }, dimension) => {
      scope[key] = quantile(prior, draw === 0 ? 0.5 : halton(draw, dimension));
    });
    for (const [name, column] of Object.entries(ensemble?.columns ?? {})) {
      scope[name] = column[draw % rows]!;
    }
    for (let point = 0; point < points; point++) {
      ranges.forEach(([name, lower, upper], dimension) => {
        scope[name] = lower + (upper - lower) * spread(point, dimension);
      });
      const value = expression.evaluate(scope);
      if (Number.isFinite(value) && value > lowestBelow(observable?.scale)) return true;
    }
  }
  return false;
}

/** What a value has to lie above: a logarithm needs more than 0, a rate at least 0. */
function lowestBelow(scale: Scale | undefined): number {
  if (scale === "log10") return 0;
  return scale === "count" ? -Number.MIN_VALUE : -Infinity;
}

function rangesOf(
  measurand: Legible<Measurand> | undefined,
  conditions: ReadonlySet<string>,
  expression: Expression,
): [string, number, number][] | null {
  const ranges: [string, number, number][] = [];
  for (const name of expression.names) {
    if (!conditions.has(name)) continue;
    const [lower, upper] = measurand?.where?.[name] ?? [];
    if (typeof lower !== "number" || typeof upper !== "number") return null;
    ranges.push([name, lower, upper]);
  }
  return ranges;
}

/** Both ends first, then points between. */
function spread(point: number, dimension: number): number {
  return point < 2 ? point : halton(point, dimension);
}

/** A point between the 1 % and the 99 % of a prior; exact at both ends, monotonic between. */
function quantile(prior: Prior, u: number): number {
  switch (prior.family) {
    case "normal":
      return prior.mean + prior.sd * NORMAL_99 * (2 * u - 1);
    case "lognormal":
      return prior.median * 10 ** (prior.sdLog10 * NORMAL_99 * (2 * u - 1));
    case "halfnormal":
      return prior.sd * (HALF_NORMAL_01 + (HALF_NORMAL_99 - HALF_NORMAL_01) * u);
    case "uniform":
      return prior.lower + (prior.upper - prior.lower) * (0.01 + 0.98 * u);
    case "loguniform":
      return prior.lower * (prior.upper / prior.lower) ** (0.01 + 0.98 * u);
    case "fixed":
      return prior.value;
  }
}

const PRIMES = [2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53];

/** The radical inverse of an index in a prime base (Halton 1960). */
function halton(index: number, dimension: number): number {
  const base = PRIMES[dimension % PRIMES.length]!;
  let value = 0;
  let weight = 1 / base;
  for (let rest = index; rest > 0; rest = Math.floor(rest / base)) {
    value += (rest % base) * weight;
    weight /= base;
  }
  return value;
}
