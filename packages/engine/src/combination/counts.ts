import { gammaFromMoments, type GammaDistribution } from "@weighhouse/numerics/gamma-distribution";
import { poissonCdf, poissonUpperTail } from "@weighhouse/numerics/poisson-distribution";
import { averageOver, densityOf, densityTail } from "../distribution/density";
import type { Distribution } from "../distribution/distribution";
import type { RateRole } from "../frame";

export interface CountReading {
  count: number;
  exposure: number;
  background: number;
}

/**
 * The rate's density, reference x product of Poisson(n_i; exposure_i rate + background_i).
 *
 * Without backgrounds under a gamma reference it is a gamma of shape + sum n and 1/scale + sum
 * exposure; else it is normalised by quadrature.
 *
 * @returns null where it is zero everywhere
 */
export function rateDensity(
  reference: RateRole,
  readings: readonly CountReading[],
): Distribution | null {
  let counted = 0;
  let exposure = 0;
  for (const one of readings) {
    counted += one.count;
    exposure += one.exposure;
  }
  const clean = readings.every(({ background }) => background === 0);
  if (reference.family === "gamma" && clean) {
    const { shape, scale } = gammaFromMoments(reference.mean, reference.sd);
    return { kind: "gamma", shape: shape + counted, scale: scale / (1 + exposure * scale) };
  }
  // About as far from the plain estimate as anything may count.
  const guess = Math.max(counted - backgroundOf(readings), 0) / exposure;
  const spread = Math.sqrt(counted + 1) / exposure;
  const breaks: number[] = [];
  for (const k of [0, 1, 2, 4, 8, 16, 32]) breaks.push(guess - k * spread, guess + k * spread);
  const ln = (rate: number) => lnLikelihood(readings, rate);
  if (reference.family === "uniform") {
    const { lower, upper } = reference;
    return densityOf(ln, { lower, upper, breaks, scale: spread });
  }
  if (reference.family === "exact") {
    throw new TypeError("a reference is spread: gamma or uniform");
  }
  const { mean, sd } = reference;
  for (const rate of [mean / 8, mean / 2, mean, mean + sd, mean + 4 * sd]) breaks.push(rate);
  return underGamma(gammaFromMoments(mean, sd), { ln, breaks });
}

/**
 * Over t = rate^shape, in which the gamma's own peak at 0, if it has one, is level:
 * rate^(shape - 1) d rate = d t / shape.
 */
function underGamma(
  { shape, scale }: GammaDistribution,
  { ln, breaks }: { ln: (rate: number) => number; breaks: readonly number[] },
): Distribution | null {
  if (shape >= 1) {
    const whole = (rate: number) =>
      (shape === 1 ? 0 : (shape - 1) * Math.log(rate)) - rate / scale + ln(rate);
    return densityOf(whole, { lower: 0, upper: Infinity, breaks, scale });
  }
  const rateOf = (t: number) => t ** (1 / shape);
  const places = breaks.filter((rate) => rate > 0).map((rate) => rate ** shape);
  const density = densityOf((t) => ln(rateOf(t)) - rateOf(t) / scale, {
    lower: 0,
    upper: Infinity,
    breaks: places,
    scale: scale ** shape,
  });
  if (density === null) return null;
  const mean = averageOver(density, rateOf);
  const variance = averageOver(density, (t) => (rateOf(t) - mean) ** 2);
  return {
    kind: "image",
    cdf: (rate) => (rate <= 0 ? 0 : densityTail(density, rate ** shape, "lower")),
    lower: 0,
    upper: rateOf(density.edges.at(-1)!),
    mean,
    sd: Math.sqrt(variance),
  };
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

/** Without ln n!, which no rate moves. */
function lnLikelihood(readings: readonly CountReading[], rate: number): number {
  let sum = 0;
  for (const { count, exposure, background } of readings) {
    const mean = exposure * rate + background;
    sum -= mean;
    if (count > 0) sum += count * Math.log(mean);
  }
  return sum;
}

function backgroundOf(readings: readonly CountReading[]): number {
  let sum = 0;
  for (const { background } of readings) sum += background;
  return sum;
}
