import { densityOf, type Density } from "../distribution/density";
import type { NormalRole, UniformRole } from "../frame";

/** One measurement's ln L(mu), with the place and the width that it varies over. */
export interface Likelihood {
  ln(mu: number): number;
  centre: number;
  scale: number;
  breaks: readonly number[];
}

/**
 * The true value's density where it isn't normal (section 6): the likelihoods multiplied, times the
 * reference where no ordinary value is among them, else times a flat one.
 *
 * @param reference null for flat; its own scatter isn't the true value's
 * @returns null where it is zero everywhere
 */
export function trueValueDensity(
  likelihoods: readonly Likelihood[],
  reference: NormalRole | UniformRole | null,
): Density | null {
  const breaks: number[] = [];
  for (const one of likelihoods) {
    breaks.push(...one.breaks);
    breaks.push(one.centre);
    for (const k of STEPS) breaks.push(one.centre - k * one.scale, one.centre + k * one.scale);
  }
  const scale = Math.min(...likelihoods.map((one) => one.scale));
  let [lower, upper] = [-Infinity, Infinity];
  if (reference?.kind === "uniform") ({ lower, upper } = reference);
  if (reference?.kind === "normal") {
    const { mean, sd } = reference;
    for (const k of [0, ...STEPS]) breaks.push(mean - k * sd, mean + k * sd);
  }
  const ln = (mu: number) => {
    let sum = reference?.kind === "normal" ? -(((mu - reference.mean) / reference.sd) ** 2) / 2 : 0;
    for (const one of likelihoods) sum += one.ln(mu);
    return sum;
  };
  return densityOf(ln, { lower, upper, breaks: thinned(breaks), scale });
}

const STEPS = [1, 3, 9, 27];
const MOST_BREAKS = 200;

/** Of very many, a part: those of like measurements lie close together. */
function thinned(breaks: number[]): number[] {
  if (breaks.length <= MOST_BREAKS) return breaks;
  const sorted = [...new Set(breaks)].sort((a, b) => a - b);
  const every = Math.ceil(sorted.length / MOST_BREAKS);
  return sorted.filter((_, i) => i % every === 0 || i === sorted.length - 1);
}
