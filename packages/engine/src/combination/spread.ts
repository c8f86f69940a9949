import { asymmetricVariance } from "../block/asymmetric";
import { convolved } from "../block/convolution";
import { censoredFactor, fainterFactor, linearNoiseFactor } from "../block/factors";
import type { Factor } from "../block/problem";
import { tiedLikelihood } from "./tied-likelihood";
import { trueValueDensity, type Likelihood } from "./true-value-density";
import { interpolatedLog } from "./interpolated-log";
import { generalisedLeastSquares } from "./least-squares";
import { drawName, levelRows } from "./level-rows";
import type { Density } from "../distribution/density";
import type { Reading, Told } from "../readings";
import type { Workspace } from "../workspace";

/**
 * The density of a measurand's true value where limits, linear noise or asymmetric values beside
 * them leave it no normal one: likelihoods multiplied, times the reference unless it is `flat`.
 *
 * Values are one normal likelihood; what no other measurement shares widens a limit. Where limits
 * or asymmetric values share errors with others, or a shared error is relative, the shared errors
 * are integrated anew at each level.
 */
export function spreadOf(
  workspace: Workspace,
  measurand: number,
  { flat }: { flat: boolean },
): Density | null {
  const reference = workspace.frame.measurands[measurand]!.roles[0]!;
  if (reference.kind !== "uniform" && reference.kind !== "normal") return null;
  const apart = likelihoodsApart(workspace, measurand);
  const likelihoods = isTied(workspace, measurand)
    ? [tiedLikelihood(workspace, measurand, apart)]
    : apart;
  return trueValueDensity(likelihoods, flat ? null : reference);
}

/** Whether draws or correlations couple what isn't Gaussian to others, or scale with the level. */
function isTied({ frame, sums }: Workspace, measurand: number): boolean {
  const { patterns, kept } = sums.measurands[measurand]!;
  const uses = new Map<string, { any: number; odd: number }>();
  let relative = false;
  const use = (name: string, odd: boolean) => {
    const { any, odd: before } = uses.get(name) ?? { any: 0, odd: 0 };
    uses.set(name, { any: any + 1, odd: before + (odd ? 1 : 0) });
  };
  for (const place of patterns) {
    const pattern = sums.patterns[place]!;
    relative ||= pattern.relative.includes(true);
    for (const draw of pattern.draws) {
      const { error, batch } = sums.draws[draw]!;
      use(drawName(error, batch), false);
    }
  }
  for (const { id, told, loadings } of kept) {
    const odd = told.form !== "value" && told.form !== "zero";
    if (odd && frame.correlated.has(id)) return true;
    for (const one of loadings) {
      relative ||= one.relative;
      if (told.form === "asymmetric") return true;
      use(drawName(one.error, one.batch), odd);
    }
  }
  return relative || [...uses.values()].some(({ any, odd }) => odd > 0 && any > 1);
}

/** Each measurement's own likelihood of the level, the Gaussian ones' as one. */
function likelihoodsApart(workspace: Workspace, measurand: number): Likelihood[] {
  const { frame, sums } = workspace;
  const { scatterVariance } = frame.measurands[measurand]!;
  const likelihoods: Likelihood[] = [];
  const { rows, readings, groups } = levelRows(workspace, measurand, 0);
  const gaussian = rows.map((_, i) => readings[i]?.told.form !== "asymmetric");
  const places = new Map<number, number>();
  gaussian.forEach((one, i) => one && places.set(i, places.size));
  const kept = rows.filter((_, i) => gaussian[i]);
  if (kept.length > 0) {
    const inside = groups
      .filter((group) => group.rows.every((row) => gaussian[row]))
      .map((group) => ({ ...group, rows: group.rows.map((row) => places.get(row)!) }));
    const fit = generalisedLeastSquares(kept, inside);
    if (fit !== null) likelihoods.push(normalLikelihood(fit));
  }
  for (const reading of sums.measurands[measurand]!.kept) {
    let extra = scatterVariance;
    for (const { value, relative } of reading.loadings) if (!relative) extra += value * value;
    const one = likelihoodOf(reading.told, extra);
    if (one === null) continue;
    // An integral each time it is asked, but for a censored one.
    const costly = extra > 0 && reading.told.form !== "censored";
    likelihoods.push(costly ? { ...one, ln: interpolatedLog((mu) => one.ln(mu), one) } : one);
  }
  return likelihoods;
}

function normalLikelihood({ value, sd }: { value: number; sd: number }): Likelihood {
  return { ln: (mu) => -(((mu - value) / sd) ** 2) / 2, centre: value, scale: sd, breaks: [] };
}

/** Null for what is Gaussian. */
function likelihoodOf(told: Told, extra: number): Likelihood | null {
  if (told.form !== "asymmetric") return factorOf(told, { extra, centre: 0 });
  const { y, plus, minus } = told;
  const plain: Factor = {
    ln: (mu) => -((mu - y) ** 2) / (2 * asymmetricVariance(mu - y, plus, minus)),
    centre: y,
    scale: Math.max(plus, minus),
    breaks: [y - minus, y + plus],
    residual: null,
    box: null,
  };
  return extra > 0 ? convolved(plain, extra) : plain;
}

/** A limit's or a linear noise's factor; null for another form. */
function factorOf(
  told: Reading["told"],
  { extra, centre }: { extra: number; centre: number },
): Factor | null {
  switch (told.form) {
    case "censored": {
      const side = told.side === "upper" ? 1 : -1;
      return censoredFactor({ limit: told.y - centre, sd: told.sd, side, extra });
    }
    case "linear-noise":
      return linearNoiseFactor({ value: told.value, sd: told.sd, extra, centre });
    case "fainter":
      return fainterFactor({ limit: told.y - centre, sigmas: told.sigmas, extra });
    default:
      return null;
  }
}
