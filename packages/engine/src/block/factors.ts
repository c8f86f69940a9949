import {
  LN_SQRT_2PI,
  logNormalCdf,
  logNormalInterval,
  logNormalPdf,
} from "@weighhouse/numerics/normal";
import { convolved } from "./convolution";
import type { BlockRows, Factor } from "./problem";

/**
 * A censored reading: all that is known is that it lies below the limit (side 1) or above (-1),
 *
 *   Phi(side (limit - mu) / sqrt(sd^2 + extra))
 *
 * @param limit counted from the row's centre
 * @param extra variance of the row's own beside its noise (scatter, a tolerance of each one's)
 */
export function censoredFactor({
  limit,
  sd,
  side,
  extra,
}: {
  limit: number;
  sd: number;
  side: 1 | -1;
  extra: number;
}): Factor {
  const scale = Math.sqrt(sd * sd + extra);
  return {
    ln: (mu) => logNormalCdf((side * (limit - mu)) / scale),
    centre: limit,
    scale,
    breaks: [],
    residual: null,
    box: {
      lower: side > 0 ? -Infinity : limit,
      upper: side > 0 ? limit : Infinity,
      sd: scale,
      lnScale: 0,
    },
  };
}

/**
 * A reading whose noise is normal in the natural unit of an observable scored in log10,
 *
 *   N(value; 10^mu, sd),   mu ~ N(mu', extra) where there is an extra variance
 *
 * @param value of either sign
 * @param extra in dex squared
 * @param centre of the row: mu + centre is the log10
 */
export function linearNoiseFactor({
  value,
  sd,
  extra,
  centre,
}: {
  value: number;
  sd: number;
  extra: number;
  centre: number;
}): Factor {
  const clear = value > 3 * sd;
  const residual = (mu: number) => (value - Math.exp((mu + centre) * Math.LN10)) / sd;
  const plain: Factor = {
    ln: (mu) => {
      const r = residual(mu);
      return -(r * r) / 2 - Math.log(sd) - LN_SQRT_2PI;
    },
    centre: Math.log10(clear ? value : Math.max(value, 0) + sd) - centre,
    scale: clear ? sd / (value * Math.LN10) : 0.3,
    breaks: [],
    residual,
    box: null,
  };
  return extra > 0 ? convolved(plain, extra) : plain;
}

/**
 * A magnitude not reached: the flux was compatible with zero, its sigma the limit's flux over k,
 *
 *   phi(k 10^(-0.4 (mu - limit))),   mu ~ N(mu', extra) where there is an extra variance
 *
 * @param limit in magnitudes, counted from the row's centre
 * @param sigmas k > 0
 */
export function fainterFactor({
  limit,
  sigmas,
  extra,
}: {
  limit: number;
  sigmas: number;
  extra: number;
}): Factor {
  const plain: Factor = {
    ln: (mu) => {
      const z = sigmas * Math.exp(-0.4 * Math.LN10 * (mu - limit));
      return -(z * z) / 2 - LN_SQRT_2PI;
    },
    centre: limit + 2.5 * Math.log10(sigmas),
    scale: 1,
    breaks: [],
    residual: null,
    box: null,
  };
  return extra > 0 ? convolved(plain, extra) : plain;
}

/**
 * A row whose own tolerance is flat over [lower, upper],
 *
 *   [Phi((y - mu - lower) / s) - Phi((y - mu - upper) / s)] / (upper - lower)
 */
export function eachFlatFactor(rows: BlockRows, i: number): Factor {
  const y = rows.observed[i]!;
  const sd = Math.sqrt(rows.variance[i]!);
  const lower = rows.eachFlat!.lower[i]!;
  const upper = rows.eachFlat!.upper[i]!;
  const width = upper - lower;
  const lnScale = -Math.log(width);
  return {
    ln: (mu) => {
      const d = y - mu;
      const [from, to] = [(d - upper) / sd, (d - lower) / sd];
      // So far away that the two bounds are one number.
      if (!(from < to)) return logNormalPdf(from) - Math.log(sd);
      return logNormalInterval(from, to, width / sd) + lnScale;
    },
    centre: y - (lower + upper) / 2,
    scale: sd + width / 2,
    breaks: [y - upper, y - lower],
    residual: (mu) => {
      const d = y - mu;
      if (d > upper) return (d - upper) / sd;
      return d < lower ? (d - lower) / sd : 0;
    },
    box: { lower: y - upper, upper: y - lower, sd, lnScale },
  };
}
