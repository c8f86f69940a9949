import {
  gammaFromMoments,
  logGammaPdf,
  type GammaDistribution,
} from "@weighhouse/numerics/gamma-distribution";
import {
  logPoissonPmf,
  poissonCdf,
  poissonUpperTail,
} from "@weighhouse/numerics/poisson-distribution";
import { averageOver, densityOf, densityTail } from "../distribution/density";
import type { Distribution } from "../distribution/distribution";
import type { RateRole } from "../frame";
import type { Reading } from "../readings";

export interface CountReading {
  count: number;
  exposure: number;
  background: number;
}

/** A rate after its counts, and ln of their probability under what was said of it. */
export interface CountedRate {
  distribution: Distribution;
  lnEvidence: number;
}

/**
 * The rate's density, prior x product of Poisson(n_i; exposure_i rate + background_i), and its
 * integral.
 *
 * Without backgrounds under a gamma prior it is a gamma of shape + sum n and 1/scale + sum exposure;
 * else it is normalised by quadrature.
 *
 * @param prior a spread one
 * @returns null where it is zero everywhere
 * Accuracy: 1e-11 in ln.
 */
export function countedRate(
  prior: Exclude<RateRole, { family: "exact" }>,
  readings: readonly CountReading[],
): CountedRate | null {
  let counted = 0;
  let exposure = 0;
  let background = 0;
  for (const one of readings) {
    counted += one.count;
    exposure += one.exposure;
    background += one.background;
  }
  const ln = (rate: number) => lnCounts(readings, rate);
  // About as far from the plain estimate as anything may count.
  const guess = Math.max(counted - background, 0) / exposure;
  const spread = Math.sqrt(counted + 1) / exposure;
  const breaks: number[] = [];
  for (const k of [0, 1, 2, 4, 8, 16, 32]) breaks.push(guess - k * spread, guess + k * spread);
  if (prior.family === "uniform") {
    const { lower, upper } = prior;
    const density = densityOf(ln, { lower, upper, breaks, scale: spread });
    if (density === null) return null;
    return { distribution: density, lnEvidence: density.lnWhole - Math.log(upper - lower) };
  }
  const { mean, sd } = prior;
  const gamma = gammaFromMoments(mean, sd);
  if (background === 0) return conjugate(gamma, { ln, counted, exposure });
  for (const rate of [mean / 8, mean / 2, mean, mean + sd, mean + 4 * sd]) breaks.push(rate);
  // Where the prior draws the counts' own peak far away.
  const known = exposure + 1 / gamma.scale;
  const drawn = Math.max(gamma.shape + counted - background, 0) / known;
  const width = Math.sqrt(gamma.shape + counted) / known;
  for (const k of [0, 1, 2, 4, 8, 16, 32]) breaks.push(drawn - k * width, drawn + k * width);
  return underGamma(gamma, { ln, breaks });
}

/** The evidence from prior x likelihood = evidence x posterior, at the posterior's mean. */
function conjugate(
  prior: GammaDistribution,
  { ln, counted, exposure }: { ln(rate: number): number; counted: number; exposure: number },
): CountedRate {
  const shape = prior.shape + counted;
  const scale = prior.scale / (1 + exposure * prior.scale);
  const rate = shape * scale;
  const lnEvidence = ln(rate) + logGammaPdf(rate, prior) - logGammaPdf(rate, { shape, scale });
  return { distribution: { kind: "gamma", shape, scale }, lnEvidence };
}

/**
 * A gamma that peaks at 0 is looked at over t = rate^shape, in which it is level there:
 * rate^(shape - 1) d rate = d t / shape.
 */
function underGamma(
  prior: GammaDistribution,
  { ln, breaks }: { ln: (rate: number) => number; breaks: readonly number[] },
): CountedRate | null {
  const { shape, scale } = prior;
  if (shape >= 1) {
    const whole = (rate: number) => logGammaPdf(rate, prior) + ln(rate);
    const density = densityOf(whole, { lower: 0, upper: Infinity, breaks, scale });
    return density === null ? null : { distribution: density, lnEvidence: density.lnWhole };
  }
  const rateOf = (t: number) => t ** (1 / shape);
  // What the prior's density is at any rate, but for rate^(shape - 1) e^(-rate / scale).
  const constant = logGammaPdf(scale, prior) - (shape - 1) * Math.log(scale) + 1;
  const density = densityOf((t) => ln(rateOf(t)) - rateOf(t) / scale, {
    lower: 0,
    upper: Infinity,
    breaks: breaks.filter((rate) => rate > 0).map((rate) => rate ** shape),
    scale: scale ** shape,
  });
  if (density === null) return null;
  const mean = averageOver(density, rateOf);
  const variance = averageOver(density, (t) => (rateOf(t) - mean) ** 2);
  return {
    distribution: {
      kind: "image",
      cdf: (rate) => (rate <= 0 ? 0 : densityTail(density, rate ** shape, "lower")),
      lower: 0,
      upper: rateOf(density.edges.at(-1)!),
      mean,
      sd: Math.sqrt(variance),
    },
    lnEvidence: density.lnWhole + constant - Math.log(shape),
  };
}

/** sum over readings of ln Poisson(n; exposure rate + background); -Infinity for no rate. */
export function lnCounts(readings: readonly CountReading[], rate: number): number {
  if (!(rate >= 0 && rate < Infinity)) return -Infinity;
  let sum = 0;
  for (const { count, exposure, background } of readings) {
    const mean = exposure * rate + background;
    sum += mean < Infinity ? logPoissonPmf(count, mean) : -Infinity;
  }
  return sum;
}

/** The counts among readings. */
export function countsOf(kept: readonly Reading[]): CountReading[] {
  const counts: CountReading[] = [];
  for (const { told } of kept) if (told.form === "count") counts.push(told);
  return counts;
}

/**
 * Two-sided p of a known rate, 2 min(P(N <= n), P(N >= n)) capped at 1, n and the mean summed over
 * the readings.
 */
export function exactRateP(rate: number, readings: readonly CountReading[]): number {
  let counted = 0;
  let mean = 0;
  for (const { count, exposure, background } of readings) {
    counted += count;
    mean += exposure * rate + background;
  }
  return Math.min(1, 2 * Math.min(poissonCdf(counted, mean), poissonUpperTail(counted, mean)));
}
