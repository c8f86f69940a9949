import { gaussLegendre } from "@weighhouse/numerics/gauss-legendre";
import { LN_SQRT_2PI } from "@weighhouse/numerics/normal";
import { minimiseScalar } from "@weighhouse/numerics/minimise-scalar";
import { tabulated } from "./tabulated";
import type { Factor } from "./problem";

/** Beyond this many standard deviations a normal density is below 1e-18 of its height. */
const REACH = 9;

/**
 * A factor seen through a normal variance of the row's own,
 *
 *   ln int N(s; 0, extra) exp(f(mu + s)) ds,
 *
 * by Gauss-Legendre on panels that widen away from the product's peak, from the factor's own place
 * and from its kinks; and tabulated, since a row is asked for it thousands of times. In chi-square s
 * is one more thing that the minimum is taken over.
 *
 * @param extra variance > 0
 * Accuracy: 1e-11 in ln for factors smooth at their own scale.
 */
export function convolved(factor: Factor, extra: number): Factor {
  const sd = Math.sqrt(extra);
  const step = factor.breaks.length > 0 ? sd : Math.hypot(factor.scale, sd);
  return {
    ...factor,
    ln: tabulated((mu) => logConvolution(factor, sd, mu), { origin: factor.centre, step }),
    scale: Math.hypot(factor.scale, sd),
    residual: factor.residual === null ? null : profiled(factor, factor.residual, sd),
    box: null,
  };
}

/** Panels' edges about a peak, in units of its width. */
const EDGES = [0, 1.5, 4, 10, 25, 60, 150, 400, 1000];

/** And about a kink, in the factor's scale: beside one it may bend sharply. */
const NEAR_KINKS = [0, 0.02, 0.1, 0.4];

function logConvolution(factor: Factor, sd: number, mu: number): number {
  const g = (s: number) => factor.ln(mu + sd * s) - (s * s) / 2;
  const pull = (factor.centre - mu) / sd;
  const own = factor.scale / sd;
  const { peak, height, width } = peakOf(g, pull);
  if (height === -Infinity) return -Infinity;
  const kinks = factor.breaks.map((at) => (at - mu) / sd);
  // The product falls off from its peak at least as the normal does, wherever that peak lies.
  const lower = Math.min(-REACH, peak - REACH);
  const upper = Math.max(REACH, peak + REACH);
  const cuts = new Set([lower, upper]);
  for (const at of kinks) {
    for (const edge of NEAR_KINKS) cuts.add(at + edge * own).add(at - edge * own);
  }
  for (const edge of EDGES) {
    cuts.add(peak + edge * width).add(peak - edge * width);
    // A narrow factor beside the peak is another one.
    if (own < 0.5) cuts.add(pull + edge * own).add(pull - edge * own);
  }
  for (const at of [0, 3, 6]) cuts.add(at).add(-at);
  // Kinks have to stay where they are.
  const least = kinks.length > 0 ? 0 : Math.min(width, own) / 4;
  const sorted = apart([...cuts], { lower, upper, least });
  const f = (s: number) => Math.exp(g(s) - height);
  let sum = 0;
  for (let i = 1; i < sorted.length; i += 1) {
    const [from, to] = [sorted[i - 1]!, sorted[i]!];
    if (to > from && !isNothing(f, from, to)) sum += gaussLegendre(f, from, to);
  }
  const ln = height + Math.log(sum) - LN_SQRT_2PI;
  // Where the factor falls off faster than numbers can tell, there is nothing.
  return ln < Infinity ? ln : -Infinity;
}

/** In order, between the ends, those left out that lie next to the one before. */
function apart(
  cuts: number[],
  { lower, upper, least }: { lower: number; upper: number; least: number },
): number[] {
  cuts.sort((a, b) => a - b);
  const kept: number[] = [];
  for (const at of cuts) {
    if (at < lower || at > upper) continue;
    if (at === upper || kept.length === 0 || at - kept.at(-1)! >= least) kept.push(at);
  }
  return kept;
}

/** Whether a panel holds nothing that counts: f is below 1e-19 at both ends and between. */
function isNothing(f: (s: number) => number, from: number, to: number): boolean {
  return f(from) < 1e-19 && f(to) < 1e-19 && f((from + to) / 2) < 1e-19;
}

/** The product's highest place and how far from it it has fallen by half a nat. */
function peakOf(g: (s: number) => number, pull: number) {
  const reach = Math.max(REACH, Math.abs(pull));
  const places = new Set([0, pull, pull / 2, -1, 1, -3, 3, reach, -reach]);
  const looked = [...places].sort((a, b) => a - b);
  let best = 0;
  let height = -Infinity;
  looked.forEach((at, i) => {
    const value = g(at);
    if (value > height) [best, height] = [i, value];
  });
  const from = looked[Math.max(best - 1, 0)]!;
  const to = looked[Math.min(best + 1, looked.length - 1)]!;
  const found = minimiseScalar((s) => -g(s), from, to, 1e-4);
  let peak = looked[best]!;
  if (-found.value > height) [peak, height] = [found.x, -found.value];
  return { peak, height, width: height === -Infinity ? 1 : widthAt(g, peak, height) };
}

function widthAt(g: (s: number) => number, peak: number, height: number): number {
  let step = 1;
  for (let tries = 0; tries < 60; tries += 1) {
    const fall = Math.max(height - g(peak + step), height - g(peak - step));
    if (fall > 2) step /= fall > 200 ? 8 : 2;
    else if (fall < 0.1 && step < 1) step *= 1.5;
    else return Math.min(step / Math.sqrt(2 * Math.max(fall, 0.1)), 1);
  }
  return step;
}

/** The signed root of min over s of residual(mu + s)^2 + (s / sd)^2, kinks parting the search. */
function profiled({ breaks }: Factor, residual: (mu: number) => number, sd: number) {
  return (mu: number): number => {
    const at = residual(mu);
    const square = (s: number) => residual(mu + sd * s) ** 2 + s * s;
    // The best s costs no more than s = 0 does.
    const reach = Math.abs(at);
    if (reach === 0) return 0;
    const kinks = breaks.map((place) => (place - mu) / sd).filter((s) => Math.abs(s) < reach);
    const edges = [-reach, ...kinks.sort((a, b) => a - b), reach];
    let least = at * at;
    for (let e = 1; e < edges.length; e += 1) {
      const found = minimiseScalar(square, edges[e - 1]!, edges[e]!);
      least = Math.min(least, found.value, square(edges[e]!));
    }
    return Math.sign(at) * Math.sqrt(least);
  };
}
